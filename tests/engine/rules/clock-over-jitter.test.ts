import { clockOverJitter } from '#engine/rules/clock-over-jitter.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const clocked = { segments: { a: { protocols: ['ipv4', 'ptp'] } } };

testRule(clockOverJitter, {
  accepted: {
    'a segment without precision time': pairDesign(),
    'a transport of which no jitter is known': changed(pairDesign(), clocked, {
      transports: { coast: { jitterUs: null } },
    }),
    'a transport without jitter': changed(pairDesign(), clocked, { transports: { coast: { jitterUs: 0 } } }),
  },
  rejected: {
    'precision time over the internet, once for all tunnels': {
      design: changed(hubDesign(2), clocked),
      findings: [
        {
          sentence: 'PTP of segment A crosses Coastal access, jitter 3 ms',
          words: 'clock over jitter',
          severity: 'degrading',
          elements: ['segments/a', 'tunnels/tn-s0-s1-a', 'transports/coast'],
          properties: ['segments/a: protocols', 'transports/coast: jitterUs'],
          fixes: ['Don’t promise PTP'],
        },
      ],
    },
    'jitter of less than a millisecond': {
      design: changed(pairDesign(), clocked, { transports: { coast: { jitterUs: 250 } } }),
      findings: [
        {
          sentence: 'PTP of segment A crosses Coastal access, jitter 250 µs',
          fixes: ['Don’t promise PTP'],
        },
      ],
    },
  },
});
