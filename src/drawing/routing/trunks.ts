import type { Point, TrunkGeometry } from '../geometry.ts';
import { cord as cordSizes, trunkWidth } from '../parts/sizes.ts';
import { nearestAlong, pathLength, subPath } from '../path-geometry.ts';
import type { Bundle } from './bundles.ts';
import { cornerRadii, pathThrough } from './corners.ts';
import { withoutIdlePoints } from './detour.ts';
import type { Corners, Way } from './ground.ts';
import { isTrunkRun } from './ground.ts';
import { byText } from './rects.ts';
import { remembered } from './remember.ts';

interface Member {
  readonly id: string;
  readonly way: Way;
  /** From the manifold to where its branch leaves. */
  readonly stem: Corners;
  readonly lengthPx: number;
}

const distance = (p: Point, q: Point): number => Math.abs(p.x - q.x) + Math.abs(p.y - q.y);
const lengthOf = (corners: Corners): number =>
  corners.slice(1).reduce((sum, q, i) => sum + distance(corners[i]!, q), 0);

/** Whether a way is drawn as a branch of its manifold's trunk. */
export const isBranch = (way: Way): boolean =>
  isTrunkRun(way, way.cord.trunk?.end === 'a' ? 0 : way.corners.length - 2);

/** The branch of a way from the edge of its trunk to its own mouth, in the direction from a to b. */
export const branchOf = (way: Way, ways: readonly Way[]): Corners => {
  const { cord, corners } = way;
  const [root, mouth] =
    cord.trunk!.end === 'a' ? [corners.at(-2)!, corners.at(-1)!] : [corners[1]!, corners[0]!];
  const stem = stemOf(way);
  const length = lengthOf(stem);
  const inside = ways.filter(
    (other) =>
      other.cord.trunk?.endpoint === cord.trunk!.endpoint &&
      isBranch(other) &&
      sharedLength(stem, stemOf(other)) >= length - 0.5,
  ).length;
  const reach = Math.min(trunkWidth(inside) / 2, distance(root, mouth) - 1);
  const edge = {
    x: root.x + Math.sign(mouth.x - root.x) * reach,
    y: root.y + Math.sign(mouth.y - root.y) * reach,
  };
  return cord.trunk!.end === 'a' ? [edge, mouth] : [mouth, edge];
};

const stemOf = remembered(({ cord, corners }: Way): Corners =>
  withoutIdlePoints(cord.trunk!.end === 'a' ? corners.slice(0, -1) : [...corners].reverse().slice(0, -1)),
);

/** How far two stems run together. */
const sharedLength = (a: Corners, b: Corners): number => {
  let shared = 0;
  for (let i = 1; i < a.length && i < b.length; i += 1) {
    const [p, q, r] = [a[i - 1]!, a[i]!, b[i]!];
    const sameWay =
      Math.sign(q.x - p.x) === Math.sign(r.x - p.x) && Math.sign(q.y - p.y) === Math.sign(r.y - p.y);
    if (!sameWay) return shared;
    const step = Math.min(distance(p, q), distance(p, r));
    shared += step;
    if (distance(q, r) > 0.01) return shared;
  }
  return shared;
};

const pointAlong = (corners: Corners, along: number): Point => {
  let left = along;
  for (let i = 1; i < corners.length; i += 1) {
    const [p, q] = [corners[i - 1]!, corners[i]!];
    const length = distance(p, q);
    if (left <= length && length > 0)
      return { x: p.x + ((q.x - p.x) * left) / length, y: p.y + ((q.y - p.y) * left) / length };
    left -= length;
  }
  return corners.at(-1)!;
};

/** The trunks of all manifolds, cut where jackets part from them. */
export const trunkGeometries = (
  bundles: readonly Bundle[],
  ways: readonly Way[],
): readonly TrunkGeometry[] => {
  const byManifold = new Map<string, { members: Member[]; isProtected: boolean }>();
  ways.forEach((way, i) => {
    const { trunk } = way.cord;
    if (trunk === undefined || !isBranch(way)) return;
    const stem = stemOf(way);
    const entry = byManifold.get(trunk.endpoint) ?? { members: [], isProtected: false };
    entry.members.push({ id: bundles[i]!.id, way, stem, lengthPx: lengthOf(stem) });
    entry.isProtected ||= bundles[i]!.kind === 'jacket';
    byManifold.set(trunk.endpoint, entry);
  });
  return [...byManifold]
    .sort(([a], [b]) => byText(a, b))
    .map(([endpoint, { members, isProtected }]): TrunkGeometry => {
      const longestFirst = [...members].sort((a, b) => b.lengthPx - a.lengthPx || byText(a.id, b.id));
      const drawn: Member[] = [];
      const pieces: TrunkGeometry['pieces'][number][] = [];
      for (const member of longestFirst) {
        const shared = Math.max(0, ...drawn.map((other) => sharedLength(member.stem, other.stem)));
        const lastRun = distance(member.stem.at(-2)!, member.stem.at(-1)!);
        // A branch that leaves inside a round corner needs a tighter one of its own to meet the trunk.
        const inCorner = member.stem.length > 2 && lastRun < cordSizes.radius;
        if (shared >= member.lengthPx - 0.5 && !inCorner) continue;
        const covered = inCorner ? Math.min(shared, member.lengthPx - lastRun) : shared;
        drawn.push(member);
        const reaches = members.map((other) => ({ id: other.id, to: sharedLength(member.stem, other.stem) }));
        const path = pathThrough(
          member.stem,
          cornerRadii({ cord: member.way.cord, corners: member.stem }, [], cordSizes.radius),
        );
        const total = pathLength(path);
        // A second limb's stem begins a little before it parts, so that its corner joins the one drawn before.
        const from = covered === 0 ? 0 : Math.max(0, covered - cordSizes.radius - 2);
        const stops = [
          ...new Set([from, ...reaches.map(({ to }) => to).filter((to) => to > from + 0.5)]),
        ].sort((a, b) => a - b);
        stops.slice(1).forEach((to, i) => {
          const start = stops[i]!;
          const inside = reaches.filter((reach) => reach.to > start + 0.5).map(({ id }) => id);
          const at = (along: number): number =>
            along >= member.lengthPx - 0.5 ? total : nearestAlong(path, pointAlong(member.stem, along));
          const piece = subPath(path, start === 0 ? 0 : at(start), at(to));
          if (piece.length > 1)
            pieces.push({ path: piece, width: trunkWidth(inside.length), jackets: inside.sort(byText) });
        });
      }
      return { endpoint, isProtected, pieces: pieces.sort((a, b) => a.width - b.width) };
    });
};
