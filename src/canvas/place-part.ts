import type { Point, Rect, SheetGeometry } from '../drawing/geometry.ts';
import { plateSizes, type Size } from '../drawing/parts/sizes.ts';
import type { Design } from '../engine/model/design.ts';
import type { DeviceKind } from '../engine/model/devices.ts';
import { isGateway } from '../engine/model/devices.ts';
import type { NumberingContext } from '../engine/numbering/numbering-context.ts';
import type { NewId, Operation } from '../workspace/operations/operation.ts';
import { refused } from '../workspace/operations/operation.ts';
import {
  newSiteSize,
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

/** Puts a part from the tray down at a point of the sheet; a device goes into `site`, or the one whose frame is there. */
export const placePart = (
  design: Design,
  geometry: SheetGeometry,
  part: PlacedPart,
  at: Point,
  newId: NewId,
  context: NumberingContext,
  site: string | undefined = siteAt(geometry, at),
): Operation => {
  const { frame, titleBlock } = geometry.sheet;
  if (isDeviceKind(part)) {
    const size = plateSizes[part];
    const corner = { x: Math.round(at.x - size.width / 2), y: Math.round(at.y - size.height / 2) };
    return placeDevice(design, part, corner, site, newId);
  }
  if (part === 'site')
    return placeSite(
      design,
      { x: Math.round(at.x - newSiteSize.width / 2), y: Math.round(at.y - newSiteSize.height / 2) },
      newId,
    );
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
  return placeEndpoint(design, device, newId, context);
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
  const size = isDeviceKind(part)
    ? plateSizes[part]
    : part === 'site'
      ? newSiteSize
      : { width: 140, height: 80 };
  const taken =
    part === 'site'
      ? [...geometry.sites.map((each) => each.rect), ...geometry.bands.flatMap((band) => band.limbs)]
      : geometry.devices.map((device) => device.rect);
  const free = (at: Point): boolean =>
    taken.every(
      (rect) =>
        Math.abs(rect.x + rect.width / 2 - at.x) > (rect.width + size.width) / 2 + roomPx ||
        Math.abs(rect.y + rect.height / 2 - at.y) > (rect.height + size.height) / 2 + roomPx,
    );
  const frame = part === 'site' ? undefined : geometry.sites.find((candidate) => candidate.id === site)?.rect;
  const places = frame === undefined ? placesOver(geometry.sheet.frame, size, middle) : rowsIn(frame, size);
  return places.find(free) ?? places[0] ?? middle;
};

const roomPx = 12;

/** Places in a site's frame, row by row and on below it: a frame grows with what stands in it. */
const rowsIn = (frame: Rect, size: Size): readonly Point[] => {
  const step = { x: size.width + 2 * roomPx + 2, y: size.height + 2 * roomPx + 2 };
  const columns = Math.max(1, Math.floor((frame.width - 40) / step.x));
  return Array.from({ length: 40 }, (_, i) => ({
    x: frame.x + 30 + size.width / 2 + (i % columns) * step.x,
    y: frame.y + 44 + size.height / 2 + Math.floor(i / columns) * step.y,
  }));
};

/** Places over the whole sheet, the nearest to the middle of the view first. */
const placesOver = (frame: Rect, size: Size, middle: Point): readonly Point[] => {
  const stepPx = 20;
  const along = (from: number, length: number, own: number): number[] =>
    Array.from(
      { length: Math.max(1, Math.floor((length - own - 2 * roomPx) / stepPx) + 1) },
      (_, i) => from + roomPx + own / 2 + i * stepPx,
    );
  const distance = (at: Point): number => Math.hypot(at.x - middle.x, at.y - middle.y);
  return along(frame.y, frame.height, size.height)
    .flatMap((y) => along(frame.x, frame.width, size.width).map((x) => ({ x, y })))
    .concat(middle)
    .sort((a, b) => distance(a) - distance(b) || a.y - b.y || a.x - b.x);
};
