import { band as bandSizes } from '../parts/sizes.ts';
import type { Net } from './nets.ts';
import { clamp } from './rects.ts';
import { areNeighbours } from './track-order.ts';

const gaps = [16, 10, 6, 3] as const;
/** When even the least gap does not fit, distances shrink by these shares, and the drawing says that it is crowded. */
const shrinking = [0.75, 0.5, 0.25, 0] as const;

export interface PlacedNets {
  readonly places: ReadonlyMap<Net, number>;
  readonly gap: number;
  readonly shrunk: boolean;
  /** Width that each band rectangle needs for what is packed in it. */
  readonly needs: ReadonlyMap<string, number>;
}

/** Gives every net of a component its coordinate, in the given order, as near as possible to where it wants to be. */
export const placeNets = (order: readonly Net[]): PlacedNets => {
  const before = order.map((net, i) =>
    order
      .slice(0, i)
      .flatMap((prior, k) => (!(prior.fixed && net.fixed) && areNeighbours(prior, net) ? [k] : [])),
  );
  const distance = (a: Net, b: Net, gap: number): number => (a.width + b.width) / 2 + gap;

  const packing = (
    gap: number,
  ): { readonly targets: readonly number[]; readonly needs: Map<string, number> } => {
    const offsets = order.map(() => 0);
    const extents = new Map<string, { from: number; to: number; last: number }>();
    order.forEach((net, i) => {
      if (net.fixed || net.bandKey === undefined) return;
      const prior = before[i]!.filter((k) => order[k]!.bandKey === net.bandKey && !order[k]!.fixed);
      offsets[i] = Math.max(0, ...prior.map((k) => offsets[k]! + distance(order[k]!, net, gap)));
      const extent = extents.get(net.bandKey) ?? { from: Infinity, to: -Infinity, last: 0 };
      extents.set(net.bandKey, {
        from: Math.min(extent.from, offsets[i]! - net.width / 2),
        to: Math.max(extent.to, offsets[i]! + net.width / 2),
        last: Math.max(extent.last, offsets[i]!),
      });
    });
    const targets = order.map((net, i) => {
      if (net.packedIn === undefined || net.bandKey === undefined) return net.at;
      const middle = (net.lo + net.hi) / 2;
      return middle - extents.get(net.bandKey)!.last / 2 + offsets[i]!;
    });
    const needs = new Map(
      [...extents].map(([key, { from, to }]) => [key, to - from + 2 * bandSizes.edgeToJacket + 4]),
    );
    return { targets, needs };
  };

  const tryWith = (gap: number, share: number): readonly number[] | undefined => {
    const apart = (a: Net, b: Net): number => distance(a, b, gap) * share;
    const least: number[] = [];
    order.forEach((net, i) => {
      least.push(Math.max(net.lo, ...before[i]!.map((k) => least[k]! + apart(order[k]!, net))));
    });
    const most = order.map((net) => net.hi);
    for (let i = order.length - 1; i >= 0; i -= 1)
      for (const k of before[i]!) most[k] = Math.min(most[k]!, most[i]! - apart(order[k]!, order[i]!));
    if (least.some((value, i) => value > most[i]! + 0.01)) return undefined;
    const { targets } = packing(gap);
    const places: number[] = [];
    order.forEach((net, i) => {
      const from = Math.max(least[i]!, ...before[i]!.map((k) => places[k]! + apart(order[k]!, net)));
      places.push(clamp(clamp(targets[i]!, from, Math.max(from, most[i]!)), net.lo, net.hi));
    });
    return places;
  };

  const { needs } = packing(gaps[0]);
  const answer = (places: readonly number[], gap: number, shrunk: boolean): PlacedNets => ({
    places: new Map(order.map((net, i) => [net, places[i]!])),
    gap,
    shrunk,
    needs,
  });
  for (const gap of gaps) {
    const places = tryWith(gap, 1);
    if (places !== undefined) return answer(places, gap, false);
  }
  for (const share of shrinking) {
    const places = tryWith(gaps.at(-1)!, share);
    if (places !== undefined) return answer(places, gaps.at(-1)!, true);
  }
  // An order against the bounds: each as near to its wish as its own room allows.
  return answer(
    order.map((net) => clamp(net.at, net.lo, net.hi)),
    gaps.at(-1)!,
    true,
  );
};
