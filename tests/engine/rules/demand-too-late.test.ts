import type { MergePatch } from '#engine/model/merge-patch.ts';
import { demandTooLate } from '#engine/rules/demand-too-late.ts';
import { hubDesign, pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const demand = (latencyAllowedUs: number | undefined, more: MergePatch = {}): MergePatch => ({
  demands: {
    sales: {
      name: 'Ticket sales',
      segment: 'a',
      from: { host: 'h-s1-a' },
      to: { host: 'h-s0-a' },
      ...(latencyAllowedUs === undefined ? {} : { latencyAllowedUs }),
      ...(more as object),
    },
  },
});
const unknown: MergePatch = { transports: { coast: { latencyUs: null } } };

testRule(demandTooLate, {
  accepted: {
    'a design without demands': pairDesign(),
    'a demand that allows just as much': changed(pairDesign(), demand(18_000)),
    'a demand that allows any latency': changed(pairDesign(), demand(undefined), unknown),
  },
  rejected: {
    'a demand that allows less than the transport takes': {
      design: changed(pairDesign(), demand(10_000)),
      findings: [
        {
          sentence: 'Ticket sales takes 18 ms one way, 10 ms are allowed',
          words: 'latency too high',
          severity: 'blocking',
          elements: ['tunnels/tn-s0-s1-a', 'demands/sales'],
          properties: ['demands/sales: latencyAllowedUs'],
          fixes: [],
        },
      ],
    },
    'a demand through two tunnels, which nobody named': {
      design: changed(
        hubDesign(2),
        demand(35_500, { name: null, from: { host: 'h-s1-a' }, to: { host: 'h-s2-a' } }),
      ),
      findings: [
        {
          sentence: 'A demand of segment A takes 36 ms one way, 35.5 ms are allowed',
          elements: ['tunnels/tn-s0-s1-a', 'tunnels/tn-s0-s2-a', 'demands/sales'],
          fixes: [],
        },
      ],
    },
    'a transport of which no latency is known, once for all demands': {
      design: changed(pairDesign(), demand(10_000), unknown, {
        demands: {
          more: { segment: 'a', from: { host: 'h-s0-a' }, to: { host: 'h-s1-a' }, latencyAllowedUs: 50_000 },
        },
      }),
      findings: [
        {
          sentence: 'The latency of Coastal access is not known',
          words: 'latency unknown',
          severity: 'advisory',
          elements: ['transports/coast', 'demands/more', 'demands/sales'],
          properties: ['transports/coast: latencyUs'],
          fixes: [],
        },
      ],
    },
  },
});
