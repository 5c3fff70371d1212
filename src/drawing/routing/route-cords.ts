import type { Rect } from '../geometry.ts';
import type { BandPlace } from './bands.ts';
import { meetings } from './corners.ts';
import type { WayCrossing, WayOverlap } from './corners.ts';
import { detour, withoutIdlePoints } from './detour.ts';
import type { Cord, Corners, Ground, Mouth, Way } from './ground.ts';
import { isTrunkRun, wayIsBlocked } from './ground.ts';
import { runRegister, runsOfWays } from './known-runs.ts';
import { patternWay } from './patterns.ts';
import { bottom, byText, grown, right, runRect } from './rects.ts';
import { settleTracks } from './tracks.ts';
import type { TrackedWays } from './tracks.ts';

const mostRipUps = 6;
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

/** Searches done before with the same band, the same known ways and the same ground to avoid. */
type Searches = Map<string, Corners | undefined>;

const signature = (ground: Ground, cord: Cord, known: readonly Way[], avoid: readonly Rect[]): string =>
  JSON.stringify([
    cord.key,
    cord.width,
    ground.bands.map((band) => band.limbs.map((limb) => [limb.x, limb.width, limb.y, limb.height])),
    known.map((way) => way.corners.map(({ x, y }) => [x, y])),
    avoid.map(({ x, y, width, height }) => [x, y, width, height]),
  ]);

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
  for (const cord of cords) {
    if (ways.has(cord.key)) continue;
    const known = [...ways.values()].filter((way) => way.found !== 'none');
    const avoid = avoided.get(cord.key) ?? [];
    const key = signature(ground, cord, known, avoid);
    const corners = searches.has(key)
      ? searches.get(key)
      : detour(ground, cord, runRegister(runsOfWays(known)), avoid);
    searches.set(key, corners);
    ways.set(
      cord.key,
      corners === undefined
        ? { cord, corners: [cord.a.at, cord.b.at], found: 'none' }
        : { cord, corners, found: 'search' },
    );
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
  return settleTracks(ground, firstWays(ground, measured, new Map(), new Map())).needs;
};

/**
 * A way for every cord. Where some overlap or run into an obstacle, the less bound ones are taken up and searched anew,
 * and the best state found is kept; what still can't pass gets no way at all rather than one across a plate.
 */
export const routeCords = (
  start: Ground,
  cords: readonly Cord[],
  ripUps: number = mostRipUps,
): RoutedCords => {
  const searches: Searches = new Map();
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
  const routed = new Map(
    (loose.length === 0 ? [] : routeCords(ground, loose, 0).ways).map((way) => [way.cord.key, way]),
  );
  const ways = cords.map((cord) => kept.get(cord.key) ?? routed.get(cord.key)!);
  return { ways, bands: ground.bands, ...meetings(ways), tracked: before.tracked };
};
