import type { MergePatch } from '#engine/model/merge-patch.ts';
import { demandFlowLimited } from '#engine/rules/demand-flow-limited.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

const demand = (forwardBps: number, flows: number | undefined): MergePatch => ({
  demands: {
    copy: {
      name: 'Nightly copy',
      segment: 'a',
      from: { host: 'h-s1-a' },
      to: { host: 'h-s0-a' },
      forwardBps,
      reverseBps: 1000,
      ...(flows === undefined ? {} : { flows }),
    },
  },
});

// 0.93 × 1,356 bytes × 8 / (36 ms × √0.0002) = 19.8 Mbit/s: RFC 3819 section 8.5.1.
testRule(demandFlowLimited, {
  accepted: {
    'what one flow reaches': changed(pairDesign(), demand(19_000_000, 1)),
    'as many flows as it takes': changed(pairDesign(), demand(50_000_000, 3)),
    'nobody knows how many flows': changed(pairDesign(), demand(50_000_000, undefined)),
    'a transport that loses nothing': changed(pairDesign(), demand(50_000_000, 1), {
      transports: { coast: { lossPpm: 0 } },
    }),
    'a window that takes the round trip': changed(pairDesign(), demand(10_000_000, 1), {
      demands: { copy: { windowBytes: 65_535 } },
    }),
    'a transport of which no loss is known': changed(pairDesign(), demand(50_000_000, 1), {
      transports: { coast: { lossPpm: null } },
    }),
  },
  rejected: {
    'a single flow that shall fill a line': {
      design: changed(pairDesign(), demand(50_000_000, 1)),
      findings: [
        {
          sentence: 'Nightly copy needs 50 Mbit/s, loss leaves TCP 19.8 Mbit/s',
          words: 'flow too slow',
          severity: 'degrading',
          elements: ['demands/copy'],
          properties: ['demands/copy: forwardBps', 'demands/copy: flows'],
          fixes: ['Use 3 flows'],
        },
      ],
    },
    // RFC 7323 section 1.1: 65,535 bytes in a round trip of 36 ms are 14.6 Mbit/s; 18 Mbit/s need 81,000.
    'a window too small for the distance': {
      design: changed(pairDesign(), demand(18_000_000, 1), { demands: { copy: { windowBytes: 65_535 } } }),
      findings: [
        {
          sentence: 'Nightly copy needs 18 Mbit/s, its window leaves 14.6 Mbit/s',
          words: 'window too small',
          severity: 'advisory',
          properties: ['demands/copy: forwardBps', 'demands/copy: flows', 'demands/copy: windowBytes'],
          fixes: ['Use a window of 81000 bytes', 'Use 2 flows'],
        },
      ],
    },
  },
});
