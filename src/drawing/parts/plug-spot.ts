import type { Side } from '../../engine/model/layout.ts';
import type { Plug } from '../../engine/model/underlay.ts';
import type { Point, SheetGeometry } from '../geometry.ts';

/** Where a plug's port stands on the sheet and which way it faces; the middle of the plate's lower edge while the port isn't drawn. */
export const plugSpot = (
  geometry: SheetGeometry,
  plug: Plug,
): { readonly at: Point; readonly side: Side } | undefined => {
  const device = geometry.devices.find((candidate) => candidate.id === plug.device);
  if (device === undefined) return undefined;
  const member = plug.member ?? 1;
  const pip = device.pips.find(
    (candidate) => candidate.port === plug.port && (candidate.member ?? member) === member,
  );
  if (pip !== undefined) return { at: pip.at, side: pip.side };
  const plate = device.plates.find((candidate) => (candidate.member ?? member) === member);
  if (plate === undefined) return undefined;
  const { x, y, width, height } = plate.rect;
  return { at: { x: x + width / 2, y: y + height }, side: 'bottom' };
};
