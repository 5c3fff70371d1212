import type { Id } from '../model/scalars.ts';
import type { Tags } from '../network/frame-tags.ts';
import { accessVlan, circuitIn, defaultVlan, isTrunk, untagged } from '../network/frame-tags.ts';
import type { Answer, Network } from '../network/network.ts';
import { entryOf, perNetwork } from '../network/network.ts';
import type { ClassSet } from './frame-classes.ts';
import { allClasses } from './frame-classes.ts';
import type { Forwarding } from './forwarding.ts';
import { forwardingOf } from './forwarding.ts';
import type { Direction, Place } from './places.ts';
import { floodsTheSame, keptRows } from './kept-rows.ts';
import { nodeTable } from './node-table.ts';
import { blockedPorts } from './spanning-tree.ts';

/**
 * Who floods to whom: a node is a crossing of a cable (or an aggregate of cables) or a tunnel, one way, by a frame with given
 * tags; an edge leads from a crossing into a device to one out of it if the device would flood a broadcast from one to the other.
 */
export interface FloodGraph {
  readonly network: Network;
  readonly forwarding: Forwarding;
  /** The same object in all versions of a design in which the same frames go the same ways. */
  readonly identity: object;
  readonly nodeCount: number;
  readonly edgeCount: number;
  /** By node: the index of the bundle of cables, or of the tunnel from `firstTunnelElement` on. */
  readonly element: Int32Array;
  readonly direction: Uint8Array;
  readonly tags: Int32Array;
  /** By node: the place in which the crossing ends, by index (the first, where several claim it); -1 where the frame is dropped. */
  readonly into: Int32Array;
  /** Edges of node n: `edgeTo[edgeStart[n]]` up to, not including, `edgeTo[edgeStart[n + 1]]`. */
  readonly edgeStart: Int32Array;
  readonly edgeTo: Int32Array;
  /** By edge: the classes of frames that take it. */
  readonly edgeClasses: Uint8Array;
  /** True where some edge is not open to all classes alike. */
  readonly hasFilters: boolean;
  /** The node of a crossing, or -1. */
  readonly nodeOf: (element: number, direction: Direction, tags: Tags) => number;
  /** Nodes in which frames start from the place p, each as often as they do: `seeds[seedStart[p]]` up to `seeds[seedStart[p + 1]]`. */
  readonly seeds: Int32Array;
  readonly seedStart: Int32Array;
  /** What of the graph of an earlier version stands in this one. */
  readonly kept?: KeptGraph;
}

/** What has been found out by following the edges of an earlier graph stands where it met only nodes that stand. */
export interface KeptGraph {
  readonly identity: object;
  /** By node of the earlier graph: its number now; -1 where it is gone or what follows it may be another. */
  readonly nodeNow: Int32Array;
  /** Sites in which frames may start otherwise. */
  readonly stirredSites: ReadonlySet<Id>;
  /** Segments whose hosts are others, or elsewhere. */
  readonly stirredSegments: ReadonlySet<Id>;
}

/** VLANs that mean something at a site: of its segments, its access ports, trunks' lists and native VLANs, and circuits. */
const vlansOfSites = (
  network: Network,
  isWanted: (site: Id) => boolean,
): ReadonlyMap<Id, readonly number[]> => {
  const { design } = network;
  const bySite = new Map<Id, Set<number>>();
  const at = (site: Id): Set<number> => {
    const known = bySite.get(site);
    if (known !== undefined) return known;
    const fresh = new Set<number>();
    bySite.set(site, fresh);
    return fresh;
  };
  for (const segment of Object.values(design.segments))
    for (const [site, { vlan }] of Object.entries(segment.sites))
      if (vlan !== undefined && isWanted(site)) at(site).add(vlan);
  for (const [site, devices] of network.devicesBySite) {
    if (!isWanted(site)) continue;
    const vlans = at(site);
    for (const id of devices) {
      const device = entryOf(design.devices, id);
      if (device.kind === 'switch')
        for (const port of Object.values(device.ports)) {
          if (!isTrunk(port)) vlans.add(accessVlan(port));
          else if (port.nativeVlan !== undefined) vlans.add(port.nativeVlan);
          if (isTrunk(port) && Array.isArray(port.allowedVlans))
            for (const vlan of port.allowedVlans) vlans.add(vlan);
        }
      for (const forwarder of network.forwardersByDevice.get(id) ?? [])
        for (const { circuit } of network.circuitsByForwarder.get(forwarder) ?? [])
          if (circuit.kind === 'port' && typeof circuit.vlans !== 'string')
            for (const vlan of circuit.vlans) vlans.add(vlan);
    }
  }
  return new Map(
    // Trunks that take any VLAN loop in those that nobody named, too: the default VLAN stands for them.
    [...bySite].map(([site, vlans]) => [site, [...vlans.add(defaultVlan)].sort((a, b) => a - b)]),
  );
};

/** The tags that frames can have inside a place, as a source on its own would put them there. */
const insideTags = (place: Place, vlans: readonly number[]): readonly Tags[] => {
  if (place.kind === 'host') return [untagged];
  if (place.kind === 'switch') return vlans;
  const inside = new Set<Tags>([untagged]);
  for (const circuit of place.circuits)
    if (circuit.kind === 'port')
      for (const vlan of typeof circuit.circuit.vlans === 'string' ? vlans : circuit.circuit.vlans) {
        const tags = circuitIn(circuit.circuit, vlan);
        if (tags !== undefined) inside.add(tags);
      }
  return [...inside].sort((a, b) => a - b);
};

const build = (network: Network, earlier: FloodGraph | undefined): FloodGraph => {
  const forwarding = forwardingOf(network, { blocked: blockedPorts(network) });
  const rows = earlier === undefined ? undefined : keptRows(earlier, network);
  const { element, direction, tags, find, numberOf } = nodeTable();
  const into: number[] = [];
  const edgeStart: number[] = [];
  const edgeTo: number[] = [];
  const edgeClasses: number[] = [];
  const seedStart: number[] = [];
  const seeds: number[] = [];
  let hasFilters = false;

  // By node of the earlier graph: its number now, and whether what follows it is the same.
  const nodeNow = new Int32Array(earlier?.nodeCount ?? 0).fill(-1);
  const stands = new Uint8Array(nodeNow.length);
  const adopt = (old: number): number => {
    if (nodeNow[old]! < 0)
      nodeNow[old] = numberOf(
        rows!.elementNow[earlier!.element[old]!]!,
        earlier!.direction[old] as Direction,
        earlier!.tags[old]!,
      );
    return nodeNow[old]!;
  };
  const addEdge = (to: number, classes: ClassSet): void => {
    edgeTo.push(to);
    edgeClasses.push(classes);
    if (classes !== allClasses) hasFilters = true;
  };

  const vlans = vlansOfSites(network, (site) => rows?.stirredSites.has(site) !== false);
  for (const place of forwarding.places.all) {
    seedStart.push(seeds.length);
    const old = rows?.startsLike(place) ?? -1;
    if (old >= 0) {
      for (let i = earlier!.seedStart[old]!; i < earlier!.seedStart[old + 1]!; i += 1)
        seeds.push(adopt(earlier!.seeds[i]!));
      continue;
    }
    const { site } = entryOf(network.design.devices, place.device);
    // A place that is taken over stands in a site whose VLANs were not asked for.
    for (const inside of insideTags(place, vlans.get(site) ?? []))
      forwarding.leave(place, -1, inside, (crossed, way, wire) => {
        seeds.push(numberOf(crossed, way, wire));
      });
  }
  seedStart.push(seeds.length);

  for (let node = 0; node < element.length; node += 1) {
    edgeStart.push(edgeTo.length);
    const [crossed, way, wire] = [element[node]!, direction[node]!, tags[node]!];
    const oldElement = rows?.arrivesLike(crossed, way) ?? -1;
    const old = oldElement < 0 ? -1 : earlier!.nodeOf(oldElement, way, wire);
    if (old >= 0) {
      nodeNow[old] = node;
      stands[old] = 1;
      for (let edge = earlier!.edgeStart[old]!; edge < earlier!.edgeStart[old + 1]!; edge += 1)
        addEdge(adopt(earlier!.edgeTo[edge]!), earlier!.edgeClasses[edge]!);
      const place = earlier!.into[old]!;
      into.push(place < 0 ? -1 : rows!.placeNow[place]!);
      continue;
    }
    let place = -1;
    forwarding.arrive(crossed, way, wire, (reached, ordinal, inside) => {
      if (place < 0) place = reached.index;
      // A host takes what comes and forwards nothing.
      if (reached.kind !== 'host')
        forwarding.leave(reached, ordinal, inside, (nextCrossed, nextWay, nextWire, classes) => {
          addEdge(numberOf(nextCrossed, nextWay, nextWire), classes);
        });
    });
    into.push(place);
  }
  edgeStart.push(edgeTo.length);
  return {
    network,
    forwarding,
    identity: {},
    nodeCount: element.length,
    edgeCount: edgeTo.length,
    element: new Int32Array(element),
    direction: new Uint8Array(direction),
    tags: new Int32Array(tags),
    into: new Int32Array(into),
    edgeStart: new Int32Array(edgeStart),
    edgeTo: new Int32Array(edgeTo),
    edgeClasses: new Uint8Array(edgeClasses),
    hasFilters,
    nodeOf: find,
    seeds: new Int32Array(seeds),
    seedStart: new Int32Array(seedStart),
    ...(rows === undefined
      ? {}
      : {
          kept: {
            identity: earlier!.identity,
            nodeNow: nodeNow.map((node, old) => (stands[old] === 1 ? node : -1)),
            stirredSites: rows.stirredSites,
            stirredSegments: rows.stirredSegments,
          },
        }),
  };
};

/** The flood graph of a whole design, built once per version of it. */
export const floodGraph: (network: Network) => FloodGraph = perNetwork(
  (network, earlier?: Answer<FloodGraph>) => {
    if (earlier === undefined || !floodsTheSame(earlier.network, network))
      return build(network, earlier?.value);
    // Where frames go is the same, what devices are called may not be.
    return {
      ...earlier.value,
      network,
      forwarding: forwardingOf(network, { blocked: blockedPorts(network) }),
    };
  },
);
