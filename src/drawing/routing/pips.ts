import type { Design } from '../../engine/model/design.ts';
import type { DeviceKind } from '../../engine/model/devices.ts';
import type { Side } from '../../engine/model/layout.ts';
import type { PipGeometry, PipShape, Point, Rect } from '../geometry.ts';
import { firewallChamfer, pip, strip } from '../parts/sizes.ts';
import type { PortSpot } from './port-sides.ts';
import { plateRect, spotKey } from './port-sides.ts';
import { bottom, byText, centre, clamp, isUpright, right } from './rects.ts';
import type { RingSeat } from './ring-seats.ts';
import { combSpan } from './combs.ts';
import type { Stand } from './stands.ts';
import { edgeOf } from './stands.ts';

const shapeOf = (design: Design, spot: PortSpot): PipShape => {
  const device = design.devices[spot.device]!;
  const port = device.ports[spot.port]!;
  if (port.role === 'member-link') return 'bar';
  if (port.role === 'wan' || spot.use === 'wan') return 'lozenge';
  return port.mode === 'access' || (port.mode === undefined && device.kind === 'host') ? 'round' : 'square';
};

/** The stretch of a side on which pips may sit: below a name strip, clear of corners and chamfers. */
const stretch = (kind: DeviceKind, plate: Rect, side: Side): readonly [number, number] => {
  if (isUpright(side)) return [plate.x + 16, right(plate) - 16];
  const isCut = kind === 'firewall' || kind === 'ha-pair';
  return [
    plate.y + (kind === 'host' ? 8 : strip.height + 8),
    bottom(plate) - (isCut ? firewallChamfer + pip.size / 2 + 1 : 8),
  ];
};

/** Free pips beside cabled ones: after them, else before them, as far apart as there is room for up to a wide step. */
const besideCabled = (
  cabled: readonly number[],
  count: number,
  [from, to]: readonly [number, number],
  wide: number,
): readonly number[] | undefined => {
  const [first, last] = [cabled[0], cabled.at(-1)];
  if (first === undefined || last === undefined) return undefined;
  for (const step of [wide, pip.spacing]) {
    if (last + count * step <= to) return Array.from({ length: count }, (_, i) => last + (i + 1) * step);
    if (first - count * step >= from)
      return Array.from({ length: count }, (_, i) => first - (count - i) * step);
  }
  return undefined;
};

// A host's pip stands fast, a gateway's next, and a switch's follow them, so that as many cables as possible run straight.
const firmness: { readonly [kind in DeviceKind]: number } = {
  host: 0,
  firewall: 1,
  'ha-pair': 1,
  router: 1,
  switch: 2,
};

/** Between free pips on a plate's top or bottom, where there is room. */
const freeStep = 28;
const wanInset = { plate: 36, pair: 16 } as const;
/** Between WAN pips under the second member: the address of the outer cable stands between their cables. */
const wanStepBelow = 40;

/** Where a WAN cable leaves its gateway, given the combs on the side it looks at. */
const wanPlaces = (
  spots: readonly PortSpot[],
  stand: Stand,
  seats: readonly RingSeat[],
  towards: ReadonlyMap<string, 'left' | 'right'>,
): ReadonlyMap<string, { readonly at: Point; readonly side: Side }> => {
  const places = new Map<string, { at: Point; side: Side }>();
  const counts = new Map<string, number>();
  for (const spot of spots) {
    const side = towards.get(`${spot.device} ${spot.port}`) ?? 'right';
    const key = spotKey(spot.device, spot.port, spot.member);
    const plate = plateRect(stand, spot.member);
    const corner = (inset: number): number => (side === 'right' ? right(plate) - inset : plate.x + inset);
    const nth = counts.get(`${side} ${spot.member ?? ''}`) ?? 0;
    counts.set(`${side} ${spot.member ?? ''}`, nth + 1);
    if (spot.member !== undefined) {
      const x = corner(wanInset.pair + (spot.member === 2 ? wanStepBelow : pip.spacing) * nth);
      places.set(key, { at: { x, y: edgeOf(plate, spot.side) }, side: spot.side });
      continue;
    }
    // WAN cables to both sides leave at one height, unless a high comb pushes its own over the top.
    const topOf = (which: readonly RingSeat[]): number =>
      Math.min(...which.map((seat) => combSpan(seat).from));
    const heights = [seats, seats.filter((seat) => seat.side === side)].map(
      (which) => Math.min(plate.y + 19, topOf(which) - 15) - pip.spacing * nth,
    );
    const y = heights.find((height) => height >= plate.y + 8);
    if (y !== undefined) places.set(key, { at: { x: edgeOf(plate, side), y }, side });
    else places.set(key, { at: { x: corner(wanInset.plate + pip.spacing * nth), y: plate.y }, side: 'top' });
  }
  return places;
};

/** Spreads `count` pips about a middle, at least their spacing apart and inside the stretch if it is long enough. */
const spread = (count: number, middle: number, [from, to]: readonly [number, number]): number[] => {
  const step = count < 2 ? 0 : Math.max(pip.spacing / 2, Math.min(pip.spacing, (to - from) / (count - 1)));
  const half = (step * (count - 1)) / 2;
  const at = from + half > to - half ? (from + to) / 2 : clamp(middle, from + half, to - half);
  return Array.from({ length: count }, (_, i) => at - half + i * step);
};

/** Where every pip sits. */
export const placePips = (
  design: Design,
  stands: ReadonlyMap<string, Stand>,
  spots: readonly PortSpot[],
  seats: readonly RingSeat[],
  wanTowards: ReadonlyMap<string, 'left' | 'right'>,
): ReadonlyMap<string, PipGeometry> => {
  const placed = new Map<string, PipGeometry>();
  const put = (spot: PortSpot, at: Point, side: Side): void => {
    placed.set(spotKey(spot.device, spot.port, spot.member), {
      device: spot.device,
      port: spot.port,
      ...(spot.member === undefined ? {} : { member: spot.member }),
      at,
      side,
      shape: shapeOf(design, spot),
      cabled: spot.use !== 'free',
    });
  };
  const byDevice = new Map<string, PortSpot[]>();
  for (const spot of spots) byDevice.set(spot.device, [...(byDevice.get(spot.device) ?? []), spot]);
  const order = [...byDevice.keys()].sort(
    (a, b) => firmness[design.devices[a]!.kind] - firmness[design.devices[b]!.kind] || byText(a, b),
  );
  for (const id of order) {
    const stand = stands.get(id)!;
    const own = byDevice.get(id)!;
    const kind = stand.device.kind;
    const taken: PipGeometry[] = [];
    const wan = wanPlaces(
      own.filter((spot) => spot.use === 'wan'),
      stand,
      seats.filter((seat) => seat.device === id),
      wanTowards,
    );
    for (const spot of own) {
      const place = wan.get(spotKey(spot.device, spot.port, spot.member));
      if (place === undefined) continue;
      put(spot, place.at, place.side);
      taken.push(placed.get(spotKey(spot.device, spot.port, spot.member))!);
    }
    for (const { member } of stand.plates) {
      const plate = plateRect(stand, member);
      for (const side of ['left', 'right', 'top', 'bottom'] as const) {
        const here = own.filter((spot) => spot.use !== 'wan' && spot.member === member && spot.side === side);
        if (here.length === 0) continue;
        const upright = isUpright(side);
        const across = (p: Point): number => (upright ? p.x : p.y);
        const range = stretch(kind, plate, side);
        const middle = (range[0] + range[1]) / 2;
        const edge = edgeOf(plate, side);
        const spotAt = (along: number): Point => (upright ? { x: along, y: edge } : { x: edge, y: along });

        const links = here.filter(
          (spot) => spot.use === 'member-link' || (spot.use === 'free' && isLink(design, spot)),
        );
        if (links.length > 0) {
          // Member links stand over each other where both members' edges face.
          const first = stand.plates[0]!.rect;
          const last = stand.plates.at(-1)!.rect;
          const shared = (last.x + right(first)) / 2;
          links.forEach((spot, i) => put(spot, spotAt(shared + (i - (links.length - 1) / 2) * 26), side));
        }
        const wished = (spot: PortSpot): number => {
          if (spot.partner === undefined) return middle;
          const pipThere = placed.get(spotKey(spot.partner.device, spot.partner.port, spot.partner.member));
          if (pipThere !== undefined && isUpright(pipThere.side) === upright) return across(pipThere.at);
          const there = stands.get(spot.partner.device);
          return there === undefined ? middle : across(centre(plateRect(there, spot.partner.member)));
        };
        const cables = here
          .filter((spot) => spot.use === 'cable')
          .map((spot) => ({ spot, at: wished(spot) }))
          .sort((a, b) => a.at - b.at || a.spot.number - b.spot.number || byText(a.spot.port, b.spot.port));
        const mean = cables.reduce((sum, { at }) => sum + at, 0) / Math.max(1, cables.length);
        const fast = firmness[kind] < 2 || cables.length === 0;
        const free = here.filter((spot) => spot.use === 'free' && !links.includes(spot));
        const blocked = taken.filter((t) => t.side === side && t.member === member).map((t) => across(t.at));
        const total = cables.length + free.length;
        const room = spread(total, middle, range);
        const centred = kind === 'host' ? (upright ? centre(plate).x : centre(plate).y) : middle;
        const positions = spread(cables.length, fast ? centred : mean, range);
        const beside = besideCabled(positions, free.length, range, upright ? freeStep : pip.spacing);
        const all = free.length === 0 ? positions : beside === undefined ? room : [...positions, ...beside];
        [...cables.map(({ spot }) => spot), ...free].forEach((spot, i) => {
          let along = all[i]!;
          while (blocked.some((b) => Math.abs(b - along) < pip.spacing) && along + pip.spacing <= range[1])
            along += pip.spacing;
          put(spot, spotAt(along), side);
        });
      }
    }
  }
  return placed;
};

const isLink = (design: Design, spot: PortSpot): boolean =>
  design.devices[spot.device]!.ports[spot.port]!.role === 'member-link';
