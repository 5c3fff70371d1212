import type { Progress } from '../../lib/worker-run.ts';
import type { ElementRef } from '../../engine/model/design.ts';
import { indexNetwork } from '../../engine/network/index-network.ts';
import type { DesignFacts } from '../../engine/network/network.ts';
import { loneElements, singleFailure } from '../../engine/outage/every-single-failure.ts';
import { failovers, type Failover } from '../../engine/outage/failovers.ts';
import {
  pairCandidates,
  pairOfFailures,
  partedBy,
  type PairOfFailures,
} from '../../engine/outage/pairs-of-failures.ts';
import { smallestSegmentCuts, type SegmentCut } from '../../engine/outage/smallest-segment-cuts.ts';

/** What one failure parts, as much of it as a list shows. */
export interface FailureSummary {
  readonly element: ElementRef;
  readonly pairCount: number;
  /** Points that reach nobody any more, of all segments. */
  readonly cutOff: number;
  /** Points that are out of service themselves. */
  readonly gone: number;
  readonly tunnelsDown: number;
  readonly segments: readonly string[];
}
export interface PairsTried {
  readonly pairs: readonly PairOfFailures[];
  readonly tried: number;
  /** How many things were paired, of how many. */
  readonly paired: number;
  readonly considered: number;
}
/** What the worker can be asked for. */
export interface RunResults {
  readonly singles: readonly FailureSummary[];
  readonly pairs: PairsTried;
  readonly failovers: readonly Failover[];
  readonly cuts: readonly SegmentCut[];
}
export type RunKind = keyof RunResults;

// Some twenty seconds of work on the largest designs, where all pairs would take hours.
export const mostPairs = 10_000;

function* singlesOf(design: DesignFacts): Generator<Progress, RunResults['singles']> {
  const network = indexNetwork(design);
  const elements = loneElements(network);
  const found: FailureSummary[] = [];
  for (const element of elements) {
    yield { done: found.length, total: elements.length };
    const { pairCount, segments, gone, tunnelsDown } = singleFailure(network, element);
    found.push({
      element,
      pairCount,
      cutOff: segments.reduce((sum, { cutOff }) => sum + cutOff.length, 0),
      gone: gone.length,
      tunnelsDown: tunnelsDown.length,
      segments: segments.map(({ segment }) => segment),
    });
  }
  // Where two part as many, the order of the design stands.
  return found.sort((x, y) => y.pairCount - x.pairCount || y.gone - x.gone);
}

function* pairsOf(design: DesignFacts): Generator<Progress, RunResults['pairs']> {
  const network = indexNetwork(design);
  const { elements, considered } = pairCandidates(network, mostPairs);
  const total = (elements.length * (elements.length - 1)) / 2;
  const alone = elements.map((element) => partedBy(network, [element]));
  const pairs: PairOfFailures[] = [];
  let done = 0;
  for (let i = 0; i < elements.length; i += 1)
    for (let k = i + 1; k < elements.length; k += 1) {
      yield { done, total };
      const found = pairOfFailures(network, [elements[i]!, elements[k]!], [alone[i]!, alone[k]!]);
      if (found !== undefined) pairs.push(found);
      done += 1;
    }
  return {
    pairs: pairs.sort((x, y) => y.pairCount - x.pairCount),
    tried: total,
    paired: elements.length,
    considered,
  };
}

/** A run over many failures, step by step, with how far it is; its result comes last. */
export function* failureRun(design: DesignFacts, kind: RunKind): Generator<Progress, RunResults[RunKind]> {
  switch (kind) {
    case 'singles':
      return yield* singlesOf(design);
    case 'pairs':
      return yield* pairsOf(design);
    case 'failovers':
      return failovers(design);
    case 'cuts':
      return smallestSegmentCuts(design);
  }
}
