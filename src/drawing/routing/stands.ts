import type { Design, Entry } from '../../engine/model/design.ts';
import type { PlateGeometry, Rect, SheetFrame } from '../geometry.ts';
import {
  hostGlyphColumn,
  pair,
  pip,
  plateSizes,
  ring,
  site as siteSizes,
  strip,
  text,
} from '../parts/sizes.ts';
import type { Size } from '../parts/sizes.ts';
import { textWidth } from '../text-width.ts';
import { around, bottom, byText, grown, overlap, right } from './rects.ts';

type Device = Entry<'devices'>;

/** A device where it stands, before its pips and rings are placed. */
export interface Stand {
  readonly id: string;
  readonly device: Device;
  readonly plates: readonly PlateGeometry[];
  /** Bounds of its plates. */
  readonly rect: Rect;
}

/** How many pips the fuller of two facing sides holds; a plate grows with them. */
export interface PortLoad {
  readonly upright: number;
  readonly level: number;
  readonly rings: number;
}
const noLoad: PortLoad = { upright: 0, level: 0, rings: 0 };

const widestName = { device: 260, host: 340 } as const;

/** The address a host shows on its plate: its first, without the prefix length. */
export const hostAddress = (device: Device): string =>
  device.kind === 'host' ? (device.addresses?.[0]?.replace(/\/\d+$/, '') ?? '') : '';

/** How large one faceplate of a device is, so that its name, its pips and its rings fit; for a pair, one member. */
export const plateSize = (device: Device, load: PortLoad = noLoad): Size => {
  const base = plateSizes[device.kind];
  const across = 12 + pip.spacing * load.level;
  if (device.kind === 'host') {
    const words = Math.max(
      textWidth(device.name, text.hostName, 600),
      textWidth(hostAddress(device), text.hostAddress),
    );
    return {
      width: Math.min(widestName.host, Math.max(base.width, Math.ceil(hostGlyphColumn + 12 + words), across)),
      height: Math.max(base.height, 10 + pip.spacing * load.upright),
    };
  }
  const names = device.kind === 'ha-pair' ? [device.memberNames[1], device.memberNames[2]] : [device.name];
  const words = Math.max(...names.map((name) => textWidth(name, text.deviceName, 600)));
  return {
    width: Math.min(widestName.device, Math.max(base.width, Math.ceil(strip.nameAt + words + 12), across)),
    height: Math.max(
      base.height,
      strip.height + 10 + pip.spacing * load.upright,
      2 * 22 + ring.spacing * (load.rings - 1),
    ),
  };
};

/** A device's plates from the top left corner of its first one. */
const standAt = (id: string, device: Device, x: number, y: number, load?: PortLoad): Stand => {
  const size = plateSize(device, load);
  if (device.kind !== 'ha-pair') {
    const rect = { x, y, ...size };
    return { id, device, plates: [{ rect }], rect };
  }
  const plates: PlateGeometry[] = [
    { member: 1, rect: { x, y, ...size } },
    { member: 2, rect: { x: x + pair.shift, y: y + size.height + pair.gap, ...size } },
  ];
  return { id, device, plates, rect: around(plates.map((plate) => plate.rect))! };
};

const kindOrder = { firewall: 0, 'ha-pair': 0, router: 1, switch: 2, host: 3 } as const;

/** Devices in the order in which a reader meets them: gateways, routers, switches, hosts; by id among equals. */
const inReadingOrder = (a: readonly [string, Device], b: readonly [string, Device]): number =>
  kindOrder[a[1].kind] - kindOrder[b[1].kind] || byText(a[0], b[0]);

/** Devices that a collapsed site keeps back: all but its gateways with endpoints. */
export const hiddenDevices = (design: Design): ReadonlySet<string> => {
  const collapsed = new Set(
    Object.entries(design.layout.sites ?? {})
      .filter(([, place]) => place.collapsed === true)
      .map(([id]) => id),
  );
  if (collapsed.size === 0) return new Set();
  const ringed = new Set(Object.values(design.endpoints).map((endpoint) => endpoint.device));
  return new Set(
    Object.entries(design.devices)
      .filter(([id, device]) => collapsed.has(device.site) && !ringed.has(id))
      .map(([id]) => id),
  );
};

/**
 * Where every visible device stands. One without a position goes beneath the others of its site, or into the site's
 * own rectangle, or, with nothing to go by, into the next free place of the sheet.
 */
export const standsOf = (
  design: Design,
  sheet: SheetFrame,
  loads: ReadonlyMap<string, PortLoad> = new Map(),
): ReadonlyMap<string, Stand> => {
  const hidden = hiddenDevices(design);
  const stands = new Map<string, Stand>();
  const taken: Rect[] = [];
  const ofSite = new Map<string, Rect[]>();
  const settle = (stand: Stand): void => {
    stands.set(stand.id, stand);
    taken.push(stand.rect);
    ofSite.set(stand.device.site, [...(ofSite.get(stand.device.site) ?? []), stand.rect]);
  };
  const homeless: (readonly [string, Device])[] = [];
  for (const [id, device] of Object.entries(design.devices).sort(([a], [b]) => byText(a, b))) {
    if (hidden.has(id)) continue;
    const at = design.layout.devices?.[id];
    if (at === undefined) homeless.push([id, device]);
    else settle(standAt(id, device, at.x, at.y, loads.get(id)));
  }
  let slot = 0;
  for (const [id, device] of homeless.sort((a, b) => byText(a[1].site, b[1].site) || inReadingOrder(a, b))) {
    const neighbours = around(ofSite.get(device.site) ?? []);
    const rect = design.layout.sites?.[device.site];
    let x: number;
    let y: number;
    if (neighbours !== undefined) {
      x = neighbours.x;
      y = bottom(neighbours) + 40;
    } else if (rect !== undefined) {
      x = rect.x + siteSizes.toCordedEdge;
      y = rect.y + siteSizes.nameLine;
    } else {
      x = sheet.frame.x + 160 + (slot % 2) * Math.max(620, sheet.frame.width - 460);
      y = sheet.frame.y + 60 + Math.floor(slot / 2) * 260;
      slot += 1;
    }
    let stand = standAt(id, device, x, y, loads.get(id));
    for (;;) {
      const room = grown(stand.rect, 20);
      const blocker = taken.find((other) => overlap(room, other));
      if (blocker === undefined) break;
      stand = standAt(id, device, x, Math.max(stand.rect.y + 1, bottom(blocker) + 30), loads.get(id));
    }
    settle(stand);
  }
  return stands;
};

/** The edge of a rectangle on one side, as a coordinate. */
export const edgeOf = (rect: Rect, side: 'left' | 'right' | 'top' | 'bottom'): number =>
  side === 'left' ? rect.x : side === 'right' ? right(rect) : side === 'top' ? rect.y : bottom(rect);
