import type { Point } from '../geometry.ts';
import type { Ground, Way } from './ground.ts';
import type { Axis } from './nets.ts';
import { netsOf } from './nets.ts';
import { components, orderNets } from './track-order.ts';
import type { TrackConflict } from './track-order.ts';
import { placeNets } from './track-places.ts';

const mostDoglegs = 6;
const leastSplitLength = 150;

export interface TrackedWays {
  readonly ways: readonly Way[];
  /** Width that each band rectangle needs, by `transport x y` of the rectangle. */
  readonly needs: ReadonlyMap<string, number>;
  readonly doglegs: number;
  /** Conflicts that no dogleg could solve. */
  readonly conflicts: number;
  /** Components packed closer than the usual gap. */
  readonly tight: number;
  readonly shrunk: boolean;
}

interface Pass {
  readonly ways: readonly Way[];
  readonly conflicts: readonly { readonly axis: Axis; readonly conflict: TrackConflict }[];
  readonly needs: ReadonlyMap<string, number>;
  readonly tight: number;
  readonly shrunk: boolean;
}

const settleAxis = (ground: Ground, ways: readonly Way[], axis: Axis): Pass => {
  const corners: Point[][] = ways.map((way) => [...way.corners]);
  const conflicts: { axis: Axis; conflict: TrackConflict }[] = [];
  const needs = new Map<string, number>();
  let tight = 0;
  let shrunk = false;
  for (const nets of components(netsOf(ground, ways, axis))) {
    const ordered = orderNets(nets);
    conflicts.push(...ordered.conflicts.map((conflict) => ({ axis, conflict })));
    const placed = placeNets(ordered.order);
    if (placed.gap < 16) tight += 1;
    shrunk ||= placed.shrunk;
    for (const [key, need] of placed.needs) needs.set(key, Math.max(needs.get(key) ?? 0, need));
    for (const [net, at] of placed.places) {
      if (net.fixed) continue;
      for (const { way, run } of net.members) {
        const own = corners[way]!;
        own[run] = { ...own[run]!, [axis]: at };
        own[run + 1] = { ...own[run + 1]!, [axis]: at };
      }
    }
  }
  return {
    ways: ways.map((way, i) => (way.found === 'none' ? way : { ...way, corners: corners[i]! })),
    conflicts,
    needs,
    tight,
    shrunk,
  };
};

/** Splits one of two conflicting runs, so that its halves can lie on either side of the other. */
const withDogleg = (
  ways: readonly Way[],
  split: ReadonlySet<string>,
  axis: Axis,
  { first, second, at }: TrackConflict,
): { readonly ways: readonly Way[]; readonly key: string } | undefined => {
  const along = axis === 'x' ? 'y' : 'x';
  const candidates = [first, second]
    .filter(
      (net) =>
        !net.fixed &&
        net.members.length === 1 &&
        net.to - net.from > leastSplitLength &&
        !split.has(ways[net.way]!.cord.key),
    )
    .sort((a, b) => b.to - b.from - (a.to - a.from));
  const net = candidates[0];
  if (net === undefined) return undefined;
  const way = ways[net.way]!;
  const away = (first.width + second.width) / 2 + 10 + way.cord.leastRadius;
  let jog = (net.from + net.to) / 2;
  if (Math.abs(jog - at) < away) jog = at - net.from > net.to - at ? at - away : at + away;
  if (jog < net.from + 20 || jog > net.to - 20) return undefined;
  const corners = [...way.corners];
  const middle: Point = { ...corners[net.run]!, [along]: jog };
  corners.splice(net.run + 1, 0, middle, middle);
  return { ways: ways.map((w, i) => (i === net.way ? { ...w, corners } : w)), key: way.cord.key };
};

/**
 * Moves every run of every way onto a track of its own: upright runs, level runs, upright runs again. Where stubs of two
 * runs would cover each other in any order, one run is split by a dogleg and everything settled anew.
 */
export const settleTracks = (ground: Ground, start: readonly Way[]): TrackedWays => {
  let ways = start;
  const split = new Set<string>();
  for (;;) {
    const once = settleAxis(ground, ways, 'x');
    const twice = settleAxis(ground, once.ways, 'y');
    const thrice = settleAxis(ground, twice.ways, 'x');
    const conflicts = [...thrice.conflicts, ...twice.conflicts];
    let next: ReturnType<typeof withDogleg>;
    if (split.size < mostDoglegs)
      for (const { axis, conflict } of conflicts) {
        next = withDogleg(ways, split, axis, conflict);
        if (next !== undefined) break;
      }
    if (next === undefined)
      return {
        ways: thrice.ways,
        needs: new Map([...twice.needs, ...thrice.needs]),
        doglegs: split.size,
        conflicts: conflicts.length,
        tight: twice.tight + thrice.tight,
        shrunk: twice.shrunk || thrice.shrunk,
      };
    ways = next.ways;
    split.add(next.key);
  }
};
