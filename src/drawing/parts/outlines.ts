import type { DeviceKind } from '../../engine/model/devices.ts';
import type { Rect } from '../geometry.ts';
import { firewallChamfer, routerEnd, strip } from './sizes.ts';

// The silhouette tells the kind of a device.

const cutCorners = (r: Rect, c: number, bottom: number): string =>
  `M${r.x + c} ${r.y}H${r.x + r.width - c}l${c} ${c}V${bottom}`;

const roundCorners = (r: Rect, radius: number): string =>
  `M${r.x + radius} ${r.y}H${r.x + r.width - radius}a${radius} ${radius} 0 0 1 ${radius} ${radius}` +
  `V${r.y + r.height - radius}a${radius} ${radius} 0 0 1 ${-radius} ${radius}H${r.x + radius}` +
  `a${radius} ${radius} 0 0 1 ${-radius} ${-radius}V${r.y + radius}a${radius} ${radius} 0 0 1 ${radius} ${-radius}z`;

/** Outline of a faceplate as path data. */
export const plateOutline = (kind: DeviceKind, r: Rect): string => {
  if (kind === 'firewall' || kind === 'ha-pair') {
    const c = firewallChamfer;
    return `${cutCorners(r, c, r.y + r.height - c)}l${-c} ${c}H${r.x + c}l${-c} ${-c}V${r.y + c}z`;
  }
  if (kind === 'router') return roundCorners(r, routerEnd);
  if (kind === 'host') return roundCorners(r, 3);
  return `M${r.x} ${r.y}h${r.width}v${r.height}h${-r.width}z`;
};

/** Outline of the name strip at a faceplate's top. */
export const stripOutline = (kind: DeviceKind, r: Rect): string => {
  const bottom = r.y + strip.height;
  if (kind === 'firewall' || kind === 'ha-pair')
    return `${cutCorners(r, firewallChamfer, bottom)}H${r.x}V${r.y + firewallChamfer}z`;
  if (kind === 'router') {
    const q = routerEnd;
    return `M${r.x} ${bottom}V${r.y + q}a${q} ${q} 0 0 1 ${q} ${-q}H${r.x + r.width - q}a${q} ${q} 0 0 1 ${q} ${q}V${bottom}z`;
  }
  return `M${r.x} ${r.y}h${r.width}v${strip.height}h${-r.width}z`;
};

/** A rectangle grown on all sides. */
export const grown = (r: Rect, by: number): Rect => ({
  x: r.x - by,
  y: r.y - by,
  width: r.width + 2 * by,
  height: r.height + 2 * by,
});
