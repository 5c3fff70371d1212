import type { Blocked } from '../flood/forwarding.ts';
import { blockKey } from '../flood/forwarding.ts';
import type { Place } from '../flood/places.ts';
import { placesOf } from '../flood/places.ts';
import { blockedPorts } from '../flood/spanning-tree.ts';
import type { Id } from '../model/scalars.ts';
import { tunnelStates } from '../network/can-come-up.ts';
import { indexNetwork } from '../network/index-network.ts';
import type { Device, Network } from '../network/network.ts';
import { entryOf, forwardingMembers, otherEnd, perNetwork } from '../network/network.ts';
import type { Casualties } from './casualties.ts';
import { degrade, deviceAfter, partOfDevices, partOfTunnels } from './degrade.ts';
import type { PossibleFlood } from './possible-flood.ts';
import { memberTakingTunnels, outKey, possibleFlood } from './possible-flood.ts';
import { spanningTrees } from './spanning-trees.ts';

/** What of the possible flood is open: of the design as it is, or after casualties. */
export interface Standing {
  /** By element: 1 where frames can cross it. */
  readonly elements: Uint8Array;
  /** By place: 1 where it forwards, 2 added where it takes what comes by a tunnel to a shared endpoint. */
  readonly places: Uint8Array;
  /** By `blockKey` of the possible flood's places. */
  readonly blocked: Blocked;
  /** By `outKey`: ways of an aggregate that it doesn't use. */
  readonly unused: ReadonlySet<number>;
}
export interface Change {
  readonly standing: Standing;
  /** Elements that were open and are no longer. */
  readonly lost: readonly number[];
  /** False where something else than lost elements has changed, so that frames may take ways that they didn't. */
  readonly isLossOnly: boolean;
  /** Places in which something else has changed. */
  readonly changedPlaces: readonly number[];
  /** Elements that have come up. */
  readonly gained: readonly number[];
  /** What the tunnels run over now, where their ways have been asked for again. */
  readonly after?: Network;
  /** Tunnels that had to be asked again. */
  readonly touched: readonly Id[];
}

export const FORWARDS = 1;
export const TAKES_TUNNELS = 2;

const placeState = (device: Device, place: Place): number => {
  if (place.kind !== 'forwarder') return FORWARDS | TAKES_TUNNELS;
  if (!forwardingMembers(device).includes(place.member)) return 0;
  return FORWARDS | (memberTakingTunnels(device) === place.member ? TAKES_TUNNELS : 0);
};

const unusedOf = (
  flood: PossibleFlood,
  elements: Uint8Array,
  deviceNow: (id: Id) => Device,
): ReadonlySet<number> => {
  const unused = new Set<number>();
  for (const group of flood.choices) {
    const ways = group.bundles
      .map(({ bundle, end }) => ({ bundle: flood.network.bundles[bundle]!, end }))
      .filter(({ bundle }) => bundle.alive.length > 0);
    const alive = ways.filter(({ bundle }) => elements[bundle.index] === 1);
    const speaks = ({ bundle, end }: (typeof ways)[number]): boolean => {
      const far = bundle[otherEnd(end)];
      return forwardingMembers(deviceNow(far.device)).includes(far.member);
    };
    const used = alive.find(speaks) ?? alive[0];
    for (const way of ways) if (way !== used) unused.add(outKey(way.bundle.index, way.end === 'a' ? 0 : 1));
  }
  return unused;
};

/** A place by what it is, not by its number, which other networks give otherwise. */
const placeName = (place: Place): string =>
  place.kind === 'forwarder' ? `${place.forwarder}@${place.member}` : place.device;
const portName = (place: Place, ordinal: number): string | undefined =>
  place.kind === 'switch'
    ? place.ports[ordinal]?.group.port
    : place.kind === 'forwarder'
      ? place.circuits[ordinal]?.at.id
      : undefined;

const placeByName = perNetwork(
  (network) => new Map(possibleFlood(network).places.map((place) => [placeName(place), place])),
);

/** What another network's spanning trees block, by the numbers of the possible flood. */
const translated = (network: Network, other: Network): Blocked => {
  const blocked = new Set<number>();
  const byName = placeByName(network);
  const keys = blockedPorts(other);
  for (const place of keys.size === 0 ? [] : placesOf(other).all) {
    const mine = byName.get(placeName(place));
    const count =
      place.kind === 'switch' ? place.ports.length : place.kind === 'forwarder' ? place.circuits.length : 0;
    for (let ordinal = 0; ordinal < count && mine !== undefined; ordinal += 1) {
      if (!keys.has(blockKey(place, ordinal))) continue;
      const name = portName(place, ordinal);
      const total =
        mine.kind === 'switch' ? mine.ports.length : mine.kind === 'forwarder' ? mine.circuits.length : 0;
      for (let own = 0; own < total; own += 1)
        if (portName(mine, own) === name) blocked.add(blockKey(mine, own));
    }
  }
  return blocked;
};

/** How the design stands with nothing failed. */
export const undisturbed: (network: Network) => Standing = perNetwork((network): Standing => {
  const flood = possibleFlood(network);
  const { firstTunnelElement } = network;
  const elements = new Uint8Array(firstTunnelElement + network.tunnelIds.length);
  for (const bundle of network.bundles) elements[bundle.index] = bundle.alive.length > 0 ? 1 : 0;
  const states = tunnelStates(network);
  network.tunnelIds.forEach((id, i) => {
    elements[firstTunnelElement + i] = states.get(id)!.up ? 1 : 0;
  });
  const places = Uint8Array.from(flood.places, (place) =>
    placeState(entryOf(network.design.devices, place.device), place),
  );
  return {
    elements,
    places,
    blocked: translated(network, network),
    unused: unusedOf(flood, elements, (id) => entryOf(network.design.devices, id)),
  };
});

const tunnelIndices = perNetwork((network) => new Map(network.tunnelIds.map((id, i) => [id, i])));

/** Tunnels whose way may have changed: those of devices that have lost a landing or a member. */
const touchedTunnels = (network: Network, casualties: Casualties): readonly Id[] => {
  const { members, landings, landingMembers, tunnels } = casualties;
  const devices = new Set<Id>(members.keys());
  for (const id of [...landings, ...landingMembers.keys()]) {
    const link = entryOf(network.design.links, id);
    if (link.kind === 'landing' && !casualties.devices.has(link.device)) devices.add(link.device);
  }
  const touched = new Set<Id>();
  for (const device of devices)
    for (const { tunnel } of network.tunnelsByDevice.get(device) ?? [])
      if (!tunnels.has(tunnel)) touched.add(tunnel);
  // An association may end on a device that is none of its tunnels' ends; it then carries nothing before and after.
  return [...touched].sort();
};

const sameSet = (a: ReadonlySet<number>, b: ReadonlySet<number>): boolean =>
  a.size === b.size && [...a].every((item) => b.has(item));

/** How the design stands after casualties, and what that changes. */
export const standingAfter = (network: Network, casualties: Casualties): Change => {
  const before = undisturbed(network);
  const flood = possibleFlood(network);
  const { firstTunnelElement } = network;
  const elements = before.elements.slice();
  const lost: number[] = [];
  const gained: number[] = [];
  const set = (element: number, isUp: boolean): void => {
    if ((elements[element] === 1) === isUp) return;
    elements[element] = isUp ? 1 : 0;
    (isUp ? gained : lost).push(element);
  };
  for (const cable of casualties.cables) {
    const bundle = network.bundleByCable.get(cable);
    if (bundle !== undefined && bundle.alive.every((id) => casualties.cables.has(id)))
      set(bundle.index, false);
  }
  const indices = tunnelIndices(network);
  for (const tunnel of casualties.tunnels) set(firstTunnelElement + indices.get(tunnel)!, false);
  const touched = touchedTunnels(network, casualties);
  const after =
    touched.length === 0 ? undefined : indexNetwork(degrade(partOfTunnels(network, touched), casualties));
  if (after !== undefined)
    for (const [id, { up }] of tunnelStates(after)) set(firstTunnelElement + indices.get(id)!, up);

  const changed = new Set<number>();
  const { members } = casualties;
  const deviceNow = (id: Id): Device => deviceAfter(entryOf(network.design.devices, id), members.get(id));
  let places = before.places;
  for (const id of members.keys()) {
    const device = deviceNow(id);
    for (const place of flood.placesByDevice.get(id) ?? []) {
      const state = placeState(device, place);
      if (state === places[place.index]) continue;
      if (places === before.places) places = places.slice();
      places[place.index] = state;
      changed.add(place.index);
    }
  }
  const unused = flood.choices.length === 0 ? before.unused : unusedOf(flood, elements, deviceNow);
  const isSameUse = unused === before.unused || sameSet(unused, before.unused);
  if (!isSameUse)
    for (const group of flood.choices)
      for (const place of flood.placesByDevice.get(group.device) ?? []) changed.add(place.index);
  const blocked = blockedAfter(network, casualties, before.blocked, [...lost, ...gained]);
  if (blocked !== before.blocked && !sameSet(blocked, before.blocked))
    for (const key of [...blocked, ...before.blocked])
      if (blocked.has(key) !== before.blocked.has(key)) changed.add(Math.floor(key / 0x10_0000));
  return {
    standing: { elements, places, blocked, unused: isSameUse ? before.unused : unused },
    lost,
    gained,
    isLossOnly: changed.size === 0 && gained.length === 0,
    changedPlaces: [...changed],
    touched,
    ...(after === undefined ? {} : { after }),
  };
};

/** Elects again those spanning trees that the casualties touch. */
const blockedAfter = (
  network: Network,
  casualties: Casualties,
  before: Blocked,
  elements: readonly number[],
): Blocked => {
  const trees = spanningTrees(network);
  const touched = trees.filter(
    ({ devices, elements: own }) =>
      elements.some((element) => own.has(element)) ||
      [...casualties.members.keys()].some((id) => devices.has(id)),
  );
  if (touched.length === 0) return before;
  const whole = touched.some(({ crossesTunnels }) => crossesTunnels);
  const flood = possibleFlood(network);
  const concerned = new Set(touched.flatMap(({ devices }) => [...devices]));
  const blocked = new Set(
    [...before].filter((key) => !concerned.has(flood.places[Math.floor(key / 0x10_0000)]!.device)),
  );
  const parts = whole ? [network.design] : touched.map(({ devices }) => partOfDevices(network, devices));
  for (const part of parts)
    for (const key of translated(network, indexNetwork(degrade(part, casualties))))
      if (concerned.has(flood.places[Math.floor(key / 0x10_0000)]!.device)) blocked.add(key);
  return blocked;
};
