import type { Id } from '../model/scalars.ts';
import { tunnelStates } from '../network/can-come-up.ts';
import type { Tags } from '../network/frame-tags.ts';
import {
  accessVlan,
  circuitIn,
  circuitOut,
  gatewayPortCarries,
  isTrunk,
  outerVlan,
  popTag,
  switchIn,
  switchOut,
  untagged,
  withOuterVlan,
} from '../network/frame-tags.ts';
import type { CircuitAt, Network, PortGroup } from '../network/network.ts';
import { deviceOfTunnelEnd, entryOf, forwardingMembers, portVlanKey } from '../network/network.ts';
import type { Barrier } from './barrier.ts';
import type { ClassSet } from './frame-classes.ts';
import { allClasses } from './frame-classes.ts';
import type { Direction, ForwarderPlace, Out, Place, PlaceCircuit, Places, SwitchPlace } from './places.ts';
import { placesOf } from './places.ts';

/** Ports and circuits that a spanning tree blocks, by `blockKey`. */
export type Blocked = ReadonlySet<number>;
/** `ordinal`: of the port in a switch, of the circuit in a forwarder. */
export const blockKey = (place: Place, ordinal: number): number => place.index * 0x10_0000 + ordinal;
export const blockedIn = (
  places: Places,
  key: number,
): { readonly place: Place; readonly ordinal: number } => ({
  place: places.all[Math.floor(key / 0x10_0000)]!,
  ordinal: key % 0x10_0000,
});

/** Takes a frame that has come into a place by its port or circuit `ordinal`; -1: by none that may be named. */
export type Visit = (place: Place, ordinal: number, inside: Tags, barrier?: Barrier) => void;
export type Emit = (
  element: number,
  direction: Direction,
  tags: Tags,
  classes: ClassSet,
  barrier?: Barrier,
) => void;

export interface Forwarding {
  readonly places: Places;
  /** Where a frame gets that crosses an element this way. */
  readonly arrive: (element: number, direction: Direction, tags: Tags, visit: Visit) => void;
  /** Where a frame gets that comes from outside into a port. */
  readonly enter: (group: PortGroup, tags: Tags, visit: Visit) => void;
  /** Out on what it is flooded. */
  readonly leave: (place: Place, ordinal: number, inside: Tags, emit: Emit) => void;
  /** Whether it would be flooded to the port or circuit `target`, were a cable there. */
  readonly wouldLeave: (place: Place, ordinal: number, inside: Tags, target: number) => boolean;
}

export interface ForwardingOptions {
  readonly blocked?: Blocked;
  /** Frames cross every tunnel, whatever stands against it: for who decides about tunnels apart. */
  readonly everyTunnelUp?: true;
  /** Goes on past what stops a frame and names it, as somebody looking for the cause would; gives the VLAN that a site means. */
  readonly pastBarriers?: {
    readonly vlanAt: (site: Id) => number | undefined;
    /** The classes of frames that are followed. */
    readonly classes: ClassSet;
  };
}

/** How a device floods: the one place where VLANs, circuits, isolation, filters and standby members decide on a frame. */
export const forwardingOf = (network: Network, options: ForwardingOptions = {}): Forwarding => {
  const { design } = network;
  const places = placesOf(network);
  const states = tunnelStates(network);
  const blocked = options.blocked ?? new Set<number>();
  const past = options.pastBarriers;
  const { firstTunnelElement } = network;
  const meantVlan = (device: Id): number | undefined => past?.vlanAt(entryOf(design.devices, device).site);

  const arriveInSwitch = (place: SwitchPlace, group: PortGroup, tags: Tags, visit: Visit): void => {
    const ordinal = place.ordinalByGroup.get(group.index)!;
    const { port } = place.ports[ordinal]!;
    const isBlocked = blocked.has(blockKey(place, ordinal));
    const inside = switchIn(port, tags);
    if (inside !== undefined && !isBlocked) visit(place, ordinal, inside);
    if (past === undefined) return;
    const at = { device: place.device, port: group.port };
    const meant = meantVlan(place.device) ?? outerVlan(tags);
    if (inside === undefined) {
      const vlan = outerVlan(tags);
      const barrier: Barrier = !isTrunk(port)
        ? { code: 'tag-at-access-port', ...at, vlan }
        : vlan === 0
          ? { code: 'no-native-vlan', ...at }
          : { code: 'vlan-not-allowed', ...at, vlan, direction: 'in' };
      if (meant !== 0) visit(place, ordinal, withOuterVlan(tags, meant), barrier);
    } else if (isBlocked) {
      visit(place, ordinal, inside, { code: 'spanning-tree', ...at });
    } else if (!isTrunk(port) && outerVlan(inside) !== meant && meant !== 0) {
      const barrier: Barrier = { code: 'other-access-vlan', ...at, vlan: meant, has: accessVlan(port) };
      visit(place, ordinal, withOuterVlan(inside, meant), barrier);
    }
  };

  const claimsOf = (device: Id, group: PortGroup, tags: Tags): readonly CircuitAt[] => {
    const vlan = outerVlan(tags);
    const claims: CircuitAt[] = [];
    for (const port of group.ports) {
      const own = network.circuitsByPortVlan.get(portVlanKey(device, port, vlan === 0 ? 'untagged' : vlan));
      const whole = network.circuitsByPortVlan.get(portVlanKey(device, port, 'all'));
      if (own !== undefined) claims.push(...own);
      if (whole !== undefined) claims.push(...whole);
    }
    return claims;
  };
  const ordinalOf = (place: ForwarderPlace, at: CircuitAt): number =>
    place.circuits.findIndex((circuit) => circuit.at.id === at.id);

  const arriveInGateway = (group: PortGroup, tags: Tags, visit: Visit): void => {
    const device = entryOf(design.devices, group.device);
    const members = forwardingMembers(device);
    const isStandby = !members.includes(group.member);
    if (isStandby && past === undefined) return;
    const member = isStandby ? members[0]! : group.member;
    const at = { device: group.device, port: group.port };
    const vlan = outerVlan(tags);
    const isCarried = gatewayPortCarries(device.ports[group.port]!, tags);
    if (!isCarried && past === undefined) return;
    const standby: Barrier | undefined = isStandby
      ? { code: 'standby', device: group.device, member: group.member, port: group.port }
      : undefined;
    const barrier: Barrier | undefined = isCarried
      ? standby
      : { code: 'vlan-not-allowed', ...at, vlan, direction: 'in' };
    let isClaimed = false;
    for (const claim of claimsOf(group.device, group, tags)) {
      const place = places.byForwarder.get(`${claim.forwarder}@${member}`)!;
      const ordinal = ordinalOf(place, claim);
      const inside = circuitIn(claim.circuit as Extract<CircuitAt['circuit'], { kind: 'port' }>, tags);
      if (inside === undefined || ordinal < 0) continue;
      isClaimed = true;
      if (blocked.has(blockKey(place, ordinal))) {
        if (past !== undefined) visit(place, ordinal, inside, { code: 'spanning-tree', ...at });
      } else visit(place, ordinal, inside, barrier);
    }
    if (isClaimed || past === undefined) return;
    for (const place of places.byDevice.get(group.device) ?? [])
      if (place.kind === 'forwarder' && place.member === member)
        visit(place, -1, untagged, barrier ?? { code: 'no-circuit', ...at, vlan });
  };

  const enter = (group: PortGroup, tags: Tags, visit: Visit): void => {
    const [first] = places.byDevice.get(group.device) ?? [];
    if (first?.kind === 'switch') arriveInSwitch(first, group, tags, visit);
    else if (first?.kind === 'host') {
      const ordinal = first.ports.findIndex((port) => port.group === group);
      if (tags === first.ports[ordinal]!.tags) visit(first, ordinal, tags);
      else if (past !== undefined)
        visit(first, ordinal, tags, {
          code: 'host-tag',
          device: group.device,
          port: group.port,
          vlan: outerVlan(tags),
        });
    } else arriveInGateway(group, tags, visit);
  };

  const arriveByTunnel = (element: number, direction: Direction, tags: Tags, visit: Visit): void => {
    const id = network.tunnelIds[element - firstTunnelElement]!;
    const tunnel = entryOf(design.tunnels, id);
    const state = states.get(id)!;
    if (!state.up && past === undefined && options.everyTunnelUp !== true) return;
    const down: Barrier | undefined = state.up
      ? undefined
      : { code: 'tunnel-down', tunnel: id, reasons: state.reasons };
    const end = direction === 0 ? 'b' : 'a';
    const device = deviceOfTunnelEnd(network, tunnel, end);
    const owner = entryOf(design.endpoints, tunnel[end].endpoint).member;
    const entry = entryOf(design.devices, device);
    const members = forwardingMembers(entry);
    // A packet to an endpoint that both members share reaches one of them; which one is taken to be the one named active.
    const member =
      owner !== undefined && members.includes(owner)
        ? owner
        : entry.kind === 'ha-pair' && entry.active !== undefined
          ? entry.active
          : members[0]!;
    let isClaimed = false;
    for (const claim of network.circuitsByTunnel.get(id) ?? []) {
      const place = places.byForwarder.get(`${claim.forwarder}@${member}`);
      if (claim.device !== device || place === undefined) continue;
      const ordinal = ordinalOf(place, claim);
      const circuit = place.circuits[ordinal];
      if (circuit?.kind !== 'tunnel') continue;
      isClaimed = true;
      const discarded: Barrier | undefined =
        !circuit.keepsTags && tags !== untagged
          ? { code: 'tag-discarded', tunnel: id, device, vlan: outerVlan(tags) }
          : undefined;
      if (blocked.has(blockKey(place, ordinal))) {
        if (past !== undefined) visit(place, ordinal, tags, { code: 'spanning-tree', device, tunnel: id });
      } else if (discarded === undefined) visit(place, ordinal, tags, down);
      else if (past !== undefined) visit(place, ordinal, untagged, down ?? discarded);
    }
    if (isClaimed || past === undefined) return;
    for (const place of places.byDevice.get(device) ?? [])
      if (place.kind === 'forwarder' && place.member === member)
        visit(place, -1, untagged, down ?? { code: 'tunnel-unclaimed', tunnel: id, device });
  };

  const leaveSwitch = (place: SwitchPlace, ordinal: number, inside: Tags, emit: Emit): void => {
    for (let i = 0; i < place.ports.length; i += 1) {
      if (i === ordinal) continue;
      const { port, outs, shutOuts, group } = place.ports[i]!;
      if (outs.length === 0 && past === undefined) continue;
      const isBlocked = blocked.has(blockKey(place, i));
      if (isBlocked && past === undefined) continue;
      const tags = switchOut(port, inside);
      if (tags === undefined && past === undefined) continue;
      const at = { device: place.device, port: group.port };
      const vlan = outerVlan(inside);
      const barrier: Barrier | undefined =
        tags === undefined
          ? isTrunk(port)
            ? { code: 'vlan-not-allowed', ...at, vlan, direction: 'out' }
            : { code: 'other-access-vlan', ...at, vlan, has: accessVlan(port) }
          : isBlocked
            ? { code: 'spanning-tree', ...at }
            : undefined;
      const wire = tags ?? (isTrunk(port) ? inside : popTag(inside));
      for (const out of outs) emit(out.element, out.direction, wire, allClasses, barrier);
      if (past !== undefined) leaveShut(group, shutOuts, wire, emit);
    }
  };

  const leaveShut = (group: PortGroup, shutOuts: readonly Out[], tags: Tags, emit: Emit): void => {
    for (const { element, direction } of shutOuts) {
      const cable = network.bundles[element]!.cables[0]!;
      const barrier: Barrier = { code: 'port-shut', device: group.device, port: group.port, cable };
      emit(element, direction, tags, allClasses, barrier);
    }
  };

  const barrierBetween = (
    place: ForwarderPlace,
    from: PlaceCircuit | undefined,
    to: PlaceCircuit,
    classes: ClassSet,
  ): Barrier | undefined => {
    const at = { device: place.device, forwarder: place.forwarder };
    if (from !== undefined && to.isolation >= 0 && from.isolation === to.isolation)
      return { code: 'isolation', ...at, group: to.at.circuit.isolation! };
    if (from?.kind === 'tunnel' && to.kind === 'tunnel' && to.horizon >= 0 && from.horizon === to.horizon)
      return { code: 'split-horizon', ...at };
    return classes === 0 ? { code: 'filter', ...at } : undefined;
  };

  const isApart = (from: PlaceCircuit | undefined, to: PlaceCircuit): boolean =>
    from !== undefined &&
    ((to.isolation >= 0 && from.isolation === to.isolation) ||
      (from.kind === 'tunnel' && to.kind === 'tunnel' && to.horizon >= 0 && from.horizon === to.horizon));

  const leaveForwarder = (place: ForwarderPlace, ordinal: number, inside: Tags, emit: Emit): void => {
    const from = place.circuits[ordinal];
    for (let i = 0; i < place.circuits.length; i += 1) {
      if (i === ordinal) continue;
      const to = place.circuits[i]!;
      const isBlocked = blocked.has(blockKey(place, i));
      const classes =
        to.kind === 'tunnel' || from?.kind === 'port' ? place.classesToTunnel : place.classesFromTunnel;
      // What a filter drops whole stays in the graph, open to no class: the circuits still say what is carried.
      if (past === undefined && (isBlocked || isApart(from, to))) continue;
      let barrier = past === undefined ? undefined : barrierBetween(place, from, to, classes & past.classes);
      if (isBlocked)
        barrier ??= {
          code: 'spanning-tree',
          device: place.device,
          ...(to.kind === 'port' ? { port: to.group.port } : { tunnel: to.tunnel }),
        };
      if (to.kind === 'tunnel') {
        const wire = to.keepsTags ? inside : popTag(inside);
        for (const out of to.outs) emit(out.element, out.direction, wire, classes, barrier);
        continue;
      }
      const wires = circuitOut(to.circuit, inside);
      for (const tags of wires) {
        const isCarried = gatewayPortCarries(to.port, tags);
        if (!isCarried && past === undefined) continue;
        const uncarried: Barrier | undefined = isCarried
          ? undefined
          : {
              code: 'vlan-not-allowed',
              device: place.device,
              port: to.group.port,
              vlan: outerVlan(tags),
              direction: 'out',
            };
        for (const out of to.outs) emit(out.element, out.direction, tags, classes, barrier ?? uncarried);
        if (past !== undefined) leaveShut(to.group, to.shutOuts, tags, emit);
      }
      if (wires.length > 0 || past === undefined) continue;
      const { vlans } = to.circuit;
      const wire = vlans === 'untagged' ? untagged : vlans === 'all' ? inside : vlans[0]!;
      const lost: Barrier = {
        code: 'tag-not-carried',
        device: place.device,
        forwarder: place.forwarder,
        circuit: to.at.id,
        vlan: outerVlan(inside),
      };
      for (const out of to.outs) emit(out.element, out.direction, wire, classes, barrier ?? lost);
    }
  };

  return {
    places,
    arrive: (element, direction, tags, visit) =>
      element < firstTunnelElement
        ? enter(network.bundles[element]![direction === 0 ? 'b' : 'a'], tags, visit)
        : arriveByTunnel(element, direction, tags, visit),
    enter,
    leave: (place, ordinal, inside, emit) => {
      if (place.kind === 'switch') leaveSwitch(place, ordinal, inside, emit);
      else if (place.kind === 'forwarder') leaveForwarder(place, ordinal, inside, emit);
      else if (ordinal < 0)
        for (const { group, tags, outs, shutOuts } of place.ports) {
          for (const out of outs) emit(out.element, out.direction, tags, allClasses);
          if (past !== undefined) leaveShut(group, shutOuts, tags, emit);
        }
    },
    wouldLeave: (place, ordinal, inside, target) => {
      if (ordinal === target || blocked.has(blockKey(place, target))) return false;
      if (place.kind === 'switch') return switchOut(place.ports[target]!.port, inside) !== undefined;
      if (place.kind === 'host') return false;
      const to = place.circuits[target]!;
      return (
        !isApart(place.circuits[ordinal], to) &&
        (to.kind === 'tunnel' || circuitOut(to.circuit, inside).length > 0)
      );
    },
  };
};
