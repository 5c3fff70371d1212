import type { Design } from '../../engine/model/design.ts';
import type { Member } from '../../engine/model/devices.ts';
import type { Plug } from '../../engine/model/underlay.ts';
import type { Side } from '../../engine/model/layout.ts';
import type { Rect } from '../geometry.ts';
import { bottom, byText, centre, right } from './rects.ts';
import type { PortLoad, Stand } from './stands.ts';

/** One pip to be placed: a port on one plate. */
export interface PortSpot {
  readonly device: string;
  readonly member?: Member;
  readonly port: string;
  readonly number: number;
  readonly use: 'cable' | 'wan' | 'member-link' | 'free';
  readonly side: Side;
  /** The plate at the cable's other end, where there is one. */
  readonly partner?: { readonly device: string; readonly member?: Member; readonly port: string };
}

type Spot = Pick<Plug, 'device' | 'port' | 'member'>;

export const spotKey = (device: string, port: string, member?: Member): string =>
  `${device} ${port}${member === undefined ? '' : ` ${member}`}`;

const memberOf = (design: Design, plug: Spot): Member | undefined =>
  design.devices[plug.device]?.kind === 'ha-pair' ? (plug.member ?? 1) : undefined;

export const plateRect = (stand: Stand, member?: Member): Rect =>
  stand.plates.find((plate) => plate.member === member)?.rect ?? stand.plates[0]!.rect;

/** On which side of its plate a cable leaves for another plate. */
const facing = (from: Rect, to: Rect, preferLevel: boolean, closed: ReadonlySet<Side>): Side => {
  const level = Math.max(to.x - right(from), from.x - right(to));
  const upright = Math.max(to.y - bottom(from), from.y - bottom(to));
  const a = centre(from);
  const b = centre(to);
  const levelSide: Side = b.x < a.x ? 'left' : 'right';
  const uprightSide: Side = b.y < a.y ? 'top' : 'bottom';
  const isLevel = level >= 8 && (preferLevel || level >= upright);
  const wishes: Side[] =
    isLevel || (level >= 8 && upright < 8) || (level < 8 && upright < 0)
      ? [
          levelSide,
          uprightSide,
          uprightSide === 'top' ? 'bottom' : 'top',
          levelSide === 'left' ? 'right' : 'left',
        ]
      : [
          uprightSide,
          levelSide,
          levelSide === 'left' ? 'right' : 'left',
          uprightSide === 'top' ? 'bottom' : 'top',
        ];
  return wishes.find((side) => !closed.has(side)) ?? wishes[0]!;
};

const none: ReadonlySet<Side> = new Set();

/**
 * Which side of which plate every port sits on: cables face what they lead to and keep off sides that carry a ring,
 * member links face the other member, WAN ports look at their band, and free ports follow.
 */
export const portSpots = (
  design: Design,
  stands: ReadonlyMap<string, Stand>,
  ringed: ReadonlyMap<string, ReadonlySet<Side>>,
  wanSides: ReadonlyMap<string, Side>,
): readonly PortSpot[] => {
  const spots = new Map<string, PortSpot>();
  const put = (spot: PortSpot): void => {
    spots.set(spotKey(spot.device, spot.port, spot.member), spot);
  };
  const numberOf = (plug: Spot): number => design.devices[plug.device]?.ports[plug.port]?.number ?? 0;
  const has = (plug: Spot): boolean =>
    stands.has(plug.device) && design.devices[plug.device]?.ports[plug.port] !== undefined;

  for (const [, link] of Object.entries(design.links).sort(([a], [b]) => byText(a, b))) {
    if (link.kind === 'landing') {
      if (!has(link)) continue;
      const isPair = design.devices[link.device]!.kind === 'ha-pair';
      const members: readonly (Member | undefined)[] = !isPair
        ? [undefined]
        : link.members === '1'
          ? [1]
          : link.members === '2'
            ? [2]
            : [1, 2];
      for (const member of members)
        put({
          device: link.device,
          ...(member === undefined ? {} : { member }),
          port: link.port,
          number: numberOf(link),
          use: 'wan',
          side: isPair
            ? member === 1
              ? 'top'
              : 'bottom'
            : (wanSides.get(link.device + ' ' + link.port) ?? 'right'),
        });
      continue;
    }
    for (const [plug, other] of [
      [link.a, link.b],
      [link.b, link.a],
    ] as const) {
      if (!has(plug)) continue;
      const member = memberOf(design, plug);
      const otherMember = memberOf(design, other);
      const shared = {
        device: plug.device,
        ...(member === undefined ? {} : { member }),
        port: plug.port,
        number: numberOf(plug),
        partner: {
          device: other.device,
          port: other.port,
          ...(otherMember === undefined ? {} : { member: otherMember }),
        },
      };
      if (plug.device === other.device) {
        put({ ...shared, use: 'member-link', side: member === 1 ? 'bottom' : 'top' });
        continue;
      }
      const partner = stands.get(other.device);
      if (partner === undefined) {
        const { role } = design.devices[plug.device]!.ports[plug.port]!;
        put({ ...shared, use: 'cable', side: freeSide(role, member, ringed.get(plug.device) ?? none) });
        continue;
      }
      const kinds = [design.devices[plug.device]!.kind, partner.device.kind];
      const closed = ringed.get(plug.device) ?? none;
      // The gap between a pair's members belongs to their own links.
      const between: Side | undefined = member === undefined ? undefined : member === 1 ? 'bottom' : 'top';
      const side = facing(
        plateRect(stands.get(plug.device)!, member),
        plateRect(partner, otherMember),
        kinds.includes('host'),
        between === undefined ? closed : new Set([...closed, between]),
      );
      put({ ...shared, use: 'cable', side });
    }
  }
  for (const stand of stands.values()) {
    const closed = ringed.get(stand.id) ?? none;
    for (const [port, { number, role }] of Object.entries(stand.device.ports)) {
      for (const { member } of stand.plates) {
        if (spots.has(spotKey(stand.id, port, member))) continue;
        put({
          device: stand.id,
          ...(member === undefined ? {} : { member }),
          port,
          number,
          use: 'free',
          side: freeSide(role, member, closed),
        });
      }
    }
  }
  return [...spots.values()].sort(
    (a, b) =>
      byText(a.device, b.device) ||
      (a.member ?? 0) - (b.member ?? 0) ||
      a.number - b.number ||
      byText(a.port, b.port),
  );
};

const freeSide = (
  role: 'wan' | 'lan' | 'member-link',
  member: Member | undefined,
  closed: ReadonlySet<Side>,
): Side => {
  const wishes: readonly Side[] =
    member === undefined
      ? ['bottom', 'top', 'left', 'right']
      : role === 'member-link'
        ? [member === 1 ? 'bottom' : 'top']
        : role === 'wan'
          ? [member === 1 ? 'top' : 'bottom']
          : ['left', 'right'];
  return wishes.find((side) => !closed.has(side)) ?? wishes[0]!;
};

/** How full the sides of each device are, so that its plates can grow. */
export const portLoads = (
  spots: readonly PortSpot[],
  ringsOf: ReadonlyMap<string, number>,
): ReadonlyMap<string, PortLoad> => {
  const counts = new Map<string, Map<string, number>>();
  for (const spot of spots) {
    const sides = counts.get(spot.device) ?? new Map<string, number>();
    const key = `${spot.side} ${spot.member ?? ''}`;
    sides.set(key, (sides.get(key) ?? 0) + 1);
    counts.set(spot.device, sides);
  }
  const loads = new Map<string, PortLoad>();
  for (const [device, sides] of counts) {
    const most = (...names: string[]): number =>
      Math.max(0, ...[...sides].filter(([key]) => names.includes(key.split(' ')[0]!)).map(([, n]) => n));
    loads.set(device, {
      upright: most('left', 'right'),
      level: most('top', 'bottom'),
      rings: Math.max(1, ringsOf.get(device) ?? 0),
    });
  }
  return loads;
};
