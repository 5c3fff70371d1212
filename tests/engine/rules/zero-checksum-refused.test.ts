import { zeroChecksumRefused } from '#engine/rules/zero-checksum-refused.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const overSix = (a: object, b: object, family: 4 | 6 = 6) =>
  changed(pairDesign(), {
    endpoints: { 'lo-s0': { ipv6: '2001:db8:ff::1/128' }, 'lo-s1': { ipv6: '2001:db8:ff::2/128' } },
    associations: { 'as-s0-s1': { a: { selectors: null }, b: { selectors: null } } },
    tunnels: { 'tn-s0-s1-a': { family, a, b } as never },
    segments: { a: { mtu: 1280 } },
  });

testRule(zeroChecksumRefused, {
  accepted: {
    'zero over IPv4': overSix({ udpChecksum: 'zero' }, { takesZeroChecksum: false }, 4),
    'zero that is taken': overSix({ udpChecksum: 'zero' }, { takesZeroChecksum: true }),
    'zero before an end of which nothing is known': overSix({ udpChecksum: 'zero' }, {}),
    'a computed checksum': overSix({ udpChecksum: 'computed' }, { takesZeroChecksum: false }),
  },
  rejected: {
    'zero that is refused': {
      design: overSix({ takesZeroChecksum: false }, { udpChecksum: 'zero' }),
      findings: [
        {
          sentence: 'Zero UDP checksum from Gullhaven, refused at Head office',
          words: 'checksum refused',
          severity: 'blocking',
          elements: ['tunnels/tn-s0-s1-a'],
          properties: ['tunnels/tn-s0-s1-a: b.udpChecksum', 'tunnels/tn-s0-s1-a: a.takesZeroChecksum'],
          fixes: ['Take it at Head office', 'Compute it at Gullhaven'],
        },
      ],
    },
  },
});
