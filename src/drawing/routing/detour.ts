import type { Side } from '../../engine/model/layout.ts';
import type { Point, Rect } from '../geometry.ts';
import type { Direction, GridSearch } from './a-star.ts';
import { isReachable, searchGrid, stepOf } from './a-star.ts';
import { gridCosts } from './grid-costs.ts';
import { bandRects } from './bands.ts';
import { farField } from './far-field.ts';
import type { FarField, Region } from './far-field.ts';
import type { Cord, Corners, Ground, Mouth } from './ground.ts';
import { bandOf, foreignBands, isLevelRun, isOwn, obstacleIndex } from './ground.ts';
import type { KnownRun, KnownRuns } from './known-runs.ts';
import { bottom, centre, contains, grown, outward, overlap, right } from './rects.ts';

/** How a search weighs what it may pass, and how near it may come to what it may not. */
export interface SearchManner {
  /** Cost of a px inside the own band and elsewhere; whether the way has to pass through that band. */
  readonly ownBand: number;
  readonly open: number;
  readonly throughBand: boolean;
  readonly foreignSite: number;
  readonly foreignBand: number;
  readonly alongRun: number;
  readonly bend: number;
  readonly crossing: number;
  /** Distances to obstacles in px, tried in turn. */
  readonly clearances: readonly number[];
  /** How far a way runs straight out of its mouth when so much is free ahead; undefined where that is too little. */
  readonly stub: (cord: Cord, freePx: number) => number | undefined;
  /** Free lines beside known runs. */
  readonly besideRuns: number;
}

const searchClearance = 12;
const leastClearance = 4;

const cordManner: SearchManner = {
  ownBand: 1,
  open: 3,
  throughBand: true,
  foreignSite: 5,
  foreignBand: 6,
  alongRun: 6,
  bend: 90,
  crossing: 70,
  clearances: [searchClearance, leastClearance],
  stub: ({ width, leastRadius }, free) =>
    free < width / 2 + leastRadius
      ? undefined
      : Math.max(leastRadius + 2, Math.min(width / 2 + 22, free - width / 2 - searchClearance)),
  besideRuns: 10,
};

const windowReach = 420;

const directionOf: { readonly [side in Side]: Direction } = { right: 0, bottom: 1, left: 2, top: 3 };

/** How far a mouth can run straight out before it meets an obstacle. */
const freeRun = (ground: Ground, mouth: Mouth, half: number): number => {
  const out = outward[mouth.side];
  let free = Infinity;
  for (const obstacle of ground.obstacles) {
    if (isOwn(obstacle, mouth)) continue;
    const r = grown(obstacle.rect, leastClearance);
    const level = out.x !== 0;
    const besides = level
      ? mouth.at.y + half <= r.y || mouth.at.y - half >= bottom(r)
      : mouth.at.x + half <= r.x || mouth.at.x - half >= right(r);
    if (besides) continue;
    const near =
      out.x > 0
        ? r.x - mouth.at.x
        : out.x < 0
          ? mouth.at.x - right(r)
          : out.y > 0
            ? r.y - mouth.at.y
            : mouth.at.y - bottom(r);
    const far =
      out.x > 0
        ? right(r) - mouth.at.x
        : out.x < 0
          ? mouth.at.x - r.x
          : out.y > 0
            ? bottom(r) - mouth.at.y
            : mouth.at.y - r.y;
    if (far <= 0) continue;
    free = Math.min(free, Math.max(0, near));
  }
  return free;
};

const stubOf = (ground: Ground, cord: Cord, mouth: Mouth, manner: SearchManner): Point | undefined => {
  const reach = manner.stub(cord, freeRun(ground, mouth, cord.width / 2));
  const out = outward[mouth.side];
  return reach === undefined ? undefined : { x: mouth.at.x + out.x * reach, y: mouth.at.y + out.y * reach };
};

const sortedUnique = (values: readonly number[]): readonly number[] =>
  [...values].sort((a, b) => a - b).filter((value, i, all) => i === 0 || value - all[i - 1]! > 0.01);

const offSheet = 4;
const faraway = 1e5;

/** The ground outside the sheet's frame, as four rectangles. */
const outsideOf = ({ x, y, width, height }: Rect): readonly Rect[] => [
  { x: x - faraway, y: y - faraway, width: 2 * faraway, height: faraway },
  { x: x - faraway, y: y + height, width: 2 * faraway, height: faraway },
  { x: x - faraway, y, width: faraway, height },
  { x: x + width, y, width: faraway, height },
];

interface Trial {
  readonly clearance: number;
  readonly window: Rect | undefined;
  /** Present on a large sheet: leads the search round bands. */
  readonly field?: FarField;
}

/** On a sheet with more obstacles a search looks at its surroundings first, and never at the whole sheet. */
const mostSeenWhole = 300;
/** How far beyond the ends and the way between the bands a search on such a sheet looks. */
const largeReaches = [windowReach, 3 * windowReach] as const;

/**
 * On such a sheet what lies ahead counts for more than it costs at least, so that fewer ways are followed that lead elsewhere;
 * where that takes too many looks, for so much more that the search goes straight for its goal.
 */
const eagerness = [
  { share: 1.2, mostLookedAt: 6_000 },
  { share: 8, mostLookedAt: Infinity },
] as const;

export const isLargeGround = (ground: Ground): boolean => ground.obstacles.length > mostSeenWhole;

const ownRects = (ground: Ground, transport: string | undefined): readonly Rect[] => {
  const band = bandOf(ground, transport);
  return band === undefined ? [] : bandRects(band);
};

/** What a search pays in bands, for a look ahead. */
const regionsFor = (
  ground: Ground,
  transport: string | undefined,
  manner: SearchManner,
): readonly Region[] => [
  ...foreignBands(ground, transport).map((rect) => ({ rect, costPerPx: manner.foreignBand * manner.open })),
  ...ownRects(ground, transport).map((rect) => ({ rect, costPerPx: manner.ownBand })),
];

const attempt = (
  ground: Ground,
  cord: Cord,
  stubs: readonly [Point, Point],
  known: readonly KnownRun[],
  avoided: readonly Rect[],
  manner: SearchManner,
  { clearance, window, field }: Trial,
): Corners | undefined => {
  const half = cord.width / 2;
  const [p, q] = stubs;
  const own = ownRects(ground, cord.transport);
  const needsBand = manner.throughBand && own.length > 0;
  const within = (rect: Rect): boolean => window === undefined || overlap(window, rect);
  const obstacles = window === undefined ? ground.obstacles : obstacleIndex(ground.obstacles).over(window);
  const frames = ground.frames.filter((f) => within(f.rect));
  const foreign = foreignBands(ground, cord.transport);
  const xs: number[] = [p.x, q.x];
  const ys: number[] = [p.y, q.y];
  const lines = (rect: Rect, off: number): void => {
    xs.push(rect.x - off, right(rect) + off);
    ys.push(rect.y - off, bottom(rect) + off);
  };
  for (const { rect } of obstacles) lines(rect, half + clearance);
  for (const { rect } of frames) lines(rect, half + clearance);
  for (const rect of foreign) lines(rect, half + clearance);
  for (const rect of own) {
    const middle = centre(rect);
    xs.push(middle.x);
    ys.push(middle.y);
  }
  for (const run of known) {
    if (!run.fixed) continue;
    const off = half + run.width / 2 + manner.besideRuns;
    for (const end of [p, q]) {
      if (isLevelRun(run.from, run.to) && Math.abs(run.from.y - end.y) < 200)
        ys.push(run.from.y - off, run.from.y + off);
      if (!isLevelRun(run.from, run.to) && Math.abs(run.from.x - end.x) < 200)
        xs.push(run.from.x - off, run.from.x + off);
    }
  }
  // What lies outside the window is not known to this search, so it must stay inside.
  const edge = window ?? grown(ground.sheet, 240);
  const columns = sortedUnique(xs.filter((x) => x === p.x || x === q.x || (x > edge.x && x < right(edge))));
  const rows = sortedUnique(ys.filter((y) => y === p.y || y === q.y || (y > edge.y && y < bottom(edge))));
  const costs = gridCosts(columns, rows, manner.open);
  for (const { rect } of obstacles) costs.close(grown(rect, half + clearance - 0.1));
  if (manner.foreignBand === Infinity) for (const rect of foreign) costs.close(rect);

  const columnOf = (x: number): number => columns.findIndex((value) => Math.abs(value - x) <= 0.01);
  const rowOf = (y: number): number => rows.findIndex((value) => Math.abs(value - y) <= 0.01);
  const isInOwn = (column: number, row: number): boolean =>
    own.some((rect) => contains(rect, { x: columns[column]!, y: rows[row]! }));
  const search: GridSearch = {
    xs: columns,
    ys: rows,
    start: { column: columnOf(p.x), row: rowOf(p.y), direction: directionOf[cord.a.side] },
    goal: {
      column: columnOf(q.x),
      row: rowOf(q.y),
      direction: ((directionOf[cord.b.side] + 2) % 4) as Direction,
    },
    cost: costs.of,
    ...(needsBand
      ? {
          fulfils: (column: number, row: number, direction: Direction): boolean => {
            const [dx, dy] = stepOf[direction];
            return isInOwn(column, row) || isInOwn(column + dx, row + dy);
          },
        }
      : {}),
    bendCost: manner.bend,
    leastCostPerPx: own.length === 0 ? manner.open : Math.min(manner.open, manner.ownBand),
  };
  if (!isReachable(search)) return undefined;

  for (const rect of outsideOf(ground.sheet)) costs.weigh(rect, offSheet);
  for (const rect of own) costs.weigh(rect, manner.ownBand / manner.open);
  for (const { site, rect } of frames)
    if (site !== cord.a.site && site !== cord.b.site) costs.weigh(rect, manner.foreignSite);
  if (manner.foreignBand !== Infinity) for (const rect of foreign) costs.weigh(rect, manner.foreignBand);
  for (const rect of avoided) costs.weigh(rect, manner.alongRun);
  for (const run of known) {
    costs.cross(run.from, run.to, manner.crossing);
    if (!run.fixed) continue;
    const level = isLevelRun(run.from, run.to);
    const reach = half + run.width / 2 + 3;
    const along: Rect = {
      x: Math.min(run.from.x, run.to.x) - (level ? 0 : reach),
      y: Math.min(run.from.y, run.to.y) - (level ? reach : 0),
      width: Math.abs(run.to.x - run.from.x) + (level ? 0 : 2 * reach),
      height: Math.abs(run.to.y - run.from.y) + (level ? 2 * reach : 0),
    };
    costs.weigh(along, manner.alongRun);
  }

  const ahead = field?.leastCostsOver(columns, rows);
  let way = ahead === undefined ? searchGrid(search) : undefined;
  if (ahead !== undefined)
    for (const { share, mostLookedAt } of eagerness)
      way ??= searchGrid({
        ...search,
        leastCostFrom: (column, row) => share * ahead(column, row),
        mostLookedAt,
      });
  if (way === undefined) return undefined;
  return withoutIdlePoints([
    cord.a.at,
    ...way.map(({ column, row }) => ({ x: columns[column]!, y: rows[row]! })),
    cord.b.at,
  ]);
};

/** Leaves out points in the middle of a straight run. */
export const withoutIdlePoints = (corners: Corners): Corners => {
  const kept: Point[] = [];
  for (const point of corners) {
    const last = kept.at(-1);
    if (last !== undefined && Math.abs(last.x - point.x) < 0.01 && Math.abs(last.y - point.y) < 0.01)
      continue;
    const before = kept.at(-2);
    if (
      last !== undefined &&
      before !== undefined &&
      ((Math.abs(before.x - last.x) < 0.01 && Math.abs(last.x - point.x) < 0.01) ||
        (Math.abs(before.y - last.y) < 0.01 && Math.abs(last.y - point.y) < 0.01))
    )
      kept.pop();
    kept.push(point);
  }
  return kept;
};

/** The same on a large sheet: within reach of the way that the bands leave. */
const farDetour = (
  ground: Ground,
  cord: Cord,
  stubs: readonly [Point, Point],
  known: KnownRuns,
  avoided: readonly Rect[],
  manner: SearchManner,
): Corners | undefined => {
  const [p, q] = stubs;
  const field = farField(q, regionsFor(ground, cord.transport, manner), manner.open, [p]);
  const room = field.roomOfWayFrom(p);
  if (room === undefined) return undefined;
  const tries = [
    ...largeReaches.map((reach) => ({ reach, clearance: manner.clearances[0]! })),
    { reach: largeReaches[0], clearance: manner.clearances.at(-1)! },
  ];
  for (const { reach, clearance } of tries) {
    const window = grown(room, reach);
    const found = attempt(ground, cord, stubs, known.near(window), avoided, manner, {
      clearance,
      window,
      field,
    });
    if (found !== undefined) return found;
  }
  return undefined;
};

/** The cheapest way round whatever stands between two mouths and through their own band; undefined where there is none. */
export const detour = (
  ground: Ground,
  cord: Cord,
  known: KnownRuns,
  avoided: readonly Rect[] = [],
  manner: SearchManner = cordManner,
): Corners | undefined => {
  const p = stubOf(ground, cord, cord.a, manner);
  const q = stubOf(ground, cord, cord.b, manner);
  if (p === undefined || q === undefined) return undefined;
  if (isLargeGround(ground)) return farDetour(ground, cord, [p, q], known, avoided, manner);
  const band = bandOf(ground, cord.transport);
  const points = [cord.a.at, cord.b.at];
  const x0 = Math.min(...points.map((point) => point.x));
  const x1 = Math.max(...points.map((point) => point.x));
  const y0 = Math.min(...points.map((point) => point.y));
  const y1 = Math.max(...points.map((point) => point.y));
  const nearest =
    band === undefined
      ? undefined
      : [...bandRects(band)].sort(
          (r, s) => Math.abs(centre(r).x - (x0 + x1) / 2) - Math.abs(centre(s).x - (x0 + x1) / 2),
        )[0];
  const window = grown(
    {
      x: Math.min(x0, nearest?.x ?? x0),
      y: y0,
      width: Math.max(x1, nearest === undefined ? x1 : right(nearest)) - Math.min(x0, nearest?.x ?? x0),
      height: y1 - y0,
    },
    windowReach,
  );
  const trials: readonly Trial[] = [
    { clearance: manner.clearances[0]!, window },
    ...manner.clearances.map((clearance) => ({ clearance, window: undefined })),
  ];
  for (const trial of trials) {
    const found = attempt(ground, cord, [p, q], known.all(), avoided, manner, trial);
    if (found !== undefined) return found;
  }
  return undefined;
};
