import type { Crossing, Hop } from './follower.ts';
import { crossingKey } from './follower.ts';

/** Every crossing that some copy takes, once. */
export interface CrossingGraph {
  readonly hops: ReadonlyMap<number, Hop>;
  readonly starts: readonly number[];
  readonly next: ReadonlyMap<number, readonly number[]>;
  /** Copies that take it in all; of those in a storm or behind it there is no end, and they are left out. */
  readonly copies: ReadonlyMap<number, number>;
}

/** Works out every crossing that can be reached, and how many copies take it where that number is finite. */
export const crossingGraph = (
  starts: readonly Crossing[],
  hopOf: (crossing: Crossing) => Hop,
): CrossingGraph => {
  const hops = new Map<number, Hop>();
  const next = new Map<number, readonly number[]>();
  const order: number[] = [];
  const see = (crossing: Crossing): number => {
    const key = crossingKey(crossing);
    if (!hops.has(key)) {
      hops.set(key, hopOf(crossing));
      order.push(key);
    }
    return key;
  };
  const startKeys = [...new Set(starts.map(see))];
  const incoming = new Map<number, number>();
  for (let i = 0; i < order.length; i += 1) {
    const key = order[i]!;
    const targets = hops.get(key)!.onward.map(see);
    next.set(key, targets);
    for (const target of targets) incoming.set(target, (incoming.get(target) ?? 0) + 1);
  }
  const sums = new Map(startKeys.map((key) => [key, 1]));
  const copies = new Map<number, number>();
  const ready = order.filter((key) => !incoming.has(key));
  for (let i = 0; i < ready.length; i += 1) {
    const key = ready[i]!;
    const own = sums.get(key) ?? 0;
    copies.set(key, own);
    for (const target of next.get(key)!) {
      sums.set(target, Math.min(Number.MAX_SAFE_INTEGER, (sums.get(target) ?? 0) + own));
      const left = incoming.get(target)! - 1;
      incoming.set(target, left);
      if (left === 0) ready.push(target);
    }
  }
  return { hops, starts: startKeys, next, copies };
};
