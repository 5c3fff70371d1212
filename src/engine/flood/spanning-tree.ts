import type { Id } from '../model/scalars.ts';
import type { Tags } from '../network/frame-tags.ts';
import { untagged, circuitOut, gatewayPortCarries } from '../network/frame-tags.ts';
import type { Bundle, Network } from '../network/network.ts';
import { entryOf, perNetwork } from '../network/network.ts';
import { classBit } from './frame-classes.ts';
import type { Blocked, Forwarding } from './forwarding.ts';
import { blockKey, forwardingOf } from './forwarding.ts';
import type { Direction, Place } from './places.ts';

// IEEE 802.1Q-2022 table 13-4, from memory: 20,000 for 1 Gbit/s, in inverse proportion to the rate.
const costAtGigabit = 20_000;
const gigabitBps = 1_000_000_000;
// IEEE 802.1Q-2022 table 13-3, from memory: the priority of a bridge on which none was set.
const defaultPriority = 32_768;

interface BridgePort {
  readonly bridge: number;
  readonly ordinal: number;
  readonly cost: number;
}
interface TreeBridge {
  readonly place: Place;
  readonly priority: number;
  readonly ports: readonly BridgePort[];
}
/** A port that hears what another one sends. */
interface Heard {
  readonly from: BridgePort;
  /** Crossed on the way, in order. */
  readonly tunnels: readonly Id[];
}
/** What a bridge thinks of the root, in the order in which claims are compared. */
type Claim = readonly [
  rootPriority: number,
  root: number,
  cost: number,
  priority: number,
  bridge: number,
  port: number,
];

const compare = (a: readonly number[], b: readonly number[]): number => {
  for (let i = 0; i < a.length; i += 1) if (a[i] !== b[i]) return a[i]! - b[i]!;
  return 0;
};

const treeOf = (network: Network, place: Place) => {
  const device = entryOf(network.design.devices, place.device);
  if (place.kind === 'switch') return device.settings?.spanningTree;
  if (place.kind === 'host') return undefined;
  const forwarder = entryOf(network.design.forwarders, place.forwarder);
  return forwarder.kind === 'bridge' ? (forwarder.spanningTree ?? device.settings?.spanningTree) : undefined;
};

/**
 * Whether a bridge that takes no part passes BPDUs on. IEEE 802.1Q-2022 section 8.6.3 has them dropped, some equipment passes
 * them; where the profile says nothing they are taken to be dropped, so that no tree is credited with what it may not see.
 */
const passesBpdus = (network: Network, device: Id): boolean => {
  const { profile } = entryOf(network.design.devices, device);
  return profile !== undefined && entryOf(network.design.profiles, profile).reservedGroups?.['00'] === 'pass';
};

const participantsOf = (network: Network, forwarding: Forwarding): readonly TreeBridge[] => {
  const bridges: TreeBridge[] = [];
  for (const place of forwarding.places.all) {
    const tree = treeOf(network, place);
    if (tree?.mode !== 'on') continue;
    const bridge = bridges.length;
    const costOf = (rateBps: number | undefined): number =>
      Math.max(1, Math.round((costAtGigabit * gigabitBps) / (rateBps ?? gigabitBps)));
    const ports =
      place.kind === 'switch'
        ? place.ports.map(({ port }, ordinal) => ({ bridge, ordinal, cost: costOf(port.speedBps) }))
        : place.kind === 'forwarder'
          ? place.circuits.map((circuit, ordinal) => ({
              bridge,
              ordinal,
              cost: costOf(circuit.kind === 'port' ? circuit.port.speedBps : undefined),
            }))
          : [];
    bridges.push({ place, priority: tree.priority ?? defaultPriority, ports });
  }
  return bridges;
};

type Crossing = readonly [element: number, direction: Direction, tags: Tags];
type Way = readonly [...Crossing, tunnels: readonly Id[]];

/** The crossings on which a port sends its own BPDUs: untagged, whatever the VLANs of the port, but through a circuit as any frame. */
const sentBy = (bridge: TreeBridge, ordinal: number): readonly Crossing[] => {
  const { place } = bridge;
  if (place.kind === 'switch')
    return place.ports[ordinal]!.outs.map(
      ({ element, direction }) => [element, direction, untagged] as const,
    );
  const circuit = place.kind === 'forwarder' ? place.circuits[ordinal]! : undefined;
  if (circuit === undefined) return [];
  const wires =
    circuit.kind === 'tunnel'
      ? [untagged]
      : circuitOut(circuit.circuit, untagged).filter((tags) => gatewayPortCarries(circuit.port, tags));
  return wires.flatMap((tags) =>
    circuit.outs.map(({ element, direction }) => [element, direction, tags] as const),
  );
};

/** Whether a port at either end of the cables neither sends nor takes BPDUs. */
const filtersBpdus = ({ design }: Network, { a, b }: Bundle): boolean =>
  [a, b].some(({ device, port }) => entryOf(design.devices, device).ports[port]?.bpdus === 'filter');

/** Follows what each port sends to the ports of other bridges (or its own) that hear it. */
const hearing = (
  network: Network,
  forwarding: Forwarding,
  bridges: readonly TreeBridge[],
): ReadonlyMap<BridgePort, readonly Heard[]> => {
  const heard = new Map<BridgePort, Heard[]>();
  const byPlace = new Map(bridges.map((bridge) => [bridge.place, bridge]));
  const { firstTunnelElement } = network;
  for (const bridge of bridges)
    for (const port of bridge.ports) {
      const queue: Way[] = sentBy(bridge, port.ordinal).map((crossing) => [...crossing, []]);
      const seen = new Set<string>();
      const reached = new Set<BridgePort>();
      let tunnels: readonly Id[] = [];
      const take = (place: Place, ordinal: number, inside: Tags): void => {
        const listener = byPlace.get(place);
        if (listener !== undefined) {
          const at = listener.ports[ordinal];
          if (at === undefined || reached.has(at)) return;
          reached.add(at);
          const list = heard.get(at);
          if (list === undefined) heard.set(at, [{ from: port, tunnels }]);
          else list.push({ from: port, tunnels });
        } else if (place.kind !== 'host' && passesBpdus(network, place.device)) {
          forwarding.leave(place, ordinal, inside, (element, direction, tags, classes) => {
            if ((classes & classBit('other')) !== 0) queue.push([element, direction, tags, tunnels]);
          });
        }
      };
      for (const [element, direction, tags, behind] of queue) {
        const key = `${element} ${direction} ${tags}`;
        if (seen.has(key)) continue;
        seen.add(key);
        const bundle = element < firstTunnelElement ? network.bundles[element]! : undefined;
        if (bundle !== undefined && filtersBpdus(network, bundle)) continue;
        tunnels =
          bundle === undefined ? [...behind, network.tunnelIds[element - firstTunnelElement]!] : behind;
        const group = bundle === undefined ? undefined : direction === 0 ? bundle.b : bundle.a;
        const [place] = group === undefined ? [] : (forwarding.places.byDevice.get(group.device) ?? []);
        // A switch that takes part listens before any VLAN is looked at, and only to untagged BPDUs.
        if (group !== undefined && place?.kind === 'switch' && byPlace.has(place)) {
          if (tags === untagged) take(place, place.ordinalByGroup.get(group.index)!, tags);
        } else forwarding.arrive(element, direction, tags, take);
      }
    }
  return heard;
};

interface Election {
  readonly blocked: ReadonlySet<BridgePort>;
  /** By bridge: its port towards the root; none at the root, nor anywhere in an election that doesn't settle. */
  readonly rootPorts: ReadonlyMap<number, BridgePort>;
  /** Whether a bridge is one that others elect. */
  readonly isRoot: (bridge: number) => boolean;
}
type Hearing = ReadonlyMap<BridgePort, readonly Heard[]>;

const elect = (bridges: readonly TreeBridge[], heard: Hearing): Election => {
  const blocked = new Set<BridgePort>();
  const rootPorts = new Map<number, BridgePort>();
  const own = bridges.map(({ priority }, bridge): readonly number[] => [priority, bridge, 0]);
  const sent = (claims: readonly (readonly number[])[], port: BridgePort): Claim => {
    const [rootPriority, root, cost] = claims[port.bridge]!;
    return [rootPriority!, root!, cost!, bridges[port.bridge]!.priority, port.bridge, port.ordinal];
  };
  const offers = (claims: readonly (readonly number[])[], bridge: TreeBridge) =>
    bridge.ports.flatMap((port) =>
      (heard.get(port) ?? []).map(({ from }) => {
        const [rootPriority, root, cost, ...sender] = sent(claims, from);
        return { port, vector: [rootPriority, root, cost + port.cost, ...sender, port.ordinal] };
      }),
    );
  let claims = own;
  let isSettled = false;
  for (let round = 0; round <= bridges.length + 1 && !isSettled; round += 1) {
    const next = bridges.map((bridge, i) =>
      offers(claims, bridge).reduce<readonly number[]>(
        (best, { vector }) => (compare(vector.slice(0, 3), best) < 0 ? vector.slice(0, 3) : best),
        own[i]!,
      ),
    );
    isSettled = next.every((claim, i) => compare(claim, claims[i]!) === 0);
    claims = next;
  }
  const isRoot = (bridge: number): boolean => isSettled && claims[bridge]![1] === bridge;
  if (!isSettled) return { blocked, rootPorts, isRoot };
  bridges.forEach((bridge, i) => {
    const best = isRoot(i)
      ? undefined
      : offers(claims, bridge).reduce((a, b) => (compare(b.vector, a.vector) < 0 ? b : a));
    if (best !== undefined) rootPorts.set(i, best.port);
    for (const port of bridge.ports) {
      if (port === best?.port) continue;
      const mine = sent(claims, port);
      const isBeaten = (heard.get(port) ?? []).some(({ from }) => compare(sent(claims, from), mine) < 0);
      if (isBeaten) blocked.add(port);
    }
  });
  return { blocked, rootPorts, isRoot };
};

const treesOf = perNetwork((network) => {
  const forwarding = forwardingOf(network);
  const bridges = participantsOf(network, forwarding);
  const heard: Hearing = bridges.length === 0 ? new Map() : hearing(network, forwarding, bridges);
  return { bridges, heard, election: elect(bridges, heard) };
});

/**
 * The ports and circuits that spanning tree blocks, elected among the switches and bridges that have it on, over what their
 * BPDUs really reach. Where priorities tie the order of ids stands in for the MAC addresses that a design doesn't hold. An
 * election that doesn't settle (BPDUs that pass one way only) blocks nothing: no loop is then taken for covered.
 */
export const blockedPorts = perNetwork((network): Blocked => {
  const { bridges, election } = treesOf(network);
  return new Set([...election.blocked].map((port) => blockKey(bridges[port.bridge]!.place, port.ordinal)));
});

/** A port of a switch, or a circuit of a bridge, that takes part in spanning tree. */
export interface TreePort {
  /** Place in `bpduReach`. */
  readonly bridge: number;
  /** Of the port in the switch, of the circuit in the forwarder. */
  readonly ordinal: number;
}
/** A switch or bridge that takes part in spanning tree. */
export interface BpduListener {
  readonly place: Place;
  readonly priority: number;
  readonly isRoot: boolean;
  /** Ports that hear BPDUs at all, in order. */
  readonly ports: readonly HearingPort[];
  readonly blockedPorts: number;
  /** How many it would block if no BPDU crossed a tunnel: fewer in all where the overlay is part of a loop. */
  readonly blockedPortsApart: number;
}
export interface HearingPort {
  readonly ordinal: number;
  /** It hears a better root than the bridge itself would be: the port leads there, or is blocked for one that does. */
  readonly hearsBetter: boolean;
  readonly hears: readonly { readonly from: TreePort; readonly tunnels: readonly Id[] }[];
}

/** Whose BPDUs each switch and bridge with spanning tree hears, at which port, and through which tunnels they came. */
export const bpduReach = perNetwork((network): readonly BpduListener[] => {
  const { bridges, heard, election } = treesOf(network);
  const apart = elect(
    bridges,
    new Map([...heard].map(([port, list]) => [port, list.filter(({ tunnels }) => tunnels.length === 0)])),
  );
  return bridges.map(({ place, priority, ports }, bridge) => ({
    place,
    priority,
    isRoot: election.isRoot(bridge),
    ports: ports.flatMap((port): readonly HearingPort[] => {
      const hears = (heard.get(port) ?? []).map(({ from, tunnels }) => ({
        from: { bridge: from.bridge, ordinal: from.ordinal },
        tunnels,
      }));
      const hearsBetter = election.rootPorts.get(bridge) === port || election.blocked.has(port);
      return hears.length === 0 ? [] : [{ ordinal: port.ordinal, hearsBetter, hears }];
    }),
    blockedPorts: ports.filter((port) => election.blocked.has(port)).length,
    blockedPortsApart: ports.filter((port) => apart.blocked.has(port)).length,
  }));
});
