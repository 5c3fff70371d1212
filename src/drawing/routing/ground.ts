import type { Side } from '../../engine/model/layout.ts';
import type { EndName, Point, Rect } from '../geometry.ts';
import { trunkWidth } from '../parts/sizes.ts';
import type { BandPlace } from './bands.ts';
import { bandRects } from './bands.ts';
import { rectIndex } from './rect-index.ts';
import { runRect } from './rects.ts';
import { remembered } from './remember.ts';

/** Something no cord may cross: a plate, a comb, the title block or the legend. `owner` is the device it belongs to. */
export interface Obstacle {
  readonly rect: Rect;
  readonly owner?: string;
  /** The endpoint whose comb it is. */
  readonly endpoint?: string;
}
export interface SiteFrame {
  readonly site: string;
  readonly rect: Rect;
}

/** What cords find on their way. */
export interface Ground {
  readonly sheet: Rect;
  readonly obstacles: readonly Obstacle[];
  readonly frames: readonly SiteFrame[];
  readonly bands: readonly BandPlace[];
}

/** What stands where; a ground's obstacles are looked through for every run. */
export const obstacleIndex = remembered((obstacles: readonly Obstacle[]) =>
  rectIndex((obstacle: Obstacle) => obstacle.rect, obstacles),
);

/** Where a cord or a cable begins, with the direction away from its device; a cable has no endpoint. */
export interface Mouth {
  readonly at: Point;
  readonly side: Side;
  readonly endpoint?: string;
  readonly device: string;
  readonly site: string;
}

/** One jacket or bare cord on its way from mouth to mouth. */
export interface Cord {
  readonly key: string;
  readonly transport?: string;
  readonly width: number;
  readonly leastRadius: number;
  /** Set when it leaves a manifold: all its jackets share one trunk until they part. */
  readonly trunk?: { readonly endpoint: string; readonly end: EndName; readonly jackets: number };
  readonly a: Mouth;
  readonly b: Mouth;
}

/** Corners from mouth a to mouth b; every run level or upright. */
export type Corners = readonly Point[];

/** A cord with the way it takes. */
export interface Way {
  readonly cord: Cord;
  readonly corners: Corners;
  /** How it was found: a plain pattern, a search round obstacles, or not at all. */
  readonly found: 'pattern' | 'search' | 'none';
}

/** Whether the n-th run of a way lies in its manifold's trunk: all but the branch to its own mouth. */
export const isTrunkRun = ({ cord, corners, found }: Way, run: number): boolean =>
  cord.trunk !== undefined &&
  found === 'pattern' &&
  (cord.trunk.end === 'a' ? run < corners.length - 2 : run > 0);

/** How wide the n-th run of a way is: the trunk where it lies in one. */
export const runWidth = (way: Way, run: number): number =>
  isTrunkRun(way, run) ? trunkWidth(way.cord.trunk!.jackets) : way.cord.width;

export const isLevelRun = (p: Point, q: Point): boolean => Math.abs(p.y - q.y) <= Math.abs(p.x - q.x);

export const bandOf = (ground: Ground, transport: string | undefined): BandPlace | undefined =>
  ground.bands.find((band) => band.id === transport);

/** Bands of other transports. */
export const foreignBands = (ground: Ground, transport: string | undefined): readonly Rect[] =>
  ground.bands.filter((band) => band.id !== transport).flatMap(bandRects);

/** Whether an obstacle is what a way begins at: the comb of a cord's ring, or the plate of a cable's pip. */
export const isOwn = (obstacle: Obstacle, mouth: Mouth): boolean =>
  mouth.endpoint === undefined
    ? obstacle.endpoint === undefined && obstacle.owner === mouth.device
    : obstacle.endpoint === mouth.endpoint;

/** True when a run, taken at half a width to either side, comes nearer than `clear` to an obstacle it does not belong to. */
export const runIsBlocked = (
  ground: Ground,
  p: Point,
  q: Point,
  half: number,
  clear: number,
  own?: (obstacle: Obstacle) => boolean,
): boolean => {
  const room = runRect(p, q, half + clear);
  return obstacleIndex(ground.obstacles).isAny(room, (obstacle) => !(own?.(obstacle) ?? false));
};

/** True when any run of a way passes over an obstacle. */
export const wayIsBlocked = (ground: Ground, way: Way, clear = 0): boolean => {
  const { cord, corners } = way;
  for (let i = 0; i + 1 < corners.length; i += 1) {
    const p = corners[i]!;
    const q = corners[i + 1]!;
    const half = runWidth(way, i) / 2 + clear;
    const own = (obstacle: Obstacle): boolean =>
      (i === 0 && isOwn(obstacle, cord.a)) || (i === corners.length - 2 && isOwn(obstacle, cord.b));
    const inner = i > 0 && i < corners.length - 2;
    const room = runRect(p, q, half, inner ? half - 1 : 0);
    if (obstacleIndex(ground.obstacles).isAny(room, (obstacle) => !own(obstacle))) return true;
  }
  return false;
};
