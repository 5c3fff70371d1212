import { tunnelWithoutCircuit } from '#engine/rules/tunnel-without-circuit.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const idle = (segments: readonly string[]) =>
  changed(pairDesign({ segments }), {
    forwarders: {
      'br-s0-a': { circuits: { 'tn-s0-s1-a': null } },
      'br-s1-a': { circuits: { 'tn-s0-s1-a': null } },
    },
  });

testRule(tunnelWithoutCircuit, {
  accepted: {
    'a tunnel in a forwarder at each end': pairDesign(),
    'one that one end holds, which is another rule’s': changed(pairDesign(), {
      forwarders: { 'br-s0-a': { circuits: { 'tn-s0-s1-a': null } } },
    }),
  },
  rejected: {
    'a tunnel that the only bridges leave out': {
      design: idle(['a']),
      findings: [
        {
          sentence: 'No forwarder holds tn-s0-s1-a at either end',
          words: 'carries nothing',
          severity: 'advisory',
          elements: ['tunnels/tn-s0-s1-a'],
          fixes: ['Put it to use', 'Remove tn-s0-s1-a'],
        },
      ],
    },
    'one where it isn’t clear which bridges are meant': {
      design: idle(['a', 'b']),
      findings: [{ sentence: 'No forwarder holds tn-s0-s1-a at either end', fixes: ['Remove tn-s0-s1-a'] }],
    },
  },
});
