import type { Path, PathStep, Point, Rect } from '../geometry.ts';
import { cord as cordSizes } from '../parts/sizes.ts';
import type { Corners, Way } from './ground.ts';
import { isLevelRun, isTrunkRun, runWidth } from './ground.ts';
import { pathAt, pathLength } from '../path-geometry.ts';
import { clamp, overlap } from './rects.ts';

/** Where two ways cross at right angles: the run of each, and the point. */
export interface WayCrossing {
  readonly under: { readonly way: number; readonly run: number };
  readonly over: { readonly way: number; readonly run: number };
  readonly at: Point;
}
/** A stretch where two ways run side by side nearer than their widths. */
export interface WayOverlap {
  readonly ways: readonly [number, number];
  readonly runs: readonly [number, number];
}

interface Run {
  readonly way: number;
  readonly run: number;
  readonly level: boolean;
  readonly at: number;
  readonly from: number;
  readonly to: number;
  readonly width: number;
  /** The manifold in whose trunk it lies. */
  readonly trunk?: string;
}

const runsOf = (ways: readonly Way[]): readonly Run[] =>
  ways.flatMap((way, index) =>
    way.found === 'none'
      ? []
      : way.corners.slice(1).map((q, run) => {
          const p = way.corners[run]!;
          const level = isLevelRun(p, q);
          return {
            way: index,
            run,
            level,
            at: level ? p.y : p.x,
            from: level ? Math.min(p.x, q.x) : Math.min(p.y, q.y),
            to: level ? Math.max(p.x, q.x) : Math.max(p.y, q.y),
            width: runWidth(way, run),
            ...(isTrunkRun(way, run) ? { trunk: way.cord.trunk!.endpoint } : {}),
          };
        }),
  );

/** A jacket between two manifolds runs into the other one's mouth along its trunk. */
const joins = ({ cord }: Way, trunk: string | undefined): boolean =>
  trunk !== undefined && (cord.a.endpoint === trunk || cord.b.endpoint === trunk);

/** True when two runs belong together: of one way, or of one trunk and its branches. */
const isSameStem = (ways: readonly Way[], p: Run, q: Run): boolean =>
  p.way === q.way || joins(ways[p.way]!, q.trunk) || joins(ways[q.way]!, p.trunk);

/**
 * Every place where ways meet: crossings, the later way above but a trunk below all, and stretches that overlap. A trunk
 * meets another way once, however many jackets it holds.
 */
export const meetings = (
  ways: readonly Way[],
): { readonly crossings: readonly WayCrossing[]; readonly overlaps: readonly WayOverlap[] } => {
  const runs = runsOf(ways);
  const crossings: WayCrossing[] = [];
  const overlaps: WayOverlap[] = [];
  const seen = new Set<string>();
  const isFirst = (p: Run, q: Run, what: string): boolean => {
    if (p.trunk === undefined && q.trunk === undefined) return true;
    const name = (run: Run): string => run.trunk ?? `${run.way} ${run.run}`;
    const key = `${name(p)} ${name(q)} ${what}`;
    if (seen.has(key)) return false;
    seen.add(key);
    return true;
  };
  for (let i = 0; i < runs.length; i += 1)
    for (let j = i + 1; j < runs.length; j += 1) {
      const p = runs[i]!;
      const q = runs[j]!;
      if (p.level === q.level) {
        const close = Math.abs(p.at - q.at) < (p.width + q.width) / 2 - 0.6;
        if (!close || Math.min(p.to, q.to) - Math.max(p.from, q.from) <= 1) continue;
        if (!isSameStem(ways, p, q) && isFirst(p, q, 'beside'))
          overlaps.push({ ways: [p.way, q.way], runs: [p.run, q.run] });
        continue;
      }
      if (q.at <= p.from || q.at >= p.to || p.at <= q.from || p.at >= q.to) continue;
      if (isSameStem(ways, p, q)) continue;
      const at = p.level ? { x: q.at, y: p.at } : { x: p.at, y: q.at };
      if (!isFirst(p, q, `${at.x} ${at.y}`)) continue;
      const [under, over] = q.trunk !== undefined && p.trunk === undefined ? [q, p] : [p, q];
      crossings.push({
        under: { way: under.way, run: under.run },
        over: { way: over.way, run: over.run },
        at,
      });
    }
  return { crossings, overlaps };
};

const runLength = (corners: Corners, run: number): number => {
  const p = corners[run]!;
  const q = corners[run + 1]!;
  return Math.abs(q.x - p.x) + Math.abs(q.y - p.y);
};
const unit = (p: Point, q: Point): Point => ({ x: Math.sign(q.x - p.x), y: Math.sign(q.y - p.y) });
const turnAt = (corners: Corners, i: number): number => {
  const u = unit(corners[i - 1]!, corners[i]!);
  const v = unit(corners[i]!, corners[i + 1]!);
  return Math.sign(u.x * v.y - u.y * v.x);
};

/** Inner runs too short for two round corners that turn opposite ways: each is drawn as one gentle S. */
export const shortRuns = ({ cord, corners }: Pick<Way, 'cord' | 'corners'>): readonly number[] => {
  const short: number[] = [];
  for (let run = 1; run < corners.length - 2; run += 1) {
    if (short.at(-1) === run - 1) continue;
    const bends = turnAt(corners, run) !== turnAt(corners, run + 1);
    if (bends && runLength(corners, run) < 2 * cord.leastRadius) short.push(run);
  }
  return short;
};

/** One radius per inner corner: as wide as the runs allow up to the usual radius, and clear of crossings where it can be. */
export const cornerRadii = (
  way: Pick<Way, 'cord' | 'corners'>,
  crossings: readonly { readonly run: number; readonly at: Point; readonly width: number }[] = [],
  most: number = cordSizes.radius,
): readonly number[] => {
  const { corners, cord } = way;
  const lastRun = corners.length - 2;
  const room = (run: number): number =>
    run === 0 || run === lastRun ? runLength(corners, run) - 2 : runLength(corners, run) / 2;
  const short = shortRuns(way);
  return corners.slice(1, -1).map((corner, k) => {
    const i = k + 1;
    const into = short.includes(i) ? room(i - 1) : short.includes(i - 1) ? room(i) : undefined;
    if (into !== undefined) return clamp(into, 0, most);
    let r = Math.min(most, room(i - 1), room(i));
    for (const crossing of crossings) {
      if (crossing.run !== i - 1 && crossing.run !== i) continue;
      const free =
        Math.abs(crossing.at.x - corner.x) + Math.abs(crossing.at.y - corner.y) - crossing.width / 2 - 4;
      r = Math.min(r, Math.max(free, Math.min(cord.leastRadius, r)));
    }
    return Math.max(0, r);
  });
};

const shrinkBy = 0.7;
const leastClear = 1;

/** True when any of the sampled points, taken at half a width, lies over one of the rectangles. */
const touches = (points: readonly Point[], half: number, rects: readonly Rect[]): boolean =>
  rects.some((rect) =>
    points.some((p) => {
      const dx = Math.max(rect.x - p.x, p.x - rect.x - rect.width, 0);
      const dy = Math.max(rect.y - p.y, p.y - rect.y - rect.height, 0);
      return Math.hypot(dx, dy) < half - leastClear;
    }),
  );

const samples = (path: Path): readonly Point[] => {
  const length = pathLength(path);
  return Array.from({ length: Math.ceil(length / 5) + 1 }, (_, i) => pathAt(path, i * 5));
};

/**
 * The radii made smaller where a round corner would cut across something that its corner goes round: a bend tighter than
 * usual is better than a cord over a plate.
 */
export const radiiClearOf = (
  { cord, corners }: Pick<Way, 'cord' | 'corners'>,
  radii: readonly number[],
  rects: readonly Rect[],
): readonly number[] => {
  const short = shortRuns({ cord, corners });
  const clear = [...radii];
  for (let i = 1; i < corners.length - 1; i += 1) {
    const isShort = short.includes(i);
    const piece = isShort ? corners.slice(i - 1, i + 3) : corners.slice(i - 1, i + 2);
    const own = (): readonly number[] => clear.slice(i - 1, i - 1 + piece.length - 2);
    const near = rects.filter((rect) => {
      const reach = Math.max(...own()) + cord.width;
      return piece
        .slice(1, -1)
        .some((c) => overlap(rect, { x: c.x - reach, y: c.y - reach, width: 2 * reach, height: 2 * reach }));
    });
    const turn = (): Path => {
      const path = pathThrough(piece, own(), isShort ? [1] : []);
      const bend = path.slice(1).findIndex((step) => step.kind !== 'line');
      return bend < 0 ? [] : [{ kind: 'move', to: path[bend]!.to }, path[bend + 1]!];
    };
    while (
      near.length > 0 &&
      Math.max(...own()) > leastClear &&
      touches(samples(turn()), cord.width / 2, near)
    )
      for (let k = 0; k < piece.length - 2; k += 1) clear[i - 1 + k]! *= shrinkBy;
    if (isShort) i += 1;
  }
  return clear;
};

/** The smooth path through corners: quarter circles, and one cubic for each short S. */
export const pathThrough = (
  corners: Corners,
  radii: readonly number[],
  short: readonly number[] = [],
): Path => {
  const steps: PathStep[] = [{ kind: 'move', to: corners[0]! }];
  const lineTo = (to: Point): void => {
    const last = steps.at(-1)!.to;
    if (Math.abs(last.x - to.x) + Math.abs(last.y - to.y) > 0.01) steps.push({ kind: 'line', to });
  };
  for (let i = 1; i < corners.length - 1; i += 1) {
    const corner = corners[i]!;
    const r = radii[i - 1]!;
    const u = unit(corners[i - 1]!, corner);
    lineTo({ x: corner.x - u.x * r, y: corner.y - u.y * r });
    if (short.includes(i)) {
      const next = corners[i + 1]!;
      const reach = radii[i]!;
      steps.push({
        kind: 'curve',
        c1: corner,
        c2: next,
        to: { x: next.x + u.x * reach, y: next.y + u.y * reach },
      });
      i += 1;
      continue;
    }
    const v = unit(corner, corners[i + 1]!);
    if (r > 0.01)
      steps.push({
        kind: 'arc',
        to: { x: corner.x + v.x * r, y: corner.y + v.y * r },
        radius: r,
        clockwise: turnAt(corners, i) > 0,
      });
  }
  lineTo(corners.at(-1)!);
  return steps;
};
