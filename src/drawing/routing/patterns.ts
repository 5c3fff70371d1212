import type { Point, Rect } from '../geometry.ts';
import type { BandPlace } from './bands.ts';
import type { Cord, Corners, Ground, Mouth } from './ground.ts';
import { bandOf, foreignBands, isOwn, runIsBlocked } from './ground.ts';
import { bottom, centre, isUpright, outward, overlap, right, runRect } from './rects.ts';

const margin = 4;
const clearance = 4;

/** True when a mouth looks straight into a limb and nothing stands between. */
const sees = (ground: Ground, cord: Cord, mouth: Mouth, limb: Rect, band: BandPlace): boolean => {
  const half = cord.width / 2;
  const middle = centre(limb);
  const upright = isUpright(mouth.side);
  if (upright !== (band.orientation === 'horizontal')) return false;
  const out = outward[mouth.side];
  const inside = upright
    ? mouth.at.x - half >= limb.x + margin && mouth.at.x + half <= right(limb) - margin
    : mouth.at.y - half >= limb.y + margin && mouth.at.y + half <= bottom(limb) - margin;
  const ahead = upright ? (middle.y - mouth.at.y) * out.y : (middle.x - mouth.at.x) * out.x;
  if (!inside || ahead <= 0) return false;
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
  const seen = (mouth: Mouth): readonly Rect[] =>
    band.limbs
      .filter((limb) => sees(ground, cord, mouth, limb, band))
      .sort((p, q) => distanceTo(p, mouth) - distanceTo(q, mouth));
  const a = seen(cord.a);
  const b = seen(cord.b);
  const first = a[0];
  const last = b[0];
  if (first === undefined || last === undefined) return undefined;
  const upright = band.orientation === 'horizontal';
  const start = cord.a.at;
  const end = cord.b.at;
  const shared = a.find((limb) => b.includes(limb));
  if (shared !== undefined) {
    const middle = centre(shared);
    const level = upright ? Math.abs(start.x - end.x) : Math.abs(start.y - end.y);
    if (level < 0.5 && cord.a.side !== cord.b.side) return [start, end];
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
