import type { Point, Rect } from '../geometry.ts';
import { trunkWidth } from '../parts/sizes.ts';
import type { BandPlace } from './bands.ts';
import type { Cord, Corners, Ground, Mouth } from './ground.ts';
import { bandOf, foreignBands, isOwn, runIsBlocked } from './ground.ts';
import { bottom, centre, isUpright, outward, overlap, right, runRect } from './rects.ts';

const margin = 4;
const clearance = 4;

/** How wide a cord is where it leaves a mouth: the whole trunk where that is a manifold's. */
const widthAt = ({ trunk, width }: Cord, mouth: Mouth): number =>
  trunk !== undefined && trunk.endpoint === mouth.endpoint ? trunkWidth(trunk.jackets) : width;

const isAhead = (limb: Rect, { at, side }: Mouth): boolean => {
  const out = outward[side];
  const middle = centre(limb);
  return (middle.x - at.x) * out.x + (middle.y - at.y) * out.y > 0;
};

/** True when a mouth looks straight into a limb and nothing stands between. */
const sees = (ground: Ground, cord: Cord, mouth: Mouth, limb: Rect, band: BandPlace): boolean => {
  const half = widthAt(cord, mouth) / 2;
  const middle = centre(limb);
  const upright = isUpright(mouth.side);
  if (upright !== (band.orientation === 'horizontal')) return false;
  const inside = upright
    ? mouth.at.x - half >= limb.x + margin && mouth.at.x + half <= right(limb) - margin
    : mouth.at.y - half >= limb.y + margin && mouth.at.y + half <= bottom(limb) - margin;
  if (!inside) return false;
  const end: Point = upright ? { x: mouth.at.x, y: middle.y } : { x: middle.x, y: mouth.at.y };
  if (runIsBlocked(ground, mouth.at, end, half, clearance, (obstacle) => isOwn(obstacle, mouth)))
    return false;
  const room = runRect(mouth.at, end, half);
  return (
    !ground.frames.some((frame) => frame.site !== mouth.site && overlap(frame.rect, room)) &&
    !foreignBands(ground, cord.transport).some((rect) => overlap(rect, room))
  );
};

const distanceTo = (limb: Rect, { at, side }: Mouth): number =>
  isUpright(side) ? Math.abs(centre(limb).y - at.y) : Math.abs(centre(limb).x - at.x);

/**
 * The plain way between two mouths that both look into their band: straight, as a Z or a C over one limb, or from limb
 * to limb over the header. Undefined where the mouths don't see their band.
 */
export const patternWay = (ground: Ground, cord: Cord): Corners | undefined => {
  const band = bandOf(ground, cord.transport);
  if (band === undefined) return undefined;
  const seenFrom = (mouth: Mouth): Rect | undefined => {
    const limb = band.limbs
      .filter((rect) => isAhead(rect, mouth))
      .sort((p, q) => distanceTo(p, mouth) - distanceTo(q, mouth))[0];
    return limb !== undefined && sees(ground, cord, mouth, limb, band) ? limb : undefined;
  };
  const first = seenFrom(cord.a);
  const last = seenFrom(cord.b);
  if (first === undefined || last === undefined) return undefined;
  const upright = band.orientation === 'horizontal';
  const start = cord.a.at;
  const end = cord.b.at;
  if (first === last) {
    const middle = centre(first);
    const level = upright ? Math.abs(start.x - end.x) : Math.abs(start.y - end.y);
    // A trunk turns into its limb even for a branch straight ahead.
    if (level < 0.5 && cord.a.side !== cord.b.side && cord.trunk === undefined) return [start, end];
    return upright
      ? [start, { x: start.x, y: middle.y }, { x: end.x, y: middle.y }, end]
      : [start, { x: middle.x, y: start.y }, { x: middle.x, y: end.y }, end];
  }
  if (band.header === undefined) return undefined;
  const header = centre(band.header);
  const p = centre(first);
  const q = centre(last);
  return upright
    ? [
        start,
        { x: start.x, y: p.y },
        { x: header.x, y: p.y },
        { x: header.x, y: q.y },
        { x: end.x, y: q.y },
        end,
      ]
    : [
        start,
        { x: p.x, y: start.y },
        { x: p.x, y: header.y },
        { x: q.x, y: header.y },
        { x: q.x, y: end.y },
        end,
      ];
};
