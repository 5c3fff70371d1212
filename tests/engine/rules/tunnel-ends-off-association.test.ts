import { tunnelEndsOffAssociation } from '#engine/rules/tunnel-ends-off-association.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const hub = hubDesign(2);

testRule(tunnelEndsOffAssociation, {
  accepted: {
    'ends on the association’s devices': pairDesign(),
    'a tunnel drawn the other way round than its association': changed(pairDesign(), {
      tunnels: {
        'tn-s0-s1-a': { a: { endpoint: 'lo-s1' }, b: { endpoint: 'lo-s0' } },
      },
    }),
    'a tunnel outside IPsec': changed(pairDesign(), { tunnels: { 'tn-s0-s1-a': { association: null } } }),
  },
  rejected: {
    'a tunnel inside the association of another site': {
      design: changed(hub, { tunnels: { 'tn-s0-s2-a': { association: 'as-s0-s1' } } }),
      findings: [
        {
          sentence: 'tn-s0-s2-a ends on fw-s2, off as-s0-s1',
          words: 'ends off association',
          severity: 'blocking',
          elements: ['tunnels/tn-s0-s2-a', 'associations/as-s0-s1'],
          properties: ['tunnels/tn-s0-s2-a: association', 'tunnels/tn-s0-s2-a: b.endpoint'],
          mark: { kind: 'cut', tunnel: 'tn-s0-s2-a' },
          fixes: ['Use as-s0-s2'],
        },
      ],
    },
    'a tunnel whose both ends are on one device': {
      design: changed(pairDesign(), { tunnels: { 'tn-s0-s1-a': { b: { endpoint: 'lo-s0' } } } }),
      findings: [
        {
          sentence: 'tn-s0-s1-a ends on fw-s0, off as-s0-s1',
          fixes: ['End it at lo-s1'],
        },
      ],
    },
  },
});
