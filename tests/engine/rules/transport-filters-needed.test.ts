import { transportFiltersNeeded } from '#engine/rules/transport-filters-needed.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const filters = (...list: string[]) => ({ transports: { coast: { filters: list } } });

testRule(transportFiltersNeeded, {
  accepted: {
    'a transport of which no filter is known': pairDesign(),
    'filters of what nobody needs': changed(pairDesign(), filters('multicast', 'udp-4500', 'udp-4789')),
  },
  rejected: {
    'ESP filtered under an association': {
      design: changed(pairDesign(), filters('esp', 'multicast')),
      findings: [
        {
          sentence: 'Coastal access filters ESP, which as-s0-s1 needs',
          words: 'filtered on path',
          severity: 'blocking',
          elements: ['transports/coast', 'associations/as-s0-s1'],
          properties: ['transports/coast: filters'],
          fixes: [],
        },
      ],
    },
    'UDP 4500 filtered where there is NAT': {
      design: changed(pairDesign(), filters('udp-500', 'udp-4500'), {
        links: { 'ld-s0-coast': { nat: {} } },
        segments: { a: { mtu: 1380 } },
      }),
      findings: [
        { sentence: 'Coastal access filters UDP 4500 and UDP 500, which as-s0-s1 needs', fixes: [] },
      ],
    },
    'VXLAN filtered on one’s own transport, where it can be opened': {
      design: changed(
        pairDesign({ segments: ['a', 'b'], join: { protectedBy: false } }),
        filters('udp-4789', 'multicast'),
        { transports: { coast: { kind: 'own-routed', trusted: true } } },
      ),
      findings: [
        {
          sentence: 'Coastal access filters UDP 4789, which tn-s0-s1-a and tn-s0-s1-b need',
          fixes: ['Let it through'],
        },
      ],
    },
  },
});
