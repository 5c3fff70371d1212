import { transportMtuUnknown } from '#engine/rules/transport-mtu-unknown.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

testRule(transportMtuUnknown, {
  accepted: {
    'a known MTU': pairDesign(),
    'a transport on which nobody lands yet': changed(pairDesign(), {
      transports: { ring: { name: 'Terminal ring', kind: 'own-routed' } },
    }),
  },
  rejected: {
    'a transport in use without an MTU': {
      design: changed(pairDesign(), { transports: { coast: { mtu: null } } }),
      findings: [
        {
          sentence: 'The MTU of Coastal access is not known',
          words: 'MTU unknown',
          severity: 'advisory',
          elements: ['transports/coast'],
          properties: ['transports/coast: mtu'],
          fixes: [],
        },
      ],
    },
  },
});
