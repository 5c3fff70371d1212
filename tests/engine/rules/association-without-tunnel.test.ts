import { associationWithoutTunnel } from '#engine/rules/association-without-tunnel.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

testRule(associationWithoutTunnel, {
  accepted: {
    'associations with tunnels': pairDesign({ segments: ['a', 'b'] }),
    'a bare tunnel beside others of the association': changed(pairDesign({ segments: ['a', 'b'] }), {
      tunnels: { 'tn-s0-s1-a': { association: null } },
    }),
  },
  rejected: {
    'one whose tunnel runs bare beside it': {
      design: changed(pairDesign(), { tunnels: { 'tn-s0-s1-a': { association: null } } }),
      findings: [
        {
          sentence: 'No tunnel runs inside as-s0-s1',
          words: 'protects nothing',
          severity: 'advisory',
          elements: ['associations/as-s0-s1'],
          fixes: ['Protect the tunnel', 'Remove as-s0-s1'],
        },
      ],
    },
    'one that is left over, with a note on it': {
      design: changed(hubDesign(2), {
        tunnels: { 'tn-s0-s2-a': null },
        forwarders: {
          'br-s0-a': { circuits: { 'tn-s0-s2-a': null } },
          'br-s2-a': { circuits: { 'tn-s0-s2-a': null } },
        },
        notes: { why: { text: 'Until spring', target: { collection: 'associations', id: 'as-s0-s2' } } },
      }),
      findings: [{ sentence: 'No tunnel runs inside as-s0-s2', fixes: ['Remove as-s0-s2'] }],
    },
  },
});
