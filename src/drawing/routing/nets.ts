import type { Point, Rect } from '../geometry.ts';
import { band as bandSizes } from '../parts/sizes.ts';
import { bandRects } from './bands.ts';
import type { Ground, Way } from './ground.ts';
import { bandOf, foreignBands, isTrunkRun, runWidth } from './ground.ts';
import { isUpright } from './rects.ts';

/** Which coordinate is being chosen: `x` for upright runs, `y` for level ones. */
export type Axis = 'x' | 'y';

/** A run at right angles to a net, where it leaves the net. */
export interface Stub {
  /** Where along the net it leaves. */
  readonly at: number;
  /** Towards lower or higher coordinates; 0 while undecided. */
  readonly towards: -1 | 0 | 1;
  /** Held in place by a mouth. */
  readonly fixed: boolean;
}
/** A run that needs a track. */
export interface Net {
  readonly id: string;
  /** The run it stands for; in a trunk the first of several. */
  readonly way: number;
  readonly run: number;
  readonly members: readonly { readonly way: number; readonly run: number }[];
  readonly width: number;
  readonly from: number;
  readonly to: number;
  /** Where it lies now. */
  readonly at: number;
  readonly lo: number;
  readonly hi: number;
  readonly fixed: boolean;
  readonly stubs: readonly Stub[];
  /** The rectangle of its own band that it is packed in. */
  readonly packedIn?: Rect;
  readonly bandKey?: string;
}

const other = (axis: Axis): Axis => (axis === 'x' ? 'y' : 'x');

/** Whether the n-th run of a way is upright; runs alternate from the first, which follows its mouth. */
const runIsUpright = (way: Way, run: number): boolean => isUpright(way.cord.a.side) !== (run % 2 === 1);

interface Interval {
  readonly start: number;
  readonly end: number;
}
const spanOf = (rect: Rect, axis: Axis): Interval =>
  axis === 'x' ? { start: rect.x, end: rect.x + rect.width } : { start: rect.y, end: rect.y + rect.height };

const sign = (value: number): -1 | 0 | 1 => (value > 0.01 ? 1 : value < -0.01 ? -1 : 0);

const clearance = 4;

/** How far a run may move before it meets an obstacle, a foreign frame or band, its own mouth or the edge of its band. */
const boundsOf = (
  ground: Ground,
  way: Way,
  run: number,
  axis: Axis,
): Pick<Net, 'lo' | 'hi' | 'packedIn' | 'bandKey'> => {
  const { cord, corners } = way;
  const p = corners[run]!;
  const q = corners[run + 1]!;
  const half = runWidth(way, run) / 2;
  const at = p[axis];
  const along = other(axis);
  const from = Math.min(p[along], q[along]) - half;
  const to = Math.max(p[along], q[along]) + half;
  let lo = -1e5;
  let hi = 1e5;
  const hold = (rect: Rect, gap: number): void => {
    const beside = spanOf(rect, along);
    if (beside.end + gap <= from || beside.start - gap >= to) return;
    const { start, end } = spanOf(rect, axis);
    if (end <= at) lo = Math.max(lo, end + gap + half);
    else if (start >= at) hi = Math.min(hi, start - gap - half);
  };
  for (const { rect } of ground.obstacles) hold(rect, clearance);
  for (const { site, rect } of ground.frames)
    if (site !== cord.a.site && site !== cord.b.site) hold(rect, clearance);
  for (const rect of foreignBands(ground, cord.transport)) hold(rect, clearance);

  const band = bandOf(ground, cord.transport);
  const packedIn = (band === undefined ? [] : bandRects(band)).find((rect) => {
    const across = spanOf(rect, axis);
    const beside = spanOf(rect, along);
    const middle = (p[along] + q[along]) / 2;
    const isLong = axis === 'x' ? rect.height >= rect.width : rect.width >= rect.height;
    return isLong && at > across.start && at < across.end && middle > beside.start && middle < beside.end;
  });
  const edge = bandSizes.edgeToJacket + half;
  if (packedIn !== undefined) {
    const across = spanOf(packedIn, axis);
    const room = across.end - across.start;
    const inset = Math.min(edge, room / 2);
    lo = Math.max(lo, across.start + inset);
    hi = Math.min(hi, across.end - inset);
  }
  const keepOff = (mouth: Point, next: Point): void => {
    const towards = sign(next[axis] - mouth[axis]);
    const reach = Math.max(cord.leastRadius, isTrunkRun(way, run) ? half + 4 : 0) + 2;
    if (towards > 0) lo = Math.max(lo, mouth[axis] + reach);
    if (towards < 0) hi = Math.min(hi, mouth[axis] - reach);
  };
  if (run === 1) keepOff(corners[0]!, p);
  if (run === corners.length - 3) keepOff(corners.at(-1)!, q);
  if (lo > hi) {
    const held = Math.max(hi, Math.min(lo, at));
    lo = held;
    hi = held;
  }
  return packedIn === undefined
    ? { lo, hi }
    : { lo, hi, packedIn, bandKey: `${cord.transport} ${packedIn.x} ${packedIn.y}` };
};

/** Every run along one axis, with the room it has. */
export const netsOf = (ground: Ground, ways: readonly Way[], axis: Axis): readonly Net[] =>
  withTrunksMerged(ways, runNets(ground, ways, axis));

const runNets = (ground: Ground, ways: readonly Way[], axis: Axis): readonly Net[] =>
  ways.flatMap((way, index) => {
    if (way.found === 'none') return [];
    const { cord, corners } = way;
    const along = other(axis);
    return corners.slice(1).flatMap((q, run): Net[] => {
      if (runIsUpright(way, run) !== (axis === 'x')) return [];
      const p = corners[run]!;
      const last = corners.length - 2;
      const fixed = run === 0 || run === last;
      const stubs: Stub[] = [];
      if (run > 0)
        stubs.push({ at: p[along], towards: sign(corners[run - 1]![axis] - p[axis]), fixed: run === 1 });
      if (run < last)
        stubs.push({
          at: q[along],
          towards: sign(corners[run + 2]![axis] - q[axis]),
          fixed: run === last - 1,
        });
      return [
        {
          id: `${cord.key} ${run}`,
          way: index,
          run,
          members: [{ way: index, run }],
          width: runWidth(way, run),
          from: Math.min(p[along], q[along]),
          to: Math.max(p[along], q[along]),
          at: p[axis],
          fixed,
          stubs,
          ...(fixed ? { lo: p[axis], hi: p[axis] } : boundsOf(ground, way, run, axis)),
        },
      ];
    });
  });

/** All runs of one trunk in one rectangle, or out of its mouth, are one net. */
const withTrunksMerged = (ways: readonly Way[], nets: readonly Net[]): readonly Net[] => {
  const trunks = new Map<string, Net>();
  const merged: Net[] = [];
  for (const net of nets) {
    const way = ways[net.way]!;
    if (!isTrunkRun(way, net.run)) {
      merged.push(net);
      continue;
    }
    const key = `${way.cord.trunk!.endpoint} ${net.fixed ? 'mouth' : (net.bandKey ?? net.at)}`;
    const before = trunks.get(key);
    if (before === undefined) {
      trunks.set(key, net);
      continue;
    }
    const lo = Math.max(before.lo, net.lo);
    const hi = Math.min(before.hi, net.hi);
    const middle = (lo + hi) / 2;
    const isNew = (stub: Stub): boolean =>
      !before.stubs.some((other) => other.at === stub.at && other.towards === stub.towards);
    trunks.set(key, {
      ...before,
      members: [...before.members, ...net.members],
      from: Math.min(before.from, net.from),
      to: Math.max(before.to, net.to),
      lo: lo > hi ? middle : lo,
      hi: lo > hi ? middle : hi,
      stubs: [...before.stubs, ...net.stubs.filter(isNew)],
    });
  }
  return [...merged, ...trunks.values()];
};
