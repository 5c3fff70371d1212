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
  /** By node: the index of the bundle of cables, or of the tunnel after all bundles. */
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
}

/** VLANs that mean something at a site: of its segments, its access ports, trunks' lists and native VLANs, and circuits. */
const vlansOfSites = (network: Network): ReadonlyMap<Id, readonly number[]> => {
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
    for (const [site, { vlan }] of Object.entries(segment.sites)) if (vlan !== undefined) at(site).add(vlan);
  for (const id of network.deviceIds) {
    const device = entryOf(design.devices, id);
    const vlans = at(device.site);
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
  return new Map(
    // Trunks that take any VLAN loop in those that nobody named, too: the default VLAN stands for them.
    [...bySite].map(([site, vlans]) => [site, [...vlans.add(defaultVlan)].sort((a, b) => a - b)]),
  );
};

/** A frame inside a place, as a source on its own would put it there. */
type Seed = readonly [place: Place, inside: Tags];

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

const seedsOf = (network: Network, forwarding: Forwarding): readonly Seed[] => {
  const vlans = vlansOfSites(network);
  return forwarding.places.all.flatMap((place) =>
    insideTags(place, vlans.get(entryOf(network.design.devices, place.device).site) ?? []).map(
      (tags) => [place, tags] as const,
    ),
  );
};

const build = (network: Network, earlier: FloodGraph | undefined): FloodGraph => {
  const forwarding = forwardingOf(network, { blocked: blockedPorts(network) });
  const rows = earlier === undefined ? undefined : keptRows(earlier, network);
  // By element and direction, then by tags: small keys, which maps are quickest with.
  const nodes: (Map<Tags, number> | undefined)[] = [];
  const element: number[] = [];
  const direction: number[] = [];
  const tags: number[] = [];
  const into: number[] = [];
  const edgeStart: number[] = [];
  const edgeTo: number[] = [];
  const edgeClasses: number[] = [];
  let hasFilters = false;
  const nodeFor = (crossed: number, way: Direction, wire: Tags): number => {
    const byTags = (nodes[crossed * 2 + way] ??= new Map<Tags, number>());
    const known = byTags.get(wire);
    if (known !== undefined) return known;
    const fresh = element.length;
    byTags.set(wire, fresh);
    element.push(crossed);
    direction.push(way);
    tags.push(wire);
    return fresh;
  };
  const emit = (crossed: number, way: Direction, wire: Tags, classes: ClassSet): void => {
    edgeTo.push(nodeFor(crossed, way, wire));
    edgeClasses.push(classes);
    if (classes !== allClasses) hasFilters = true;
  };
  for (const [place, inside] of seedsOf(network, forwarding))
    forwarding.leave(place, -1, inside, (crossed, way, wire) => {
      nodeFor(crossed, way, wire);
    });
  for (let node = 0; node < element.length; node += 1) {
    edgeStart.push(edgeTo.length);
    let place = rows?.take(element[node]!, direction[node]! as Direction, tags[node]!, emit);
    if (place === undefined) {
      place = -1;
      forwarding.arrive(
        element[node]!,
        direction[node]! as Direction,
        tags[node]!,
        (reached, ordinal, inside) => {
          if (place! < 0) place = reached.index;
          // A host takes what comes and forwards nothing.
          if (reached.kind !== 'host') forwarding.leave(reached, ordinal, inside, emit);
        },
      );
    }
    into.push(place);
  }
  edgeStart.push(edgeTo.length);
  return {
    network,
    forwarding,
    identity: {},
    nodeCount: element.length,
    edgeCount: edgeTo.length,
    element: Int32Array.from(element),
    direction: Uint8Array.from(direction),
    tags: Int32Array.from(tags),
    into: Int32Array.from(into),
    edgeStart: Int32Array.from(edgeStart),
    edgeTo: Int32Array.from(edgeTo),
    edgeClasses: Uint8Array.from(edgeClasses),
    hasFilters,
    nodeOf: (crossed, way, wire) => nodes[crossed * 2 + way]?.get(wire) ?? -1,
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
