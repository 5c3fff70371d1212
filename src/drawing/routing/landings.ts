import type { Side } from '../../engine/model/layout.ts';
import type { Point, Rect } from '../geometry.ts';
import { landing as landingSizes } from '../parts/sizes.ts';
import type { BandPlace } from './bands.ts';
import { bandRects } from './bands.ts';
import type { LandingRun } from './cable-ends.ts';
import { cableManner } from './cable-ways.ts';
import { detour } from './detour.ts';
import type { Corners, Ground } from './ground.ts';
import { bandOf, foreignBands, runIsBlocked } from './ground.ts';
import type { KnownRuns } from './known-runs.ts';
import {
  bottom,
  clamp,
  contains,
  frameLines,
  isUpright,
  opposite,
  outward,
  overlap,
  right,
  runRect,
} from './rects.ts';

/** Where a WAN cable ends: on an edge of its band, a little inside. */
export interface LandedWay {
  readonly corners: Corners;
  readonly bar: Rect;
}

/** The combs that a WAN cable of one plate has to clear before it turns to its band. */
export interface ElbowRoom {
  readonly above: number;
  readonly below: number;
}

const inset = 8;
const fromFrameLine = 5;
const elbowStep = 14;
const mostElbows = 8;
/** Room that a searched way needs in front of its landing, and how many searches one landing is worth. */
const approach = 16;
const mostSearches = 6;
/** Where along an edge to try, off the nearest place: the near ones first. */
const landingOffsets = [
  0, 14, -14, 28, -28, 56, -56, 84, -84, 126, -126, 180, -180, 260, -260, 360, -360,
] as const;

const barAt = (end: Point, side: Side): Rect => {
  const { width, height } = landingSizes.bar;
  const [w, h] = isUpright(side) ? [height, width] : [width, height];
  return { x: end.x - w / 2, y: end.y - h / 2, width: w, height: h };
};

/** Landings taken so far on each edge, so that no two stand nearer than their spacing. */
export const landingRegister = (): {
  readonly isFree: (edge: string, along: number) => boolean;
  readonly take: (edge: string, along: number) => void;
} => {
  const taken = new Map<string, number[]>();
  return {
    isFree: (edge, along) =>
      (taken.get(edge) ?? []).every((other) => Math.abs(other - along) >= landingSizes.spacing - 0.5),
    take: (edge, along) => void taken.set(edge, [...(taken.get(edge) ?? []), along]),
  };
};

/** Nothing in the way: no plate, no foreign frame, no band of another transport. */
const isClear = (ground: Ground, run: LandingRun, site: string, corners: Corners): boolean =>
  corners.slice(1).every((q, i) => {
    const p = corners[i]!;
    if (runIsBlocked(ground, p, q, 1, 2)) return false;
    const room = runRect(p, q, 1);
    // Not along the top or bottom line of a frame, where it would be taken for a part of it.
    const beside = runRect(p, q, fromFrameLine);
    const isAlongLine = ground.frames.some(({ rect }) =>
      frameLines(rect).some((line) => p.y === q.y && line.width > line.height && overlap(line, beside)),
    );
    return (
      !isAlongLine &&
      !ground.frames.some((frame) => frame.site !== site && overlap(frame.rect, room)) &&
      !foreignBands(ground, run.landing.transport).some((rect) => overlap(rect, room))
    );
  });

interface Edge {
  readonly key: string;
  readonly rect: Rect;
  /** The side of the band that the cable comes to. */
  readonly side: Side;
  /** A limb's short end lies at the edge of the sheet: good only where no long side can be reached. */
  readonly isLimbEnd: boolean;
}

const edgesOf = (band: BandPlace): readonly Edge[] =>
  bandRects(band).flatMap((rect, i) =>
    (['left', 'right', 'top', 'bottom'] as const).map((side) => ({
      key: `${band.id} ${i} ${side}`,
      rect,
      side,
      isLimbEnd: i < band.limbs.length && isUpright(side) === (band.orientation === 'vertical'),
    })),
  );

const spotOn = ({ rect, side }: Edge, along: number): Point => {
  if (isUpright(side)) {
    const y = side === 'top' ? rect.y + landingSizes.depth : bottom(rect) - landingSizes.depth;
    return { x: clamp(along, rect.x + inset, right(rect) - inset), y };
  }
  const x = side === 'left' ? rect.x + landingSizes.depth : right(rect) - landingSizes.depth;
  return { x, y: clamp(along, rect.y + inset, bottom(rect) - inset) };
};

/** The way of a WAN cable to its transport: straight, over an elbow that clears the combs, or searched. */
export const landingWay = (
  ground: Ground,
  run: LandingRun,
  site: string,
  elbow: ElbowRoom,
  register: ReturnType<typeof landingRegister>,
  known: KnownRuns,
): LandedWay | undefined => {
  const band = bandOf(ground, run.landing.transport);
  if (band === undefined) return undefined;
  const { at, side } = run.from;
  const edges = edgesOf(band);
  const done = (edge: Edge, corners: Corners): LandedWay => {
    const end = corners.at(-1)!;
    register.take(edge.key, isUpright(edge.side) ? end.x : end.y);
    return { corners, bar: barAt(end, edge.side) };
  };
  const nearness = (edge: Edge): number => {
    const spot = spotOn(edge, isUpright(edge.side) ? at.x : at.y);
    return Math.abs(spot.x - at.x) + Math.abs(spot.y - at.y) + (edge.isLimbEnd ? 4000 : 0);
  };
  const near = [...edges].sort((p, q) => nearness(p) - nearness(q));

  if (!isUpright(side)) {
    for (const edge of near) {
      // From outside to the band's near side, or from inside to the side ahead.
      if (edge.side !== (contains(edge.rect, at) ? side : opposite[side])) continue;
      const end = spotOn(edge, at.y);
      if (Math.abs(end.y - at.y) > 0.01 || (end.x - at.x) * outward[side].x < 12) continue;
      if (register.isFree(edge.key, at.y) && isClear(ground, run, site, [at, end]))
        return done(edge, [at, end]);
    }
  } else {
    const away = outward[side].y;
    const start = side === 'top' ? Math.min(at.y - 10, elbow.above) : Math.max(at.y + 10, elbow.below);
    for (let i = 0; i < mostElbows; i += 1) {
      const y = start + away * elbowStep * i;
      for (const edge of near) {
        if (isUpright(edge.side)) continue;
        const end = spotOn(edge, y);
        const towards = edge.side === 'left' ? 1 : -1;
        if (Math.abs(end.y - y) > 0.01 || (end.x - at.x) * towards < 20) continue;
        const corners = [at, { x: at.x, y }, end];
        if (register.isFree(edge.key, y) && isClear(ground, run, site, corners)) return done(edge, corners);
      }
    }
    for (const edge of near) {
      if (edge.side !== opposite[side]) continue;
      const end = spotOn(edge, at.x);
      if (Math.abs(end.x - at.x) > 0.01 || (end.y - at.y) * away < 12) continue;
      if (register.isFree(edge.key, at.x) && isClear(ground, run, site, [at, end]))
        return done(edge, [at, end]);
    }
  }
  let searches = 0;
  for (const edge of near) {
    const upright = isUpright(edge.side);
    const out = outward[edge.side];
    for (const off of landingOffsets) {
      const end = spotOn(edge, (upright ? at.x : at.y) + off);
      const outside = { x: end.x + out.x * landingSizes.depth, y: end.y + out.y * landingSizes.depth };
      const before = { x: outside.x + out.x * approach, y: outside.y + out.y * approach };
      if (!register.isFree(edge.key, upright ? end.x : end.y)) continue;
      if (runIsBlocked(ground, before, end, 1, 4) || searches >= mostSearches) continue;
      searches += 1;
      const found = detour(
        ground,
        {
          key: run.key,
          transport: run.landing.transport,
          width: 2,
          leastRadius: 5,
          a: { at, side, device: run.from.device, site },
          b: { at: outside, side: edge.side, device: '', site: '' },
        },
        known,
        [],
        cableManner,
      );
      if (found === undefined) continue;
      const corners = [...found.slice(0, -1), end];
      if (corners.slice(1).some((q, k) => runIsBlocked(ground, corners[k]!, q, 1, 0))) continue;
      return done(edge, corners);
    }
  }
  return undefined;
};
