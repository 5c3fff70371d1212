import { natKeepaliveTooSlow } from '#engine/rules/nat-keepalive-too-slow.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const behindNat = (natKeepaliveSeconds: number | null, nat: object | null) =>
  changed(pairDesign(), {
    associations: { 'as-s0-s1': { b: { natKeepaliveSeconds, start: 'starts' } } },
    links: { 'ld-s1-coast': { nat } as never },
    segments: { a: { mtu: 1280 } },
  });

testRule(natKeepaliveTooSlow, {
  accepted: {
    'a keepalive that is fast enough': behindNat(20, {}),
    'a slow one without NAT': behindNat(300, null),
    'a keepalive that is not known': behindNat(null, {}),
    'a slow one before a NAT that remembers longer': behindNat(150, { mappingSeconds: 180 }),
  },
  rejected: {
    'a keepalive slower than what is promised of any NAT': {
      design: behindNat(120, {}),
      findings: [
        {
          sentence: 'Keepalive every 120 s at Gullhaven, NAT forgets after 120 s',
          words: 'keepalive too slow',
          severity: 'degrading',
          elements: ['associations/as-s0-s1', 'links/ld-s1-coast'],
          properties: ['associations/as-s0-s1: b.natKeepaliveSeconds'],
          fixes: ['Every 20 s'],
        },
      ],
    },
    'a keepalive slower than this NAT': {
      design: behindNat(30, { mappingSeconds: 30 }),
      findings: [
        {
          sentence: 'Keepalive every 30 s at Gullhaven, NAT forgets after 30 s',
          fixes: ['Every 15 s'],
        },
      ],
    },
    'a NAT that forgets at once': {
      design: behindNat(30, { mappingSeconds: 1 }),
      findings: [{ sentence: 'Keepalive every 30 s at Gullhaven, NAT forgets after 1 s', fixes: [] }],
    },
  },
});
