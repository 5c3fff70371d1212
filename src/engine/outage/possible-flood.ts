import type { Emit, Forwarding, Visit } from '../flood/forwarding.ts';
import { forwardingOf } from '../flood/forwarding.ts';
import type { Direction, ForwarderPlace, Out, Place } from '../flood/places.ts';
import type { Id } from '../model/scalars.ts';
import type { Tags } from '../network/frame-tags.ts';
import { indexNetwork } from '../network/index-network.ts';
import type { Device, Network, PortGroup } from '../network/network.ts';
import { deviceOfTunnelEnd, entryOf, forwardingMembers, perNetwork } from '../network/network.ts';

/** Numbers a way out: an element in a direction. */
export const outKey = (element: number, direction: Direction): number => element * 2 + direction;

/**
 * How frames could go whatever fails: both members of every pair forward, an aggregate uses each of its ways, every tunnel
 * is up and no spanning tree blocks. What of it is open at a time is decided apart, by `Standing`.
 */
export interface PossibleFlood {
  readonly network: Network;
  readonly places: readonly Place[];
  readonly placesByDevice: ReadonlyMap<Id, readonly Place[]>;
  readonly forwarding: Forwarding;
  /** Where a frame may get that crosses an element: by either member where a tunnel ends at a pair that shares the endpoint. */
  readonly arrive: (element: number, direction: Direction, tags: Tags, visit: Visit) => void;
  /** Out on what it may be flooded, with the number of the port or circuit where a spanning tree could block it, or -1. */
  readonly leave: (place: Place, ordinal: number, inside: Tags, emit: EmitFrom) => void;
  /** Aggregates that lead to several port groups, of which a frame takes one. */
  readonly choices: readonly PortGroup[];
}
export type EmitFrom = (...crossing: [...Parameters<Emit>, outOrdinal: number]) => void;

const withPairs = (
  network: Network,
  change: (pair: Extract<Device, { kind: 'ha-pair' }>) => Device,
): Network => {
  const { design } = network;
  const pairs = network.deviceIds.filter((id) => design.devices[id]!.kind === 'ha-pair');
  if (pairs.length === 0) return network;
  const devices = { ...design.devices };
  for (const id of pairs) {
    const device = entryOf(design.devices, id);
    if (device.kind === 'ha-pair') devices[id] = change(device);
  }
  return indexNetwork({ ...design, devices }, network);
};

const allOuts = (network: Network, group: PortGroup): readonly Out[] =>
  group.bundles
    .filter(({ bundle }) => network.bundles[bundle]!.alive.length > 0)
    .map(({ bundle, end }) => ({ element: bundle, direction: end === 'a' ? 0 : 1 }));

const widened = (network: Network, place: Place): Place => {
  if (place.kind === 'forwarder')
    return {
      ...place,
      circuits: place.circuits.map((circuit) =>
        circuit.kind === 'port' ? { ...circuit, outs: allOuts(network, circuit.group) } : circuit,
      ),
    };
  const ports = place.ports.map((port) => ({ ...port, outs: allOuts(network, port.group) }));
  return { ...place, ports } as Place;
};

/** Whether a spanning tree may block ports or circuits of the place. */
const isInTree = (network: Network, place: Place): boolean => {
  const device = entryOf(network.design.devices, place.device);
  if (place.kind === 'host') return false;
  const own =
    place.kind === 'forwarder' ? entryOf(network.design.forwarders, place.forwarder).spanningTree : undefined;
  return (own ?? device.settings?.spanningTree)?.mode === 'on';
};

/** One place for each circuit, with a way out by that circuit alone. */
const byCircuit = (place: ForwarderPlace): readonly ForwarderPlace[] =>
  place.circuits.map((_own, ordinal) => ({
    ...place,
    circuits: place.circuits.map((circuit, other) =>
      other === ordinal ? circuit : { ...circuit, outs: [] },
    ),
  }));

/** Built once for each network. */
export const possibleFlood = perNetwork((network): PossibleFlood => {
  const first = withPairs(network, (pair) => ({ ...pair, mode: 'active-active' }));
  const second =
    first === network
      ? network
      : withPairs(network, (pair) => ({ ...pair, mode: 'active-active', active: pair.active === 2 ? 1 : 2 }));
  const forwarding = forwardingOf(first, { everyTunnelUp: true });
  const turned = second === first ? forwarding : forwardingOf(second, { everyTunnelUp: true });
  const places = forwarding.places.all.map((place) => widened(first, place));
  const placesByDevice = new Map<Id, Place[]>();
  for (const place of places) {
    const list = placesByDevice.get(place.device);
    if (list === undefined) placesByDevice.set(place.device, [place]);
    else list.push(place);
  }
  const apart = new Map(
    places.flatMap((place) =>
      place.kind === 'forwarder' && isInTree(first, place) ? [[place.index, byCircuit(place)] as const] : [],
    ),
  );
  const { firstTunnelElement } = first;

  const arrive = (element: number, direction: Direction, tags: Tags, visit: Visit): void => {
    forwarding.arrive(element, direction, tags, visit);
    if (element < firstTunnelElement || !isSharedEnd(first, element, direction)) return;
    const device = entryOf(first.design.devices, farDevice(first, element, direction));
    // The other member of a pair is the one that the turned network calls active.
    if (device.kind === 'ha-pair') turned.arrive(element, direction, tags, visit);
  };
  const leave = (place: Place, ordinal: number, inside: Tags, emit: EmitFrom): void => {
    const wide = places[place.index]!;
    if (wide.kind === 'forwarder') {
      const circuits = apart.get(place.index);
      if (circuits === undefined)
        forwarding.leave(wide, ordinal, inside, (...crossing) => emit(...full(crossing), -1));
      else
        circuits.forEach((alone, out) =>
          forwarding.leave(alone, ordinal, inside, (...crossing) => emit(...full(crossing), out)),
        );
      return;
    }
    const inTree = wide.kind === 'switch' && isInTree(first, wide);
    forwarding.leave(wide, ordinal, inside, (...crossing) => {
      const [element, direction] = crossing;
      const bundle = first.bundles[element]!;
      const out = inTree ? wide.ordinalByGroup.get((direction === 0 ? bundle.a : bundle.b).index)! : -1;
      emit(...full(crossing), out);
    });
  };
  return {
    network: first,
    places,
    placesByDevice,
    forwarding,
    arrive,
    leave,
    choices: [...first.portGroupsByDevice.values()]
      .flat()
      .filter((group) => group.aggregation !== undefined && allOuts(first, group).length > 1),
  };
});

const full = ([element, direction, tags, classes]: Parameters<Emit>): Parameters<Emit> => [
  element,
  direction,
  tags,
  classes,
  undefined,
];

const farEndOf = (network: Network, element: number, direction: Direction) => {
  const tunnel = entryOf(network.design.tunnels, network.tunnelIds[element - network.firstTunnelElement]!);
  return { tunnel, end: direction === 0 ? ('b' as const) : ('a' as const) };
};
const farDevice = (network: Network, element: number, direction: Direction): Id => {
  const { tunnel, end } = farEndOf(network, element, direction);
  return deviceOfTunnelEnd(network, tunnel, end);
};
/** True where no single member owns the endpoint at which a tunnel, crossed this way, ends. */
export const isSharedEnd = (network: Network, element: number, direction: Direction): boolean => {
  const { tunnel, end } = farEndOf(network, element, direction);
  const { member, device } = entryOf(network.design.endpoints, tunnel[end].endpoint);
  return member === undefined || entryOf(network.design.devices, device).kind !== 'ha-pair';
};

/** The member of a pair that takes packets to an endpoint that both share. */
export const memberTakingTunnels = (device: Device) =>
  device.kind === 'ha-pair' && device.active !== undefined ? device.active : forwardingMembers(device)[0]!;
