import type { Point, SheetGeometry } from '../drawing/geometry.ts';
import { contains } from '../drawing/routing/rects.ts';
import type { ElementRef } from '../engine/model/design.ts';

// As far as a port's own hit area reaches.
const reachPx = 12;

/** The port of a device nearest to a point of the sheet; where none is near the device itself, of a pair the member there. */
export const portNear = (geometry: SheetGeometry, ref: ElementRef, at: Point): ElementRef => {
  if (ref.collection !== 'devices' || ref.port !== undefined) return ref;
  const device = geometry.devices.find(({ id }) => id === ref.id);
  const [pip] = (device?.pips ?? [])
    .map((one) => ({ ...one, awayPx: Math.hypot(one.at.x - at.x, one.at.y - at.y) }))
    .filter(({ awayPx }) => awayPx <= reachPx)
    .sort((a, b) => a.awayPx - b.awayPx);
  if (device === undefined) return ref;
  const isPair = device.kind === 'ha-pair';
  if (pip === undefined) {
    const plate = isPair ? device.plates.find(({ rect }) => contains(rect, at)) : undefined;
    return plate?.member === undefined ? ref : { ...ref, member: plate.member };
  }
  return { ...ref, port: pip.port, ...(isPair && pip.member !== undefined ? { member: pip.member } : {}) };
};
