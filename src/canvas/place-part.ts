import type { Point, SheetGeometry } from '../drawing/geometry.ts';
import { plateSizes } from '../drawing/parts/sizes.ts';
import type { Design } from '../engine/model/design.ts';
import type { DeviceKind } from '../engine/model/devices.ts';
import { isGateway } from '../engine/model/devices.ts';
import type { NewId, Operation } from '../workspace/operations/operation.ts';
import { refused } from '../workspace/operations/operation.ts';
import {
  placeDevice,
  placeEndpoint,
  placeNote,
  placeSite,
  placeTransport,
} from '../workspace/operations/place-parts.ts';
import type { ConnectEnd } from './connect-ends.ts';
import { deviceAt, siteAt } from './flow-changes-to-patch.ts';

/** The parts of the tray that stand somewhere. */
export type PlacedPart = DeviceKind | 'endpoint' | 'site' | 'transport' | 'note';
/** The parts of the tray that join two ends. */
export type JoiningPart = 'cable' | 'tunnel' | 'association';
export type TrayPart = PlacedPart | JoiningPart;

export const isJoining = (part: TrayPart): part is JoiningPart =>
  part === 'cable' || part === 'tunnel' || part === 'association';
const isDeviceKind = (part: TrayPart): part is DeviceKind => Object.hasOwn(plateSizes, part);

const pipReachPx = 13;
const ringReachPx = 18;
const deviceReachPx = 60;

/** What a click at a point of the sheet picks as an end: a pip before a ring before a plate before a band. */
export const endAt = (geometry: SheetGeometry, at: Point): ConnectEnd | undefined => {
  const near = (point: Point, reach: number): boolean => Math.hypot(point.x - at.x, point.y - at.y) <= reach;
  for (const device of geometry.devices)
    for (const pip of device.pips)
      if (near(pip.at, pipReachPx))
        return {
          kind: 'device',
          id: device.id,
          port: pip.port,
          ...(pip.member === undefined ? {} : { member: pip.member }),
        };
  const ring = geometry.rings.find((candidate) => near(candidate.centre, ringReachPx));
  if (ring !== undefined) return { kind: 'endpoint', id: ring.endpoint };
  const device = deviceAt(geometry, at);
  if (device !== undefined) return { kind: 'device', id: device };
  const band = geometry.bands.find((candidate) =>
    [...candidate.limbs, ...(candidate.header === undefined ? [] : [candidate.header])].some(
      (rect) =>
        at.x >= rect.x && at.x <= rect.x + rect.width && at.y >= rect.y && at.y <= rect.y + rect.height,
    ),
  );
  return band === undefined ? undefined : { kind: 'transport', id: band.id };
};

/** Puts a part from the tray down at a point of the sheet. */
export const placePart = (
  design: Design,
  geometry: SheetGeometry,
  part: PlacedPart,
  at: Point,
  newId: NewId,
): Operation => {
  const { frame, titleBlock } = geometry.sheet;
  if (isDeviceKind(part)) {
    const size = plateSizes[part];
    const corner = { x: Math.round(at.x - size.width / 2), y: Math.round(at.y - size.height / 2) };
    return placeDevice(design, part, corner, siteAt(geometry, at), newId);
  }
  if (part === 'site')
    return placeSite(design, { x: Math.round(at.x - 180), y: Math.round(at.y - 125) }, newId);
  if (part === 'note') return placeNote({ x: Math.round(at.x), y: Math.round(at.y) }, newId);
  if (part === 'transport') {
    const overTitle =
      at.x + 70 > titleBlock.x || at.x - 70 < geometry.sheet.legend.x + geometry.sheet.legend.width;
    return placeTransport(
      design,
      { x: Math.round(at.x), y: at.y },
      { top: frame.y, bottom: overTitle ? titleBlock.y : frame.y + frame.height },
      newId,
    );
  }
  const device = deviceAt(geometry, at) ?? deviceAt(geometry, at, deviceReachPx);
  if (device === undefined)
    return refused('A loopback endpoint docks on a device: drop it on a firewall, an HA pair or a router.');
  return placeEndpoint(design, device, newId);
};

/**
 * Where a part goes when the keyboard places it: beside what is already in the selected site, else on free ground near
 * the middle of the view.
 */
export const freePlace = (
  design: Design,
  geometry: SheetGeometry,
  part: PlacedPart,
  site: string | undefined,
  middle: Point,
): Point => {
  if (part === 'endpoint') {
    const gateway = geometry.devices.find(
      (device) =>
        isGateway(design.devices[device.id]!) &&
        (site === undefined || design.devices[device.id]!.site === site) &&
        !Object.values(design.endpoints).some((endpoint) => endpoint.device === device.id),
    );
    return gateway === undefined
      ? middle
      : { x: gateway.rect.x + gateway.rect.width / 2, y: gateway.rect.y + gateway.rect.height / 2 };
  }
  const size = isDeviceKind(part) ? plateSizes[part] : { width: 140, height: 80 };
  const frame =
    site === undefined ? undefined : geometry.sites.find((candidate) => candidate.id === site)?.rect;
  const start =
    frame === undefined ? middle : { x: frame.x + 30 + size.width / 2, y: frame.y + 44 + size.height / 2 };
  const free = (at: Point): boolean =>
    geometry.devices.every(
      ({ rect }) =>
        Math.abs(rect.x + rect.width / 2 - at.x) > (rect.width + size.width) / 2 + 12 ||
        Math.abs(rect.y + rect.height / 2 - at.y) > (rect.height + size.height) / 2 + 12,
    );
  const step = { x: size.width + 30, y: size.height + 26 };
  const columns = frame === undefined ? 3 : Math.max(1, Math.floor((frame.width - 40) / step.x));
  for (let i = 0; i < 60; i += 1) {
    const at = { x: start.x + (i % columns) * step.x, y: start.y + Math.floor(i / columns) * step.y };
    if (free(at)) return at;
  }
  return start;
};
