import { transportModeThroughNat } from '#engine/rules/transport-mode-through-nat.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const modes = (a: string | null, b: string | null, nat: object | null) =>
  changed(pairDesign(), {
    associations: { 'as-s0-s1': { a: { mode: a }, b: { mode: b, start: 'starts' } } },
    links: { 'ld-s1-coast': { nat } as never },
    segments: { a: { mtu: 1280 } },
  });

testRule(transportModeThroughNat, {
  accepted: {
    'tunnel mode through NAT': modes('tunnel', 'tunnel', {}),
    'transport mode without NAT': modes('transport', 'transport', null),
    'modes that differ, which another check tells': modes('transport', 'tunnel', {}),
  },
  rejected: {
    'transport mode through NAT': {
      design: modes('transport', null, {}),
      findings: [
        {
          sentence: 'as-s0-s1 uses transport mode through NAT at Gullhaven',
          words: 'transport mode, NAT',
          severity: 'degrading',
          elements: ['associations/as-s0-s1', 'links/ld-s1-coast'],
          fixes: ['Tunnel mode at both ends'],
        },
      ],
    },
  },
});
