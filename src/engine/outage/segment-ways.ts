import type { AttachmentPoint } from '../flood/attachment-points.ts';
import { attachmentPoints } from '../flood/attachment-points.ts';
import { floodGraph } from '../flood/flood-graph.ts';
import type { FrameClass } from '../flood/frame-classes.ts';
import { classBit } from '../flood/frame-classes.ts';
import { blockKey } from '../flood/forwarding.ts';
import type { Direction, Place } from '../flood/places.ts';
import type { Id } from '../model/scalars.ts';
import type { Tags } from '../network/frame-tags.ts';
import { untagged } from '../network/frame-tags.ts';
import type { Network, PortGroup } from '../network/network.ts';
import { entryOf, perNetwork } from '../network/network.ts';
import { isSharedEnd, outKey, possibleFlood } from './possible-flood.ts';
import type { Standing } from './standing.ts';
import { FORWARDS, TAKES_TUNNELS } from './standing.ts';

/**
 * Every way that frames of one segment could ever take between its points. Nodes 0 to points - 1 send, as many after them
 * receive, the others are crossings of a cable or tunnel one way with given tags.
 */
export interface SegmentWays {
  readonly segment: Id;
  readonly frame: FrameClass;
  readonly points: readonly AttachmentPoint[];
  readonly nodeCount: number;
  /** By node; -1 for points. */
  readonly element: Int32Array;
  readonly direction: Uint8Array;
  readonly nodesByElement: ReadonlyMap<number, readonly number[]>;
  readonly places: ReadonlySet<number>;
  /** Ways on from node n: `edgeStart[n]` up to, not including, `edgeStart[n + 1]`. */
  readonly edgeStart: Int32Array;
  readonly edgeTo: Int32Array;
  /** By edge: the place that forwards, and what it asks of it (`FORWARDS`, with `TAKES_TUNNELS` added where it must). */
  readonly edgePlace: Int32Array;
  readonly edgeNeeds: Uint8Array;
  /** By edge: the `blockKey` of the way in and of the way out; -1 where nothing blocks. */
  readonly edgeIn: Float64Array;
  readonly edgeOut: Float64Array;
  /** The same edges by where they lead. */
  readonly backStart: Int32Array;
  readonly backFrom: Int32Array;
  readonly backEdge: Int32Array;
}

interface Edge {
  readonly from: number;
  readonly to: number;
  readonly place: number;
  readonly needs: number;
  readonly in: number;
  readonly out: number;
}

const build = (network: Network, segment: Id): SegmentWays => {
  const flood = possibleFlood(network);
  const { protocols } = entryOf(network.design.segments, segment);
  const frame: FrameClass =
    protocols?.includes('ipv6') === true && !protocols.includes('ipv4') ? 'ipv6' : 'arp';
  const bit = classBit(frame);
  const placed = attachmentPoints(floodGraph(network), segment).points;
  const points = placed.map(({ point }) => point);
  const count = points.length;
  const { firstTunnelElement } = network;

  const element: number[] = Array.from({ length: count * 2 }, () => -1);
  const direction: number[] = element.map(() => 0);
  const tags: Tags[] = element.map(() => untagged);
  const nodes = new Map<string, number>();
  const edges: Edge[] = [];
  const nodeFor = (crossed: number, way: Direction, wire: Tags): number => {
    const key = `${outKey(crossed, way)} ${wire}`;
    const known = nodes.get(key);
    if (known !== undefined) return known;
    const fresh = element.length;
    nodes.set(key, fresh);
    element.push(crossed);
    direction.push(way);
    tags.push(wire);
    return fresh;
  };
  const receivers = new Map<number, { readonly point: number; readonly ordinal: number | undefined }[]>();
  const stands = placed.map(({ place, at, point }, i) => {
    // A port of a pair may be met at either member, whose circuits may be numbered otherwise.
    const own = (flood.placesByDevice.get(point.device) ?? []).filter((one) => isSamePlace(one, place));
    for (const one of own) {
      const list = receivers.get(one.index) ?? [];
      list.push({ point: i, ordinal: at === undefined ? undefined : ordinalIn(one, place, at.ordinal) });
      receivers.set(one.index, list);
    }
    return { own, at };
  });

  const forward = (from: number, place: Place, ordinal: number, inside: Tags, needs: number): void => {
    const cameIn = ordinal < 0 ? -1 : blockKey(place, ordinal);
    const add = (to: number, out: number): void => {
      const leaves = out < 0 ? -1 : blockKey(place, out);
      edges.push({ from, to, place: place.index, needs, in: cameIn, out: leaves });
    };
    for (const { point, ordinal: target } of receivers.get(place.index) ?? []) {
      if (from === point) continue;
      if (target === undefined) {
        if (from >= count) add(count + point, -1);
      } else if (flood.forwarding.wouldLeave(place, ordinal, inside, target)) add(count + point, target);
    }
    if (place.kind === 'host' && from >= count) return;
    flood.leave(place, ordinal, inside, (crossed, way, wire, classes, _barrier, out) => {
      if ((classes & bit) !== 0) add(nodeFor(crossed, way, wire), out);
    });
  };

  stands.forEach(({ own, at }, i) => {
    for (const place of own)
      if (at === undefined) forward(i, place, -1, untagged, FORWARDS);
      else {
        const group = groupAt(network, at.group, place);
        flood.forwarding.enter(group, at.tags, (entered, ordinal, inside) => {
          if (entered.index === place.index)
            forward(i, flood.places[entered.index]!, ordinal, inside, FORWARDS);
        });
      }
  });
  for (let node = count * 2; node < element.length; node += 1) {
    const crossed = element[node]!;
    const way = direction[node]! as Direction;
    const needs =
      crossed >= firstTunnelElement && isSharedEnd(flood.network, crossed, way)
        ? FORWARDS | TAKES_TUNNELS
        : FORWARDS;
    flood.arrive(crossed, way, tags[node]!, (reached, ordinal, inside) => {
      forward(node, flood.places[reached.index]!, ordinal, inside, needs);
    });
  }

  const nodesByElement = new Map<number, number[]>();
  element.forEach((crossed, node) => {
    if (crossed < 0) return;
    const list = nodesByElement.get(crossed);
    if (list === undefined) nodesByElement.set(crossed, [node]);
    else list.push(node);
  });
  const forwardOrder = sortedBy(edges, element.length, (edge) => edge.from);
  const sorted = forwardOrder.order.map((i) => edges[i]!);
  const backOrder = sortedBy(sorted, element.length, (edge) => edge.to);
  return {
    segment,
    frame,
    points,
    nodeCount: element.length,
    element: Int32Array.from(element),
    direction: Uint8Array.from(direction),
    nodesByElement,
    places: new Set(edges.map(({ place }) => place)),
    edgeStart: forwardOrder.start,
    edgeTo: Int32Array.from(sorted, (edge) => edge.to),
    edgePlace: Int32Array.from(sorted, (edge) => edge.place),
    edgeNeeds: Uint8Array.from(sorted, (edge) => edge.needs),
    edgeIn: Float64Array.from(sorted, (edge) => edge.in),
    edgeOut: Float64Array.from(sorted, (edge) => edge.out),
    backStart: backOrder.start,
    backFrom: Int32Array.from(backOrder.order, (i) => sorted[i]!.from),
    backEdge: Int32Array.from(backOrder.order),
  };
};

/** True for the same place, and for the same forwarder on the other member of a pair. */
const isSamePlace = (one: Place, other: Place): boolean =>
  one.kind !== 'forwarder' || (other.kind === 'forwarder' && one.forwarder === other.forwarder);

/** The number that a port or circuit of `other` has in `one`. */
const ordinalIn = (one: Place, other: Place, ordinal: number): number =>
  one.kind !== 'forwarder' || other.kind !== 'forwarder'
    ? ordinal
    : one.circuits.findIndex(({ at }) => at.id === other.circuits[ordinal]!.at.id);

const groupAt = (network: Network, group: PortGroup, place: Place) =>
  place.kind !== 'forwarder' || group.member === place.member
    ? group
    : network.portGroupsByDevice
        .get(group.device)!
        .find((other) => other.port === group.port && other.member === place.member)!;

/** Edges in the order of a node, those of one node as they came, and where each node's begin. */
const sortedBy = (
  edges: readonly Edge[],
  nodeCount: number,
  nodeOf: (edge: Edge) => number,
): { readonly start: Int32Array; readonly order: readonly number[] } => {
  const start = new Int32Array(nodeCount + 1);
  for (const edge of edges) start[nodeOf(edge) + 1]! += 1;
  for (let node = 0; node < nodeCount; node += 1) start[node + 1]! += start[node]!;
  const next = start.slice();
  const order: number[] = new Array<number>(edges.length);
  edges.forEach((edge, i) => {
    order[next[nodeOf(edge)]!] = i;
    next[nodeOf(edge)]! += 1;
  });
  return { start, order };
};

/** The ways of every segment, built once for each network. */
export const segmentWays: (network: Network) => readonly SegmentWays[] = perNetwork((network) =>
  Object.keys(network.design.segments)
    .sort()
    .map((segment) => build(network, segment)),
);

/** Whether frames can take an edge as things stand. */
export const isOpen = (ways: SegmentWays, edge: number, standing: Standing): boolean => {
  const to = ways.edgeTo[edge]!;
  const needs = ways.edgeNeeds[edge]!;
  if ((standing.places[ways.edgePlace[edge]!]! & needs) !== needs) return false;
  const crossed = ways.element[to]!;
  if (crossed >= 0) {
    if (standing.elements[crossed] !== 1) return false;
    if (standing.unused.size > 0 && standing.unused.has(outKey(crossed, ways.direction[to] as Direction)))
      return false;
  }
  return (
    standing.blocked.size === 0 ||
    (!standing.blocked.has(ways.edgeIn[edge]!) && !standing.blocked.has(ways.edgeOut[edge]!))
  );
};
