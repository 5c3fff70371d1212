import type { CrossingGraph } from './crossing-graph.ts';
import type { TraceStorm } from './trace.ts';

const mostRounds = 5;
/** Crossings looked at while copies are counted: a long ring ends after fewer rounds rather than keep anybody waiting. */
const crossingsCounted = 100_000;
/** Nodes from which a shortest cycle is looked for. */
const startsTried = 16;

/** Crossings that copies come back to: what is endless, without what merely hangs behind it. */
const returning = ({ hops, next, copies }: CrossingGraph): ReadonlySet<number> => {
  const left = new Set([...hops.keys()].filter((key) => !copies.has(key)));
  const before = new Map<number, number[]>();
  const onward = new Map<number, number>();
  for (const key of left) {
    const inside = next.get(key)!.filter((target) => left.has(target));
    onward.set(key, inside.length);
    for (const target of inside) before.set(target, [...(before.get(target) ?? []), key]);
  }
  const over = [...left].filter((key) => onward.get(key) === 0);
  for (let i = 0; i < over.length; i += 1) {
    left.delete(over[i]!);
    for (const key of before.get(over[i]!) ?? []) {
      onward.set(key, onward.get(key)! - 1);
      if (onward.get(key) === 0) over.push(key);
    }
  }
  return left;
};

const cycleThrough = (
  { next }: CrossingGraph,
  start: number,
  inside: ReadonlySet<number>,
): readonly number[] | undefined => {
  const from = new Map<number, number>();
  const queue = [start];
  for (let i = 0; i < queue.length; i += 1)
    for (const target of next.get(queue[i]!)!) {
      if (target === start) {
        const cycle = [queue[i]!];
        while (cycle[0] !== start) cycle.unshift(from.get(cycle[0]!)!);
        return cycle;
      }
      if (!inside.has(target) || from.has(target)) continue;
      from.set(target, queue[i]!);
      queue.push(target);
    }
  return undefined;
};

const copiesByRound = (
  { starts, next }: CrossingGraph,
  inside: ReadonlySet<number>,
  hopsPerRound: number,
): readonly number[] => {
  let underway = new Map(starts.map((key) => [key, 1]));
  const counts: number[] = [];
  let counted = 0;
  const inStorm = (): number => {
    let sum = 0;
    for (const [key, copies] of underway) if (inside.has(key)) sum += copies;
    return Math.min(Number.MAX_SAFE_INTEGER, sum);
  };
  const hop = (): void => {
    const after = new Map<number, number>();
    for (const [key, copies] of underway)
      for (const target of next.get(key)!) {
        counted += 1;
        after.set(target, Math.min(Number.MAX_SAFE_INTEGER, (after.get(target) ?? 0) + copies));
      }
    underway = after;
  };
  // The way into the storm is no round of it.
  while (inStorm() === 0) hop();
  counts.push(inStorm());
  while (counts.length <= mostRounds && counted < crossingsCounted) {
    for (let i = 0; i < hopsPerRound; i += 1) hop();
    counts.push(inStorm());
  }
  return counts;
};

/** The storm that a frame gets into, and how the number of its copies grows from round to round; undefined without one. */
export const stormGrowth = (graph: CrossingGraph): TraceStorm | undefined => {
  if (graph.copies.size === graph.hops.size) return undefined;
  const inside = returning(graph);
  let cycle: readonly number[] | undefined;
  for (const start of [...inside].slice(0, startsTried)) {
    const found = cycleThrough(graph, start, inside);
    if (found !== undefined && (cycle === undefined || found.length < cycle.length)) cycle = found;
  }
  // Between two cycles there are crossings that lie on none; one that does lie on one is never far.
  for (const start of inside) cycle ??= cycleThrough(graph, start, inside);
  const counts = copiesByRound(graph, inside, cycle!.length);
  return {
    cycle: cycle!.map((key) => graph.hops.get(key)!.step!),
    hopsPerRound: cycle!.length,
    copiesByRound: counts,
    growth: isMultiplying(graph, inside) ? 'multiplies' : 'circulates',
  };
};

/** Somewhere one copy in gives more than one that stays inside. */
const isMultiplying = ({ next }: CrossingGraph, inside: ReadonlySet<number>): boolean =>
  [...inside].some((key) => next.get(key)!.filter((target) => inside.has(target)).length > 1);
