import type { Id } from '../model/scalars.ts';
import type { Tags } from '../network/frame-tags.ts';
import { untagged } from '../network/frame-tags.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { portGroupAt } from '../network/port-groups.ts';
import { stepOf } from './find-storms.ts';
import type { FloodGraph } from './flood-graph.ts';
import { floodGraph } from './flood-graph.ts';
import type { FrameClass } from './frame-classes.ts';
import { classBit } from './frame-classes.ts';
import type { Emit } from './forwarding.ts';
import { placesOf } from './places.ts';
import type { FloodStep } from './storm.ts';

/** Where a broadcast starts: at a host, or coming from outside into a port, untagged or with a VLAN. */
export type Source =
  | { readonly host: Id }
  | { readonly device: Id; readonly port: Id; readonly member?: 1 | 2; readonly vlan?: number };

export interface ReachOptions {
  /** The class of frame that is sent: an ARP request where nothing is said. */
  readonly frame?: FrameClass;
  /** Elements taken out of service, as in an outage; indices of `FloodGraph.element`. */
  readonly without?: ReadonlySet<number>;
}

export interface Delivery {
  readonly host: Id;
  /** `endless`: a storm keeps delivering. */
  readonly copies: number | 'endless';
  /** A shortest way to it. */
  readonly path: readonly FloodStep[];
}
export interface Reach {
  /** In order of id. Holds the sender itself where its own broadcast comes back to it. */
  readonly deliveries: readonly Delivery[];
  readonly tunnels: readonly Id[];
  /** True where the broadcast gets into a storm. */
  readonly storm: boolean;
}

/** The crossings on which a broadcast starts, as nodes of the graph. */
export const startsOf = (network: Network, graph: FloodGraph, source: Source): readonly number[] => {
  const { forwarding } = graph;
  const nodes = new Set<number>();
  const emit: Emit = (element, direction, tags) => {
    const node = graph.nodeOf(element, direction, tags);
    if (node >= 0) nodes.add(node);
  };
  if ('host' in source) {
    for (const place of forwarding.places.byDevice.get(source.host) ?? [])
      forwarding.leave(place, -1, untagged, emit);
    return [...nodes];
  }
  const group = portGroupAt(network, source.device, source.port, source.member);
  if (group === undefined) return [];
  const tags: Tags = source.vlan ?? untagged;
  forwarding.enter(group, tags, (place, ordinal, inside) => forwarding.leave(place, ordinal, inside, emit));
  return [...nodes];
};

/** What a breadth-first walk from some nodes sees: nodes in order, and the node that each was first reached from (-1: a start). */
interface Walk {
  readonly order: readonly number[];
  readonly from: ReadonlyMap<number, number>;
}

export const walk = (
  graph: FloodGraph,
  starts: readonly number[],
  classes: number,
  without: ReadonlySet<number> | undefined,
): Walk => {
  const isOut = (node: number): boolean => without?.has(graph.element[node]!) === true;
  const order = starts.filter((node) => !isOut(node));
  const from = new Map(order.map((node) => [node, -1]));
  for (let i = 0; i < order.length; i += 1) {
    const node = order[i]!;
    for (let edge = graph.edgeStart[node]!; edge < graph.edgeStart[node + 1]!; edge += 1) {
      const target = graph.edgeTo[edge]!;
      if ((graph.edgeClasses[edge]! & classes) === 0 || from.has(target) || isOut(target)) continue;
      from.set(target, node);
      order.push(target);
    }
  }
  return { order, from };
};

/** How many copies cross each node: paths are counted where they end, and nodes in or behind a cycle are left out. */
const copiesPerNode = (
  graph: FloodGraph,
  starts: readonly number[],
  { order, from }: Walk,
  classes: number,
): ReadonlyMap<number, number> => {
  const incoming = new Map<number, number>();
  const each = (node: number, take: (target: number) => void): void => {
    for (let edge = graph.edgeStart[node]!; edge < graph.edgeStart[node + 1]!; edge += 1)
      if ((graph.edgeClasses[edge]! & classes) !== 0 && from.has(graph.edgeTo[edge]!))
        take(graph.edgeTo[edge]!);
  };
  for (const node of order) each(node, (target) => incoming.set(target, (incoming.get(target) ?? 0) + 1));
  const copies = new Map<number, number>();
  const counted = new Map<number, number>();
  for (const node of starts) if (from.has(node)) copies.set(node, 1);
  const ready = order.filter((node) => !incoming.has(node));
  for (let i = 0; i < ready.length; i += 1) {
    const node = ready[i]!;
    const own = copies.get(node) ?? 0;
    counted.set(node, own);
    each(node, (target) => {
      copies.set(target, Math.min(Number.MAX_SAFE_INTEGER, (copies.get(target) ?? 0) + own));
      const left = incoming.get(target)! - 1;
      incoming.set(target, left);
      if (left === 0) ready.push(target);
    });
  }
  return counted;
};

/** Which hosts receive a broadcast, in how many copies and on which way. */
export const reach = (network: Network, source: Source, options: ReachOptions = {}): Reach => {
  const graph = floodGraph(network);
  const classes = classBit(options.frame ?? 'arp');
  const starts = startsOf(network, graph, source);
  const seen = walk(graph, starts, classes, options.without);
  const copies = copiesPerNode(graph, starts, seen, classes);
  const deliveries = new Map<Id, Delivery>();
  const tunnels = new Set<Id>();
  for (const node of seen.order) {
    const tunnel = network.tunnelIds[graph.element[node]! - network.firstTunnelElement];
    if (tunnel !== undefined) tunnels.add(tunnel);
    const place = graph.forwarding.places.all[graph.into[node]!];
    if (place?.kind !== 'host') continue;
    const here = copies.get(node);
    const before = deliveries.get(place.device);
    const path: FloodStep[] = [];
    if (before === undefined)
      for (let at = node; at >= 0; at = seen.from.get(at)!) path.unshift(stepOf(graph, at));
    deliveries.set(place.device, {
      host: place.device,
      copies: here === undefined || before?.copies === 'endless' ? 'endless' : (before?.copies ?? 0) + here,
      path: before?.path ?? path,
    });
  }
  return {
    deliveries: [...deliveries.values()].sort((a, b) => (a.host < b.host ? -1 : 1)),
    tunnels: [...tunnels].sort(),
    storm: copies.size < seen.order.length,
  };
};

/** The element of a cable or a tunnel in the graph, for `ReachOptions.without`; undefined for what is no crossing. */
export const elementIndex = (
  network: Network,
  ref: { readonly collection: 'links' | 'tunnels'; readonly id: Id },
): number | undefined => {
  if (ref.collection === 'links') return network.bundleByCable.get(ref.id)?.index;
  entryOf(network.design.tunnels, ref.id);
  return network.firstTunnelElement + placesOf(network).tunnelIndex.get(ref.id)!;
};
