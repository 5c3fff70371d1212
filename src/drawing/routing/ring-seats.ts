import type { Design } from '../../engine/model/design.ts';
import type { Member } from '../../engine/model/devices.ts';
import type { Side } from '../../engine/model/layout.ts';
import type { EndName, Rect } from '../geometry.ts';
import { bracket, comb, ferrule, manifold, ring } from '../parts/sizes.ts';
import type { BandPlace } from './bands.ts';
import type { Bundle, BundleEnd } from './bundles.ts';
import { bottom, byText, centre, clamp, isUpright, right } from './rects.ts';
import type { Stand } from './stands.ts';
import { edgeOf } from './stands.ts';

export interface SeatGroup {
  readonly bundle: Bundle;
  readonly end: EndName;
}
/** Where an endpoint's ring docks, before its comb is sorted. */
export interface RingSeat {
  readonly endpoint: string;
  readonly device: string;
  readonly member?: Member;
  readonly side: Side;
  readonly transport?: string;
  readonly docksOn: 'plate' | 'bracket';
  readonly groups: readonly SeatGroup[];
  /** The ring's centre, and the middle of its comb along the same edge. */
  readonly x: number;
  readonly y: number;
  readonly combAt: number;
  readonly combLength: number;
}

export const laneCount = (bundle: Bundle): number => Math.max(1, bundle.tunnels.length);

/** From the first ferrule of a comb to the last, centre to centre. On top and bottom edges ferrules are flags and stand wider apart. */
const combLengthOf = (lanes: readonly number[], side: Side = 'right'): number => {
  const pitch = isUpright(side) ? ferrule.flagPitch : comb.ferrulePitch;
  const apart = isUpright(side) ? ferrule.flagPitch + 14 : comb.groupPitch;
  return lanes.reduce((sum, n) => sum + (n - 1) * pitch, 0) + Math.max(0, lanes.length - 1) * apart;
};

/** Whether so many groups at one ring are drawn as one bar; upright combs always show their ferrules. */
export const isManifold = (groups: number, side: Side): boolean =>
  groups > manifold.mostGroups && !isUpright(side);

/** How long a ring's comb is, or the bar that stands for it. */
export const combLengthFor = (lanes: readonly number[], side: Side = 'right'): number =>
  isManifold(lanes.length, side) ? manifold.height - ferrule.height : combLengthOf(lanes, side);

const distanceTo = (limb: Rect, x: number): number => Math.max(limb.x - x, x - right(limb), 0);

/** The limb of a band nearest to a place, by the distance across. */
export const nearestLimb = (band: BandPlace, x: number): Rect =>
  band.limbs.reduce((best, limb) => (distanceTo(limb, x) < distanceTo(best, x) ? limb : best));

const transportOf = (design: Design, device: string, bundles: readonly Bundle[]): string | undefined => {
  const counts = new Map<string, number>();
  for (const { transport } of bundles)
    if (transport !== undefined) counts.set(transport, (counts.get(transport) ?? 0) + 1);
  const most = [...counts.entries()].sort(([a, n], [b, m]) => m - n || byText(a, b))[0];
  if (most !== undefined) return most[0];
  return Object.values(design.links)
    .flatMap((link) => (link.kind === 'landing' && link.device === device ? [link.transport] : []))
    .sort(byText)[0];
};

/** Which side of a device looks at the nearest limb of a transport; right where there is nothing to look at. */
export const sideTowards = (
  rect: Rect,
  transport: string | undefined,
  bands: readonly BandPlace[],
): 'left' | 'right' => {
  const band = bands.find((b) => b.id === transport);
  if (band === undefined) return 'right';
  const { x } = centre(rect);
  return centre(nearestLimb(band, x)).x < x ? 'left' : 'right';
};

interface Unseated {
  readonly endpoint: string;
  readonly end: BundleEnd;
  readonly side: Side;
  readonly transport?: string;
  readonly groups: readonly SeatGroup[];
}

/** The outer edge of a pair's bracket on one side. */
export const bracketRect = (stand: Stand, side: Side): Rect => {
  const first = stand.plates[0]!.rect;
  const last = stand.plates.at(-1)!.rect;
  const { reach, inset } = bracket;
  if (isUpright(side)) {
    const x0 = stand.rect.x + inset;
    const y = side === 'top' ? stand.rect.y - reach : bottom(stand.rect);
    return { x: x0, y, width: stand.rect.width - 2 * inset, height: reach };
  }
  const y0 = first.y + inset;
  const height = bottom(last) - inset - y0;
  // Arms reach into both members' edges: the one that stands back has the longer arm.
  return side === 'right'
    ? { x: right(first), y: y0, width: right(stand.rect) + reach - right(first), height }
    : { x: stand.rect.x - reach, y: y0, width: last.x - stand.rect.x + reach, height };
};

const placeAlong = (seats: readonly Unseated[], stand: Stand, side: Side, onBracket: boolean): RingSeat[] => {
  const lengths = seats.map((seat) =>
    combLengthFor(
      seat.groups.map((group) => laneCount(group.bundle)),
      side,
    ),
  );
  const upright = isUpright(side);
  const edge = onBracket ? bracketRect(stand, side) : stand.rect;
  const start = upright ? edge.x : edge.y;
  const extent = upright ? edge.width : edge.height;
  const dock = upright || onBracket ? start + extent / 2 : start + Math.min(54, extent - 20);
  const apart = upright ? comb.apart + ferrule.width : comb.apart;
  const total = lengths.reduce((sum, length) => sum + length, 0) + apart * (seats.length - 1);
  let at = dock - total / 2;
  const combs = lengths.map((length) => {
    const middle = at + length / 2;
    at += length + apart;
    return middle;
  });
  const out = edgeOf(edge, side);
  const off = (side === 'left' || side === 'top' ? -1 : 1) * (onBracket ? ring.offBracket : ring.offPlate);
  const reach = Math.max(0, extent - 30);
  const step =
    seats.length < 2
      ? 0
      : clamp(
          (combs.at(-1)! - combs[0]!) / (seats.length - 1),
          ring.spacing,
          Math.max(ring.spacing, reach / (seats.length - 1)),
        );
  const first = seats.length < 2 ? dock : start + extent / 2 - (step * (seats.length - 1)) / 2;
  return seats.map((seat, i) => {
    const along = first + i * step;
    return {
      endpoint: seat.endpoint,
      device: seat.end.device,
      ...(seat.end.member === undefined ? {} : { member: seat.end.member }),
      side,
      ...(seat.transport === undefined ? {} : { transport: seat.transport }),
      docksOn: onBracket && seat.end.member === undefined ? 'bracket' : 'plate',
      groups: seat.groups,
      x: upright ? along : out + off,
      y: upright ? out + off : along,
      combAt: combs[i]!,
      combLength: lengths[i]!,
    };
  });
};

/**
 * Where every ring docks: on the side that looks at the nearest limb of its transport unless a person pinned it; all
 * rings of a pair on its bracket. Several on one edge are stacked with room for their combs.
 */
export const ringSeats = (
  design: Design,
  stands: ReadonlyMap<string, Stand>,
  bands: readonly BandPlace[],
  bundles: readonly Bundle[],
): readonly RingSeat[] => {
  const groupsOf = new Map<string, SeatGroup[]>();
  for (const bundle of bundles) {
    if (bundle.a.endpoint === bundle.b.endpoint) continue;
    for (const end of ['a', 'b'] as const) {
      const { endpoint } = bundle[end];
      groupsOf.set(endpoint, [...(groupsOf.get(endpoint) ?? []), { bundle, end }]);
    }
  }
  const byDevice = new Map<string, Unseated[]>();
  for (const [endpoint, entry] of Object.entries(design.endpoints).sort(([a], [b]) => byText(a, b))) {
    const stand = stands.get(entry.device);
    if (stand === undefined) continue;
    const groups = groupsOf.get(endpoint) ?? [];
    const transport = transportOf(
      design,
      entry.device,
      groups.map((group) => group.bundle),
    );
    const member = stand.device.kind === 'ha-pair' ? entry.member : undefined;
    const side = design.layout.endpoints?.[endpoint]?.side ?? sideTowards(stand.rect, transport, bands);
    const seat: Unseated = {
      endpoint,
      end: { endpoint, device: entry.device, ...(member === undefined ? {} : { member }) },
      side,
      ...(transport === undefined ? {} : { transport }),
      groups,
    };
    byDevice.set(entry.device, [...(byDevice.get(entry.device) ?? []), seat]);
  }
  const seats: RingSeat[] = [];
  for (const [device, unseated] of byDevice) {
    const stand = stands.get(device)!;
    const isPair = stand.device.kind === 'ha-pair';
    const bracketSide = isPair ? sideOfBracket(design, stand, unseated, bands) : undefined;
    const order = (seat: Unseated): number => seatOrder(seat, stand, bands);
    for (const side of ['left', 'right', 'top', 'bottom'] as const) {
      const here = unseated
        .filter((seat) => (bracketSide ?? seat.side) === side)
        .sort((a, b) => order(a) - order(b) || byText(a.endpoint, b.endpoint));
      if (here.length > 0) seats.push(...placeAlong(here, stand, side, isPair));
    }
  }
  return seats.sort((a, b) => byText(a.endpoint, b.endpoint));
};

/** A pair's own bracket: where a person pinned one of its rings, else towards the transport with most of its associations. */
const sideOfBracket = (
  design: Design,
  stand: Stand,
  seats: readonly Unseated[],
  bands: readonly BandPlace[],
): Side => {
  const pinned = seats.find((seat) => design.layout.endpoints?.[seat.endpoint]?.side !== undefined);
  if (pinned !== undefined) return pinned.side;
  const transport = transportOf(
    design,
    stand.id,
    seats.flatMap((seat) => seat.groups.map((group) => group.bundle)),
  );
  return sideTowards(stand.rect, transport, bands);
};

/** Rings whose way leads over a header stand on that header's side of the others; a member's own ring near that member. */
const seatOrder = (seat: Unseated, stand: Stand, bands: readonly BandPlace[]): number => {
  const band = bands.find((b) => b.id === seat.transport);
  const member = seat.end.member === undefined ? 0 : seat.end.member === 1 ? -0.5 : 0.5;
  if (band?.header === undefined) return member;
  const { x, y } = centre(stand.rect);
  const near = nearestLimb(band, x);
  const hidden = bands.some(
    (other) =>
      other.id !== band.id &&
      other.limbs.some((limb) => {
        const lx = centre(limb).x;
        return (lx - x) * (lx - centre(near).x) < 0;
      }),
  );
  return member + (hidden ? (centre(band.header).y > y ? 1 : -1) : 0);
};

/** Sides of each device that a ring or a bracket keeps to itself. */
export const ringedSides = (seats: readonly RingSeat[]): ReadonlyMap<string, ReadonlySet<Side>> => {
  const sides = new Map<string, Set<Side>>();
  for (const seat of seats) sides.set(seat.device, (sides.get(seat.device) ?? new Set()).add(seat.side));
  return sides;
};
