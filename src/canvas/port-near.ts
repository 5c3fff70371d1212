import type { Point, SheetGeometry } from '../drawing/geometry.ts';
import type { ElementRef } from '../engine/model/design.ts';

// As far as a port's own hit area reaches.
const reachPx = 12;

/** The port of a device nearest to a point of the sheet; the device itself where none is near. */
export const portNear = (geometry: SheetGeometry, ref: ElementRef, at: Point): ElementRef => {
  if (ref.collection !== 'devices' || ref.port !== undefined) return ref;
  const device = geometry.devices.find(({ id }) => id === ref.id);
  const [pip] = (device?.pips ?? [])
    .map((one) => ({ ...one, awayPx: Math.hypot(one.at.x - at.x, one.at.y - at.y) }))
    .filter(({ awayPx }) => awayPx <= reachPx)
    .sort((a, b) => a.awayPx - b.awayPx);
  if (device === undefined || pip === undefined) return ref;
  const isPair = device.kind === 'ha-pair';
  return { ...ref, port: pip.port, ...(isPair && pip.member !== undefined ? { member: pip.member } : {}) };
};
