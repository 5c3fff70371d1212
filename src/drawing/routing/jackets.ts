import type { Side } from '../../engine/model/layout.ts';
import type {
  CombGroup,
  EndName,
  FerruleGeometry,
  JacketGeometry,
  LaneGeometry,
  Path,
  Point,
  Rect,
  RingGeometry,
} from '../geometry.ts';
import { cuff } from '../parts/sizes.ts';
import { nearestAlong, offsetPath, pathAt, pathLength, reversePath, subPath } from '../path-geometry.ts';
import type { BandPlace } from './bands.ts';
import { bandRects } from './bands.ts';
import type { Bundle } from './bundles.ts';
import { cornerRadii, pathThrough, radiiClearOf, shortRuns } from './corners.ts';
import type { WayCrossing } from './corners.ts';
import type { Way } from './ground.ts';
import { isTrunkRun, runWidth } from './ground.ts';
import { branchOf, isBranch } from './trunks.ts';
import { centre, contains, isUpright, opposite, right } from './rects.ts';
import { laneCount } from './ring-seats.ts';

/** Where a ferrule hands its cord over. */
const capPoint = (ferrule: FerruleGeometry): Point => {
  const { rect, capSide } = ferrule;
  const middle = centre(rect);
  if (capSide === 'left') return { x: rect.x, y: middle.y };
  if (capSide === 'right') return { x: right(rect), y: middle.y };
  // On an upright comb the cap is centred on the lane, at the flag's left.
  const x = rect.x + 9.5;
  return { x, y: capSide === 'top' ? rect.y : rect.y + rect.height };
};

const tail = (from: Point, to: Point, side: Side): Path => {
  const middle = { x: (from.x + to.x) / 2, y: (from.y + to.y) / 2 };
  return [
    { kind: 'move', to: from },
    isUpright(side)
      ? { kind: 'curve', c1: { x: from.x, y: middle.y }, c2: { x: to.x, y: middle.y }, to }
      : { kind: 'curve', c1: { x: middle.x, y: from.y }, c2: { x: middle.x, y: to.y }, to },
  ];
};

const cuffRect = (mouth: Point, side: Side, lanes: number): Rect => {
  const across = cuff.perLane * lanes + cuff.margin;
  const [width, height] = isUpright(side) ? [across, cuff.width] : [cuff.width, across];
  return { x: mouth.x - width / 2, y: mouth.y - height / 2, width, height };
};

/** The parts of a path that lie over untrusted bands. */
const overUntrusted = (path: Path, bands: readonly BandPlace[]): readonly Path[] => {
  const rects = bands.filter((band) => !band.trusted).flatMap(bandRects);
  const inside = (along: number): boolean => {
    const at = pathAt(path, along);
    return rects.some((rect) => contains(rect, at));
  };
  const length = pathLength(path);
  /** Where between two lengths the edge of a band lies. */
  const edge = (outer: number, inner: number): number => {
    let [a, b] = [outer, inner];
    for (let i = 0; i < 12; i += 1) {
      const middle = (a + b) / 2;
      if (inside(middle)) b = middle;
      else a = middle;
    }
    return (a + b) / 2;
  };
  const parts: Path[] = [];
  let begun: number | undefined = inside(0) ? 0 : undefined;
  let last = 0;
  for (let along = 4; along < length + 4; along += 4) {
    const here = Math.min(along, length);
    const isIn = inside(here);
    if (isIn && begun === undefined) begun = edge(last, here);
    if (!isIn && begun !== undefined) {
      parts.push(subPath(path, begun, edge(here, last)));
      begun = undefined;
    }
    last = here;
  }
  if (begun !== undefined) parts.push(subPath(path, begun, length));
  return parts;
};

export interface ShapedWay {
  readonly bundle: Bundle;
  readonly way: Way;
  readonly pitch: number;
}

const groupAt = (rings: ReadonlyMap<string, RingGeometry>, bundle: Bundle, end: EndName): CombGroup => {
  const geometry = rings.get(bundle[end].endpoint)!;
  return geometry.groups.find(
    (group) => group.jacket === bundle.id && group.end === end && (group.part ?? 0) === bundle.part,
  )!;
};

/** Every cord as it is drawn: its path, its lanes with their tails, its cuffs, and where it passes over another. */
export const jacketGeometries = (
  shaped: readonly ShapedWay[],
  crossings: readonly WayCrossing[],
  rings: ReadonlyMap<string, RingGeometry>,
  bands: readonly BandPlace[],
  plates: readonly Rect[],
): readonly JacketGeometry[] => {
  const grounds = bands.flatMap(bandRects);
  const ways = shaped.map(({ way }) => way);
  return shaped.map(({ bundle, way, pitch }, index): JacketGeometry => {
    const lanes = laneCount(bundle);
    const noWay = way.found === 'none';
    const branch = isBranch(way);
    const hasOwnMouth = (end: EndName): boolean => !branch || way.cord.trunk!.end !== end;
    const mine = crossings.flatMap(({ under, over, at }) => {
      const [own, other] = under.way === index ? [under, over] : over.way === index ? [over, under] : [];
      if (own === undefined || other === undefined || isTrunkRun(way, own.run)) return [];
      const width = runWidth(shaped[other.way]!.way, other.run);
      return [{ run: own.run, at, width, above: own === over, with: other.way }];
    });
    const corners = noWay ? [way.cord.a.at, way.cord.b.at] : branch ? branchOf(way, ways) : way.corners;
    const radii = corners.length < 3 ? [] : radiiClearOf(way, cornerRadii(way, mine), plates);
    const path = pathThrough(corners, radii, corners.length < 3 ? [] : shortRuns(way));
    const ends = { a: groupAt(rings, bundle, 'a'), b: groupAt(rings, bundle, 'b') };
    const laneGeometries = bundle.tunnels.map((tunnel, k): LaneGeometry => {
      const lanePath = offsetPath(path, (k - (lanes - 1) / 2) * pitch);
      const tailAt = (end: EndName): Path => {
        if (!hasOwnMouth(end)) return [];
        const ferrule = ends[end].ferrules.find((f) => f.tunnel === tunnel.id)!;
        const meeting = end === 'a' ? lanePath[0]!.to : lanePath.at(-1)!.to;
        return tail(capPoint(ferrule), meeting, way.cord[end].side);
      };
      const tails = { a: tailAt('a'), b: tailAt('b') };
      return {
        tunnel: tunnel.id,
        path: tunnel.turned ? reversePath(lanePath) : lanePath,
        tails: tunnel.turned ? { a: tails.b, b: tails.a } : tails,
      };
    });
    return {
      id: bundle.id,
      part: bundle.part,
      kind: bundle.kind,
      ...(bundle.transport === undefined ? {} : { transport: bundle.transport }),
      polyline: corners,
      radii,
      path,
      width: way.cord.width,
      pitch,
      lanes: laneGeometries,
      cuffs:
        bundle.kind === 'bare'
          ? []
          : (['a', 'b'] as const).map((end) => {
              // Out of a trunk the cuff is a collar; it faces the branch's own mouth.
              const at = end === 'a' ? corners[0]! : corners.at(-1)!;
              const side = hasOwnMouth(end)
                ? way.cord[end].side
                : opposite[way.cord[end === 'a' ? 'b' : 'a'].side];
              return { end, rect: cuffRect(at, side, lanes), side };
            }),
      crossings: mine
        .filter(({ above }) => above)
        .map(({ at, width, with: other }) => {
          const along = nearestAlong(path, at);
          return {
            over: shaped[other]!.bundle.id,
            path: subPath(path, along - width / 2 - 6, along + width / 2 + 6),
            ground: grounds.some((rect) => contains(rect, at)) ? ('band' as const) : ('paper' as const),
          };
        }),
      overBand: bundle.kind === 'bare' && !noWay ? overUntrusted(path, bands) : [],
      noWay,
    };
  });
};
