import type { Design } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import { circuitIn, untagged } from '../network/frame-tags.ts';
import type { Network } from '../network/network.ts';
import { entryOf, perObject } from '../network/network.ts';
import { entrancesAt } from './entrances.ts';
import type { FloodGraph } from './flood-graph.ts';
import type { Emit } from './forwarding.ts';

/** Segments in the order of their letters: A to Z, then AA and on. */
export const inLetterOrder = (network: Network): readonly Id[] => idsByLetter(network.design.segments);

const idsByLetter = perObject((segments: Design['segments']): readonly Id[] =>
  Object.keys(segments).sort((idA, idB) => {
    const a = entryOf(segments, idA).letter;
    const b = entryOf(segments, idB).letter;
    return a.length - b.length || (a < b ? -1 : a > b ? 1 : idA < idB ? -1 : 1);
  }),
);

export interface SegmentNodes {
  readonly segment: Id;
  /** Every crossing that a frame of the segment can make, whoever sends it; filters are not asked. */
  readonly nodes: readonly number[];
}

const known = new WeakMap<object, readonly SegmentNodes[]>();

/** The segments of an earlier graph whose frames met nothing that has changed since, with the numbers that their nodes have now. */
const keptNodes = ({ network, kept }: FloodGraph): ReadonlyMap<Id, SegmentNodes> => {
  const reaches = new Map<Id, SegmentNodes>();
  if (kept === undefined) return reaches;
  for (const { segment, nodes: before } of known.get(kept.identity) ?? []) {
    const sites = network.design.segments[segment]?.sites;
    if (sites === undefined || kept.stirredSegments.has(segment)) continue;
    if (Object.keys(sites).some((site) => kept.stirredSites.has(site))) continue;
    const nodes = before.map((node) => kept.nodeNow[node]!);
    if (!nodes.includes(-1)) reaches.set(segment, { segment, nodes });
  }
  return reaches;
};

const compute = (graph: FloodGraph): readonly SegmentNodes[] => {
  const { network, forwarding } = graph;
  const kept = keptNodes(graph);
  const stamp = new Int32Array(graph.nodeCount).fill(-1);
  return inLetterOrder(network).map((segment, mark) => {
    const before = kept.get(segment);
    if (before !== undefined) return before;
    const nodes: number[] = [];
    const emit: Emit = (element, direction, tags) => {
      const node = graph.nodeOf(element, direction, tags);
      if (node < 0 || stamp[node] === mark) return;
      stamp[node] = mark;
      nodes.push(node);
    };
    for (const [site, { vlan }] of Object.entries(entryOf(network.design.segments, segment).sites)) {
      if (vlan === undefined) continue;
      const { switches, circuits } = entrancesAt(network, site, vlan);
      for (const place of switches) forwarding.leave(place, -1, vlan, emit);
      for (const { place, ordinal, tags } of circuits) {
        const circuit = place.circuits[ordinal]!;
        const inside = circuit.kind === 'port' ? circuitIn(circuit.circuit, tags) : undefined;
        if (inside !== undefined) forwarding.leave(place, ordinal, inside, emit);
      }
    }
    for (const host of network.hostsBySegment.get(segment) ?? [])
      for (const place of forwarding.places.byDevice.get(host)!) forwarding.leave(place, -1, untagged, emit);
    for (let i = 0; i < nodes.length; i += 1)
      for (let edge = graph.edgeStart[nodes[i]!]!; edge < graph.edgeStart[nodes[i]! + 1]!; edge += 1) {
        const target = graph.edgeTo[edge]!;
        if (stamp[target] === mark) continue;
        stamp[target] = mark;
        nodes.push(target);
      }
    return { segment, nodes };
  });
};

/** For every segment, in order of letter, the crossings that its frames can make. */
export const segmentReaches = (graph: FloodGraph): readonly SegmentNodes[] => {
  const before = known.get(graph.identity);
  if (before !== undefined) return before;
  const reaches = compute(graph);
  known.set(graph.identity, reaches);
  return reaches;
};
