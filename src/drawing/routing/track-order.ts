import type { Net } from './nets.ts';
import { byText } from './rects.ts';

// Channel routing with weights: which of two nets lies before the other is a matter of crossings, of stubs that would
// run on top of each other, and of room.

const conflictWeight = 1000;
const forbiddenWeight = 1e5;
const twistWeight = 500;
const preference = 0.3;
const neighbourGap = 10;
const conflictGap = 3;

/** A pair of nets whose stubs would lie on top of each other in any order. */
export interface TrackConflict {
  readonly first: Net;
  readonly second: Net;
  readonly at: number;
}

/** True when two nets lie side by side somewhere and could come near each other. */
export const areNeighbours = (a: Net, b: Net): boolean => {
  const reach = (a.width + b.width) / 2;
  const side = reach + neighbourGap;
  if (a.from - side >= b.to || b.from - side >= a.to) return false;
  return a.lo - reach - 16 < b.hi && b.lo - reach - 16 < a.hi;
};

const stubConflict = (before: Net, after: Net): number | undefined => {
  const reach = (before.width + after.width) / 2 + conflictGap;
  for (const p of before.stubs)
    for (const q of after.stubs)
      if (p.fixed && q.fixed && p.towards > 0 && q.towards < 0 && Math.abs(p.at - q.at) < reach) return p.at;
  return undefined;
};

/** What it costs that one net lies before the other (left of it, or above it). */
const costOfOrder = (before: Net, after: Net): number => {
  let cost = 0;
  for (const stub of before.stubs)
    if (stub.towards > 0 && stub.at > after.from && stub.at < after.to) cost += 1;
  for (const stub of after.stubs)
    if (stub.towards < 0 && stub.at > before.from && stub.at < before.to) cost += 1;
  if (stubConflict(before, after) !== undefined) cost += conflictWeight;
  if (before.lo + (before.width + after.width) / 2 > after.hi + 0.01) cost += forbiddenWeight;
  if (before.way === after.way && Math.abs(before.run - after.run) === 2 && before.at > after.at + 0.01)
    cost += twistWeight;
  if (before.lo + before.hi > after.lo + after.hi + 0.01) cost += preference;
  return cost;
};

/** Nets that can't touch each other, directly or through others, are settled apart. */
export const components = (nets: readonly Net[]): readonly (readonly Net[])[] => {
  const parent = nets.map((_, i) => i);
  const root = (i: number): number => {
    let at = i;
    while (parent[at] !== at) at = parent[at] = parent[parent[at]!]!;
    return at;
  };
  for (let i = 0; i < nets.length; i += 1)
    for (let j = i + 1; j < nets.length; j += 1)
      if (!(nets[i]!.fixed && nets[j]!.fixed) && areNeighbours(nets[i]!, nets[j]!)) parent[root(j)] = root(i);
  const groups = new Map<number, Net[]>();
  nets.forEach((net, i) => {
    const key = root(i);
    groups.set(key, [...(groups.get(key) ?? []), net]);
  });
  return [...groups.values()].filter((group) => group.some((net) => !net.fixed));
};

/**
 * The order of nets from low to high coordinates with the fewest crossings: fixed ones by position, the others inserted
 * longest first at the cheapest place, then sifted.
 */
export const orderNets = (
  nets: readonly Net[],
): { readonly order: readonly Net[]; readonly conflicts: readonly TrackConflict[] } => {
  const all = [...nets].sort((a, b) => byText(a.id, b.id));
  const index = new Map(all.map((net, i) => [net, i]));
  const costs = all.map((a) =>
    all.map((b) => (a === b || (a.fixed && b.fixed) || !areNeighbours(a, b) ? 0 : costOfOrder(a, b))),
  );
  const cost = (a: Net, b: Net): number => costs[index.get(a)!]![index.get(b)!]!;
  const order = all.filter((net) => net.fixed).sort((a, b) => a.at - b.at || byText(a.id, b.id));
  const insert = (net: Net): void => {
    let here = order.reduce((sum, placed) => sum + cost(net, placed), 0);
    let best = here;
    let place = 0;
    order.forEach((placed, i) => {
      here += cost(placed, net) - cost(net, placed);
      if (here < best - 1e-9) {
        best = here;
        place = i + 1;
      }
    });
    order.splice(place, 0, net);
  };
  const movable = all.filter((net) => !net.fixed);
  for (const net of [...movable].sort((a, b) => b.to - b.from - (a.to - a.from) || byText(a.id, b.id)))
    insert(net);
  for (let pass = 0; pass < 4; pass += 1) {
    let moved = false;
    for (const net of movable) {
      const was = order.indexOf(net);
      order.splice(was, 1);
      insert(net);
      moved ||= order.indexOf(net) !== was;
    }
    if (!moved) break;
  }
  const conflicts: TrackConflict[] = [];
  order.forEach((first, i) => {
    for (const second of order.slice(i + 1)) {
      if (cost(first, second) < conflictWeight) continue;
      const at = stubConflict(first, second);
      if (at !== undefined) conflicts.push({ first, second, at });
    }
  });
  return { order, conflicts };
};
