import type { Member } from '../model/devices.ts';
import type { Id } from '../model/scalars.ts';
import type { Tags } from '../network/frame-tags.ts';
import { isTrunk, untagged } from '../network/frame-tags.ts';
import type { Answer, CircuitAt, Network, Port, PortCircuit, PortGroup } from '../network/network.ts';
import { deviceOfTunnelEnd, entryOf, forwardingMembers, otherEnd, perNetwork } from '../network/network.ts';
import { portGroupAt } from '../network/port-groups.ts';
import type { ClassSet } from './frame-classes.ts';
import { classesPassed } from './frame-classes.ts';
import { rebuiltDevices } from './rebuilt-devices.ts';

/** 0 runs from end a to end b, 1 back. */
export type Direction = 0 | 1;
/** A way out: an element (a bundle of cables, or a tunnel from `firstTunnelElement` on) and the direction along it. */
export interface Out {
  readonly element: number;
  readonly direction: Direction;
}
export interface SwitchPort {
  readonly group: PortGroup;
  readonly port: Port;
  readonly outs: readonly Out[];
  /** Ways that would lead out were no port shut. */
  readonly shutOuts: readonly Out[];
}
export interface SwitchPlace {
  readonly kind: 'switch';
  readonly index: number;
  readonly device: Id;
  readonly ports: readonly SwitchPort[];
  readonly ordinalByGroup: ReadonlyMap<number, number>;
}
interface CircuitCommon {
  readonly at: CircuitAt;
  /** Circuits of one place with the same number never exchange frames; -1 exchanges with all. */
  readonly isolation: number;
  readonly outs: readonly Out[];
  readonly shutOuts: readonly Out[];
}
export type PlaceCircuit =
  | (CircuitCommon & {
      readonly kind: 'port';
      readonly circuit: PortCircuit;
      readonly group: PortGroup;
      readonly port: Port;
    })
  | (CircuitCommon & {
      readonly kind: 'tunnel';
      readonly tunnel: Id;
      readonly keepsTags: boolean;
      /** Tunnels with one VNI at a multipoint endpoint are one circuit: never from one to the other. -1: not so. */
      readonly horizon: number;
    });
export interface ForwarderPlace {
  readonly kind: 'forwarder';
  readonly index: number;
  readonly device: Id;
  readonly forwarder: Id;
  readonly member: Member;
  readonly circuits: readonly PlaceCircuit[];
  readonly classesToTunnel: ClassSet;
  readonly classesFromTunnel: ClassSet;
}
export interface HostPlace {
  readonly kind: 'host';
  readonly index: number;
  readonly device: Id;
  readonly ports: readonly {
    readonly group: PortGroup;
    readonly tags: Tags;
    readonly outs: readonly Out[];
    readonly shutOuts: readonly Out[];
  }[];
}
/** Where a frame is between two crossings: inside a switch, a forwarder (of one member) or a host. */
export type Place = SwitchPlace | ForwarderPlace | HostPlace;

export interface Places {
  readonly all: readonly Place[];
  readonly byDevice: ReadonlyMap<Id, readonly Place[]>;
  /** By forwarder and member: `forwarder@member`. */
  readonly byForwarder: ReadonlyMap<string, ForwarderPlace>;
  readonly tunnelIndex: ReadonlyMap<Id, number>;
}

/** The VLAN with which a host on a trunk tags its frames: its segment's at its site; untagged where that isn't known or the port is no trunk. */
export const hostTags = (network: Network, host: Id, port: Port): Tags => {
  const device = entryOf(network.design.devices, host);
  if (device.kind !== 'host' || !isTrunk(port) || device.segment === undefined) return untagged;
  return entryOf(network.design.segments, device.segment).sites[device.site]?.vlan ?? untagged;
};

const speaks = (network: Network, group: PortGroup): boolean =>
  forwardingMembers(entryOf(network.design.devices, group.device)).includes(group.member);

/** The ways out of a port group. Of an aggregate that leads to several groups a frame takes one: the first that isn't silent. */
const outsOf = (
  network: Network,
  group: PortGroup,
): { readonly outs: readonly Out[]; readonly shutOuts: readonly Out[] } => {
  const outs: Out[] = [];
  const shutOuts: Out[] = [];
  let isSpeaking = false;
  for (const { bundle, end } of group.bundles) {
    const out: Out = { element: bundle, direction: end === 'a' ? 0 : 1 };
    const crossed = network.bundles[bundle]!;
    if (crossed.alive.length === 0) shutOuts.push(out);
    else if (group.aggregation === undefined) outs.push(out);
    else if (!isSpeaking) {
      isSpeaking = speaks(network, crossed[otherEnd(end)]);
      if (isSpeaking || outs.length === 0) outs[0] = out;
    }
  }
  return { outs, shutOuts };
};

/** Numbers by key in the order in which keys are met; -1 where there is none. */
const numberFor = (numbers: Map<string, number>, key: string | undefined): number => {
  if (key === undefined) return -1;
  const known = numbers.get(key);
  if (known !== undefined) return known;
  numbers.set(key, numbers.size);
  return numbers.size - 1;
};

const buildCircuits = (
  network: Network,
  forwarder: Id,
  member: Member,
  tunnelIndex: ReadonlyMap<Id, number>,
): readonly PlaceCircuit[] => {
  const { design } = network;
  const device = entryOf(design.devices, entryOf(design.forwarders, forwarder).device);
  const isMultipoint =
    device.profile !== undefined && entryOf(design.profiles, device.profile).vniScope === 'multipoint';
  const isolations = new Map<string, number>();
  const horizons = new Map<string, number>();
  const circuits: PlaceCircuit[] = [];
  for (const at of network.circuitsByForwarder.get(forwarder) ?? []) {
    const { circuit } = at;
    const isolation = numberFor(isolations, circuit.isolation);
    if (circuit.kind === 'port') {
      const group = portGroupAt(network, at.device, circuit.port, member);
      // A member link carries no segment frames, whatever claims it.
      if (group === undefined) continue;
      const port = device.ports[group.port]!;
      const { outs, shutOuts } = outsOf(network, group);
      circuits.push({ kind: 'port', at, isolation, circuit, group, port, outs, shutOuts });
      continue;
    }
    const tunnel = entryOf(design.tunnels, circuit.tunnel);
    const end =
      deviceOfTunnelEnd(network, tunnel, 'a') === at.device
        ? 'a'
        : deviceOfTunnelEnd(network, tunnel, 'b') === at.device
          ? 'b'
          : undefined;
    if (end === undefined) continue;
    const { endpoint, vni, innerTags } = tunnel[end];
    const owner = entryOf(design.endpoints, endpoint).member;
    if (owner !== undefined && device.kind === 'ha-pair' && owner !== member) continue;
    const keepsTags = (innerTags ?? (device.settings?.keepInnerTags === true ? 'keep' : 'strip')) === 'keep';
    const horizon = numberFor(horizons, isMultipoint && vni !== undefined ? `${endpoint}/${vni}` : undefined);
    const out: Out = {
      element: network.firstTunnelElement + tunnelIndex.get(circuit.tunnel)!,
      direction: end === 'a' ? 0 : 1,
    };
    circuits.push({
      kind: 'tunnel',
      at,
      isolation,
      tunnel: circuit.tunnel,
      keepsTags,
      horizon,
      outs: [out],
      shutOuts: [],
    });
  }
  return circuits;
};

/** The places of one device, the first of which has the index given. */
const placesIn = (
  network: Network,
  id: Id,
  firstIndex: number,
  tunnelIndex: ReadonlyMap<Id, number>,
): readonly Place[] => {
  const { design } = network;
  const device = entryOf(design.devices, id);
  const groups = network.portGroupsByDevice.get(id) ?? [];
  if (device.kind === 'switch') {
    const ports = groups.map((group): SwitchPort => {
      const { outs, shutOuts } = outsOf(network, group);
      return { group, port: device.ports[group.port]!, outs, shutOuts };
    });
    const ordinalByGroup = new Map<number, number>();
    for (let ordinal = 0; ordinal < groups.length; ordinal += 1)
      ordinalByGroup.set(groups[ordinal]!.index, ordinal);
    return [{ kind: 'switch', index: firstIndex, device: id, ports, ordinalByGroup }];
  }
  if (device.kind === 'host') {
    const ports = groups.map((group) => {
      const { outs, shutOuts } = outsOf(network, group);
      return { group, tags: hostTags(network, id, device.ports[group.port]!), outs, shutOuts };
    });
    return [{ kind: 'host', index: firstIndex, device: id, ports }];
  }
  const places: ForwarderPlace[] = [];
  for (const forwarder of network.forwardersByDevice.get(id) ?? []) {
    const entry = entryOf(design.forwarders, forwarder);
    for (const member of forwardingMembers(device))
      places.push({
        kind: 'forwarder',
        index: firstIndex + places.length,
        device: id,
        forwarder,
        member,
        circuits: buildCircuits(network, forwarder, member, tunnelIndex),
        classesToTunnel: classesPassed(entry, 'to-tunnel'),
        classesFromTunnel: classesPassed(entry, 'from-tunnel'),
      });
  }
  return places;
};

/** Whether tunnels have the numbers that they had. */
const areTunnelsKept = (before: Network, now: Network): boolean =>
  before.firstTunnelElement === now.firstTunnelElement && before.tunnelIds === now.tunnelIds;

/** Every place in which frames of the design can be, with the ways in and out of it. */
export const placesOf = perNetwork((network, earlier?: Answer<Places>): Places => {
  const areDevicesSame = earlier?.network.design.devices === network.design.devices;
  if (
    areDevicesSame &&
    areTunnelsKept(earlier!.network, network) &&
    earlier!.network.portGroupsByDevice === network.portGroupsByDevice &&
    rebuiltDevices(earlier!.network, network).size === 0
  )
    return earlier!.value;
  const all: Place[] = [];
  const byDevice = new Map<Id, readonly Place[]>();
  const byForwarder = new Map<string, ForwarderPlace>();
  const areTunnelsSame = earlier !== undefined && areTunnelsKept(earlier.network, network);
  const tunnelIndex = areTunnelsSame
    ? earlier.value.tunnelIndex
    : new Map(network.tunnelIds.map((id, index) => [id, index]));
  const rebuilt = areTunnelsSame ? rebuiltDevices(earlier.network, network) : undefined;
  const kept = (id: Id): readonly Place[] | undefined => {
    if (rebuilt?.has(id) !== false) return undefined;
    if (earlier!.network.design.devices[id] !== network.design.devices[id]) return undefined;
    if (earlier!.network.portGroupsByDevice.get(id) !== network.portGroupsByDevice.get(id)) return undefined;
    const places = earlier!.value.byDevice.get(id);
    return places?.[0] === undefined || places[0].index === all.length
      ? places
      : places.map((place, i) => ({ ...place, index: all.length + i }));
  };
  for (const id of network.deviceIds) {
    const here = kept(id) ?? placesIn(network, id, all.length, tunnelIndex);
    byDevice.set(id, here);
    for (const place of here) {
      all.push(place);
      if (place.kind === 'forwarder') byForwarder.set(`${place.forwarder}@${place.member}`, place);
    }
  }
  return { all, byDevice, byForwarder, tunnelIndex };
});

/** By element and direction (2n along it, 2n + 1 back): the device that a frame crossing it comes to. */
export const devicesArrivedAt = perNetwork((network): readonly Id[] => {
  const devices: Id[] = [];
  for (const { a, b } of network.bundles) devices.push(b.device, a.device);
  // Nothing crosses the numbers between bundles and tunnels.
  while (devices.length < 2 * network.firstTunnelElement) devices.push('');
  for (const id of network.tunnelIds) {
    const tunnel = entryOf(network.design.tunnels, id);
    devices.push(deviceOfTunnelEnd(network, tunnel, 'b'), deviceOfTunnelEnd(network, tunnel, 'a'));
  }
  return devices;
});
