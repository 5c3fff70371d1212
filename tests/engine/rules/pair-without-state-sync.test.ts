import { pairWithoutStateSync } from '#engine/rules/pair-without-state-sync.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const pair = pairDesign({ hub: 'ha-pair' });

testRule(pairWithoutStateSync, {
  accepted: {
    'a pair whose members share their state': pair,
    'a pair of which that is not known': changed(pair, { devices: { 'fw-s0': { stateSync: null } } }),
    'a pair that ends no association': changed(pairDesign({ hub: 'ha-pair', join: { protectedBy: false } }), {
      devices: { 'fw-s0': { stateSync: false } },
    }),
  },
  rejected: {
    'a pair whose members share nothing': {
      design: changed(pair, { devices: { 'fw-s0': { stateSync: false } } }),
      findings: [
        {
          sentence: 'fw-s0-1 and fw-s0-2 don’t share IPsec state',
          words: 'state not shared',
          severity: 'degrading',
          elements: ['devices/fw-s0'],
          properties: ['devices/fw-s0: stateSync'],
          fixes: ['Share the state'],
        },
      ],
    },
  },
});
