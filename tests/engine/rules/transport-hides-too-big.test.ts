import type { MergePatch } from '#engine/model/merge-patch.ts';
import { transportHidesTooBig } from '#engine/rules/transport-hides-too-big.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const filters = (...list: readonly string[]): MergePatch => ({
  transports: { coast: { filters: [...list] } },
});

testRule(transportHidesTooBig, {
  accepted: {
    'a transport that filters nothing': pairDesign(),
    'one that filters something else': changed(pairDesign(), filters('multicast')),
    'one over which nothing runs': changed(pairDesign(), {
      transports: { radio: { name: 'Radio link', kind: 'internet', filters: ['packet-too-big'] } },
    }),
  },
  rejected: {
    'a provider’s transport that hides them': {
      design: changed(pairDesign(), filters('packet-too-big')),
      findings: [
        {
          sentence: 'Coastal access filters packet-too-big messages',
          words: 'ICMP filtered',
          severity: 'degrading',
          elements: ['transports/coast'],
          properties: ['transports/coast: filters'],
          fixes: [],
        },
      ],
    },
    'one’s own transport, under a bare tunnel': {
      design: changed(pairDesign({ join: { protectedBy: false } }), filters('multicast', 'packet-too-big'), {
        transports: { coast: { kind: 'own-routed', trusted: true } },
      }),
      findings: [{ sentence: 'Coastal access filters packet-too-big messages', fixes: ['Let them through'] }],
    },
  },
});
