import { associationNeitherReachable } from '#engine/rules/association-neither-reachable.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const roomy = { segments: { a: { mtu: 1380 } } };

testRule(associationNeitherReachable, {
  accepted: {
    'fixed addresses without NAT': pairDesign(),
    'NAT at both ends, which is told elsewhere': changed(pairDesign(), roomy, {
      links: { 'ld-s0-coast': { nat: {} }, 'ld-s1-coast': { nat: {} } },
    }),
  },
  rejected: {
    'a changing address at one end and NAT at the other': {
      design: changed(pairDesign(), roomy, {
        links: { 'ld-s0-coast': { dynamic: true }, 'ld-s1-coast': { nat: {} } },
      }),
      findings: [
        {
          sentence: 'The address of Head office changes, and Gullhaven is behind NAT',
          words: 'neither reachable',
          severity: 'blocking',
          elements: ['associations/as-s0-s1', 'links/ld-s0-coast', 'links/ld-s1-coast'],
          properties: ['links/ld-s0-coast: dynamic', 'links/ld-s1-coast: nat'],
          fixes: ['Forward to Gullhaven'],
        },
      ],
    },
  },
});
