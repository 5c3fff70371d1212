import type { Point, Rect } from '../geometry.ts';
import type { BandPlace } from './bands.ts';
import { meetings } from './corners.ts';
import type { WayCrossing, WayOverlap } from './corners.ts';
import { detour, isLargeGround, withoutIdlePoints } from './detour.ts';
import type { Cord, Corners, Ground, Mouth, Way } from './ground.ts';
import { isTrunkRun, wayIsBlocked } from './ground.ts';
import { runRegister, runsOfWays } from './known-runs.ts';
import { patternWay } from './patterns.ts';
import { bottom, byText, grown, right, runRect } from './rects.ts';
import { settleTracks } from './tracks.ts';
import type { TrackedWays } from './tracks.ts';

const mostRipUps = 6;
const mostLargeRipUps = 1;
const mostIdleRipUps = 2;
const mostWidenings = 3;
const bandToFrame = 20;
/** Where more cords need a search, bands are measured without them. */
const mostMeasuredSearches = 40;

export interface RoutedCords {
  readonly ways: readonly Way[];
  readonly bands: readonly BandPlace[];
  readonly crossings: readonly WayCrossing[];
  readonly overlaps: readonly WayOverlap[];
  readonly tracked: TrackedWays;
}

/** Searches done before with the same bands, the same known ways and the same ground to avoid. */
interface Searches {
  readonly done: Map<string, Corners | undefined>;
  /** Numbers for what was known: each for one way more than an earlier one. */
  readonly states: Map<string, number>;
}

const noSearches = (): Searches => ({ done: new Map(), states: new Map() });

const numberOf = (states: Map<string, number>, state: unknown): number => {
  const key = JSON.stringify(state);
  const number = states.get(key) ?? states.size;
  states.set(key, number);
  return number;
};

const flat = (corners: Corners): readonly number[] => corners.flatMap(({ x, y }) => [x, y]);
const flatRect = ({ x, y, width, height }: Rect): readonly number[] => [x, y, width, height];

/** Patterns first, then a search for each cord that has none, in the order of their keys. */
const firstWays = (
  ground: Ground,
  cords: readonly Cord[],
  avoided: ReadonlyMap<string, readonly Rect[]>,
  searches: Searches,
): readonly Way[] => {
  const ways = new Map<string, Way>();
  for (const cord of cords) {
    if (avoided.has(cord.key)) continue;
    const corners = patternWay(ground, cord);
    if (corners !== undefined) ways.set(cord.key, { cord, corners, found: 'pattern' });
  }
  const known = runRegister(runsOfWays([...ways.values()]));
  let state = numberOf(searches.states, [
    ground.bands.map((band) => band.limbs.map(flatRect)),
    [...ways.values()].map((way) => flat(way.corners)),
  ]);
  for (const cord of cords) {
    if (ways.has(cord.key)) continue;
    const avoid = avoided.get(cord.key) ?? [];
    const key = JSON.stringify([state, cord.key, cord.width, avoid.map(flatRect)]);
    const corners = searches.done.has(key) ? searches.done.get(key) : detour(ground, cord, known, avoid);
    searches.done.set(key, corners);
    const way: Way =
      corners === undefined
        ? { cord, corners: [cord.a.at, cord.b.at], found: 'none' }
        : { cord, corners, found: 'search' };
    ways.set(cord.key, way);
    if (corners === undefined) continue;
    known.add(runsOfWays([way]));
    state = numberOf(searches.states, [state, flat(corners)]);
  }
  return cords.map((cord) => ways.get(cord.key)!);
};

/** Bands grown to what is packed in them, as far as the neighbouring frames leave room. */
const widened = (ground: Ground, needs: ReadonlyMap<string, number>): readonly BandPlace[] | undefined => {
  let changed = false;
  const bands = ground.bands.map((band): BandPlace => {
    const level = band.orientation === 'horizontal';
    const widen = (rect: Rect): Rect => {
      const need = needs.get(`${band.id} ${rect.x} ${rect.y}`) ?? 0;
      const across = level ? rect.height : rect.width;
      if (need <= across + 0.5) return rect;
      const blockers = [
        ...ground.frames.map((frame) => frame.rect),
        ...ground.bands.filter((other) => other !== band).flatMap((other) => other.limbs),
      ].filter((r) =>
        level ? r.x < right(rect) && right(r) > rect.x : r.y < bottom(rect) && bottom(r) > rect.y,
      );
      const [start, end] = level ? [rect.y, bottom(rect)] : [rect.x, right(rect)];
      const sheet = level ? [ground.sheet.y, bottom(ground.sheet)] : [ground.sheet.x, right(ground.sheet)];
      const before = Math.max(
        sheet[0]!,
        ...blockers
          .map((r) => (level ? bottom(r) : right(r)) + bandToFrame)
          .filter((v) => v <= start + bandToFrame),
      );
      const after = Math.min(
        sheet[1]!,
        ...blockers.map((r) => (level ? r.y : r.x) - bandToFrame).filter((v) => v >= end - bandToFrame),
      );
      const half = (need - across) / 2;
      const from = Math.min(start, Math.max(before, start - half));
      const to = Math.max(end, Math.min(after, end + half));
      if (to - from <= across + 0.5) return rect;
      changed = true;
      return level ? { ...rect, y: from, height: to - from } : { ...rect, x: from, width: to - from };
    };
    return { ...band, limbs: band.limbs.map(widen) };
  });
  return changed ? bands : undefined;
};

interface State {
  readonly ground: Ground;
  readonly tracked: TrackedWays;
  readonly ways: readonly Way[];
  readonly crossings: readonly WayCrossing[];
  readonly overlaps: readonly WayOverlap[];
  readonly blocked: readonly number[];
}

/** Corners rounded to half pixels. Those in a trunk all stay: the branches are told from it by their number. */
const tidied = (way: Way): Corners => {
  const rounded = way.corners.map(({ x, y }) => ({ x: Math.round(x * 2) / 2, y: Math.round(y * 2) / 2 }));
  return isTrunkRun(way, way.cord.trunk?.end === 'a' ? 0 : 1) ? rounded : withoutIdlePoints(rounded);
};

const settle = (
  start: Ground,
  cords: readonly Cord[],
  avoided: ReadonlyMap<string, readonly Rect[]>,
  searches: Searches,
): State => {
  let ground = start;
  for (let round = 0; ; round += 1) {
    const tracked = settleTracks(ground, firstWays(ground, cords, avoided, searches));
    const wider = round < mostWidenings ? widened(ground, tracked.needs) : undefined;
    if (wider !== undefined) {
      ground = { ...ground, bands: wider };
      continue;
    }
    const ways = tracked.ways.map((way) =>
      way.found === 'none'
        ? way
        : {
            ...way,
            corners: tidied(way),
          },
    );
    const blocked = ways.flatMap((way, i) =>
      way.found !== 'none' && wayIsBlocked(ground, way, -0.75) ? [i] : [],
    );
    return { ground, tracked, ways, ...meetings(ways), blocked };
  }
};

const badness = ({ overlaps, blocked, crossings, tracked, ways }: State): number =>
  50 * overlaps.length +
  200 * blocked.length +
  150 * ways.filter((way) => way.found === 'none').length +
  crossings.length +
  4 * tracked.tight;

/** Which of two overlapping ways gives in: an inner run before one at a mouth, a searched way before a pattern. */
const lessBound = (
  state: State,
  { ways, runs }: WayOverlap,
): { readonly way: number; readonly run: number } => {
  const weight = (way: number, run: number): number => {
    const w = state.ways[way]!;
    const atMouth = run === 0 || run === w.corners.length - 2;
    return (atMouth ? 2 : 0) + (w.found === 'pattern' ? 1 : 0);
  };
  const [a, b] = ways;
  const [p, q] = runs;
  const keep = weight(a, p) - weight(b, q) || byText(state.ways[b]!.cord.key, state.ways[a]!.cord.key);
  return keep > 0 ? { way: b, run: q } : { way: a, run: p };
};

/** How wide each band rectangle has to be for the plain ways of these cords, by `transport x y` of the rectangle. */
export const bandNeeds = (ground: Ground, cords: readonly Cord[]): ReadonlyMap<string, number> => {
  const plain = cords.filter((cord) => patternWay(ground, cord) !== undefined);
  const measured = cords.length - plain.length > mostMeasuredSearches ? plain : cords;
  return settleTracks(ground, firstWays(ground, measured, new Map(), noSearches())).needs;
};

/**
 * A way for every cord. Where some overlap or run into an obstacle, the less bound ones are taken up and searched anew,
 * and the best state found is kept; what still can't pass gets no way at all rather than one across a plate.
 */
export const routeCords = (
  start: Ground,
  cords: readonly Cord[],
  ripUps: number = isLargeGround(start) ? mostLargeRipUps : mostRipUps,
): RoutedCords => {
  const searches = noSearches();
  let avoided = new Map<string, readonly Rect[]>();
  let state = settle(start, cords, avoided, searches);
  let best = state;
  let idle = 0;
  for (let round = 0; round < ripUps; round += 1) {
    if (state.overlaps.length === 0 && state.blocked.length === 0) break;
    const next = new Map(avoided);
    const avoid = (way: number, run: number, width: number): void => {
      const { cord, corners } = state.ways[way]!;
      const rect = grown(runRect(corners[run]!, corners[run + 1]!, width), 0);
      next.set(cord.key, [...(next.get(cord.key) ?? []), rect]);
    };
    for (const pair of state.overlaps) {
      const { way, run } = lessBound(state, pair);
      const other = pair.ways[0] === way ? pair.ways[1] : pair.ways[0];
      avoid(way, run, (state.ways[way]!.cord.width + state.ways[other]!.cord.width) / 2);
    }
    for (const way of state.blocked)
      for (let run = 1; run < state.ways[way]!.corners.length - 2; run += 1)
        avoid(way, run, state.ways[way]!.cord.width / 2 + 2);
    avoided = next;
    state = settle(start, cords, avoided, searches);
    if (badness(state) < badness(best)) {
      best = state;
      idle = 0;
    } else if ((idle += 1) === mostIdleRipUps) break;
  }
  const ways = best.ways.map((way, i): Way =>
    best.blocked.includes(i)
      ? { cord: way.cord, corners: [way.cord.a.at, way.cord.b.at], found: 'none' }
      : way,
  );
  return { ways, bands: best.ground.bands, ...meetings(ways), tracked: best.tracked };
};

/** Where a step of a drag loosens more cords than this, or the sheet is large, each takes the first way at hand until the drop. */
const mostRoutedInAStep = 12;

/** A way before: the same shape, its ends drawn after their mouths. */
const drawnAfter = (cord: Cord, corners: Corners): Corners | undefined => {
  if (corners.length < 4) return undefined;
  const last = corners.length - 1;
  const upright = (run: number): boolean => Math.abs(corners[run]!.x - corners[run + 1]!.x) < 0.01;
  return corners.map((corner, i): Point => {
    if (i === 0) return cord.a.at;
    if (i === last) return cord.b.at;
    let { x, y } = corner;
    if (i === 1) [x, y] = upright(0) ? [cord.a.at.x, y] : [x, cord.a.at.y];
    if (i === last - 1) [x, y] = upright(last - 1) ? [cord.b.at.x, y] : [x, cord.b.at.y];
    return { x, y };
  });
};

/** A plain way into the band, or the last one with its ends moved; a leader where neither is free. */
const quickWay = (ground: Ground, cord: Cord, before: Way | undefined): Way => {
  const plain = patternWay(ground, cord);
  const moved =
    before === undefined || before.found === 'none' ? undefined : drawnAfter(cord, before.corners);
  const ways: readonly Way[] = [
    ...(plain === undefined ? [] : [{ cord, corners: plain, found: 'pattern' as const }]),
    ...(moved === undefined ? [] : [{ cord, corners: moved, found: 'search' as const }]),
  ];
  return (
    ways.find((way) => !wayIsBlocked(ground, way, -0.75)) ?? {
      cord,
      corners: [cord.a.at, cord.b.at],
      found: 'none',
    }
  );
};

const sameMouth = (a: Mouth, b: Mouth): boolean =>
  a.at.x === b.at.x && a.at.y === b.at.y && a.side === b.side;

/** Ways for cords whose ends moved or in whose way something came, once and without a look at the others, which keep theirs. */
export const routeAround = (ground: Ground, cords: readonly Cord[], before: RoutedCords): RoutedCords => {
  const held = new Map(before.ways.map((way) => [way.cord.key, way]));
  const keptWay = (cord: Cord): Way | undefined => {
    const way = held.get(cord.key);
    return way !== undefined &&
      way.found !== 'none' &&
      way.cord.width === cord.width &&
      sameMouth(way.cord.a, cord.a) &&
      sameMouth(way.cord.b, cord.b) &&
      !wayIsBlocked(ground, way, -0.75)
      ? { ...way, cord }
      : undefined;
  };
  const kept = new Map(cords.map((cord) => [cord.key, keptWay(cord)]));
  const loose = cords.filter((cord) => kept.get(cord.key) === undefined);
  const laid =
    isLargeGround(ground) || loose.length > mostRoutedInAStep
      ? loose.map((cord) => quickWay(ground, cord, held.get(cord.key)))
      : loose.length === 0
        ? []
        : routeCords(ground, loose, 0).ways;
  const routed = new Map(laid.map((way) => [way.cord.key, way]));
  const ways = cords.map((cord) => kept.get(cord.key) ?? routed.get(cord.key)!);
  return { ways, bands: ground.bands, ...meetings(ways), tracked: before.tracked };
};
