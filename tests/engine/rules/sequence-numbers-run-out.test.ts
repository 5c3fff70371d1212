import type { MergePatch } from '#engine/model/merge-patch.ts';
import { sequenceNumbersRunOut } from '#engine/rules/sequence-numbers-run-out.ts';
import { pairDesign } from '../../support/designs.ts';
import { changed, testRule } from '../../support/rule-tester.ts';

/** Packets of 125 bytes, so that 1 Mbit/s are 1,000 of them in a second. */
const demand = (forwardBps: number): MergePatch => ({
  demands: {
    control: {
      segment: 'a',
      from: { host: 'h-s1-a' },
      to: { host: 'h-s0-a' },
      forwardBps,
      reverseBps: 1000,
      mix: [{ packetBytes: 125, weight: 1 }],
    },
  },
});
const end = (childLifetimeSeconds: number, extendedSequence: boolean) => ({
  childLifetimeSeconds,
  extendedSequence,
});
const keys = (lifetimeSeconds: number, extendedA: boolean, extendedB: boolean): MergePatch => ({
  associations: { 'as-s0-s1': { a: end(lifetimeSeconds, extendedA), b: end(lifetimeSeconds, extendedB) } },
});

// 2^32 packets at 500,000 in a second last 8,589 seconds: RFC 4303 section 2.2.
testRule(sequenceNumbersRunOut, {
  accepted: {
    'extended numbers': changed(pairDesign(), demand(500_000_000), keys(86_400, true, true)),
    'keys that are renewed in time': changed(pairDesign(), demand(500_000_000), keys(8_589, false, false)),
    'few packets': changed(pairDesign(), demand(5_000_000), keys(86_400, false, false)),
    'no demands': changed(pairDesign(), keys(86_400, false, false)),
  },
  rejected: {
    'keys that live longer than their numbers, which one end alone would extend': {
      design: changed(pairDesign(), demand(500_000_000), keys(8_590, true, false)),
      findings: [
        {
          sentence: 'as-s0-s1 runs out of sequence numbers in 143 min',
          words: 'numbers run out',
          severity: 'degrading',
          elements: ['associations/as-s0-s1'],
          fixes: ['Use 64-bit numbers'],
        },
      ],
    },
  },
});
