import type { Side } from '../../engine/model/layout.ts';
import type { Plug } from '../../engine/model/underlay.ts';
import type { Point, Rect, SheetGeometry } from '../geometry.ts';

const besideCabled = 14;

interface Spot {
  readonly at: Point;
  readonly side: Side;
}

const middleOf = ({ x, y, width, height }: Rect): Point => ({ x: x + width / 2, y: y + height / 2 });

/** The middle of the edge that looks at a point. */
const edgeTowards = (rect: Rect, point: Point): Spot => {
  const middle = middleOf(rect);
  const [dx, dy] = [point.x - middle.x, point.y - middle.y];
  if (Math.abs(dx) * rect.height > Math.abs(dy) * rect.width)
    return dx > 0
      ? { at: { x: rect.x + rect.width, y: middle.y }, side: 'right' }
      : { at: { x: rect.x, y: middle.y }, side: 'left' };
  return dy > 0
    ? { at: { x: middle.x, y: rect.y + rect.height }, side: 'bottom' }
    : { at: { x: middle.x, y: rect.y }, side: 'top' };
};

/** Where a plug's port stands on the sheet and which way it faces; while the port isn't drawn, the edge that looks at `other`. */
export const plugSpot = (geometry: SheetGeometry, plug: Plug, other: Plug): Spot | undefined => {
  const device = geometry.devices.find((candidate) => candidate.id === plug.device);
  if (device === undefined) return undefined;
  const member = plug.member ?? 1;
  const pip = device.pips.find(
    (candidate) => candidate.port === plug.port && (candidate.member ?? member) === member,
  );
  const facing = geometry.devices.find((candidate) => candidate.id === other.device);
  if (pip !== undefined) {
    const { at, side, cabled } = pip;
    if (!cabled || facing === undefined) return { at, side };
    // Beside a pip that holds a cable already, on the side of what it would lead to.
    const there = middleOf(facing.rect);
    return side === 'left' || side === 'right'
      ? { at: { x: at.x, y: at.y + Math.sign(there.y - at.y) * besideCabled }, side }
      : { at: { x: at.x + Math.sign(there.x - at.x) * besideCabled, y: at.y }, side };
  }
  const plate = device.plates.find((candidate) => (candidate.member ?? member) === member);
  return plate === undefined || facing === undefined
    ? undefined
    : edgeTowards(plate.rect, middleOf(facing.rect));
};
