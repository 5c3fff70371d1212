import type { ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import { indexNetwork } from '../network/index-network.ts';
import type { DesignFacts, Network } from '../network/network.ts';
import { ends, entryOf } from '../network/network.ts';
import { casualtiesOf } from './casualties.ts';
import { outageOf } from './outage.ts';
import type { SegmentWays } from './segment-ways.ts';
import { isOpen, segmentWays } from './segment-ways.ts';
import type { Standing } from './standing.ts';
import { undisturbed } from './standing.ts';

/** Cables and tunnels that part a segment if all of them fail at once. */
export interface SegmentCut {
  readonly segment: Id;
  /** In order of collection and id. */
  readonly elements: readonly ElementRef[];
  /** Pairs of points that they part. */
  readonly pairCount: number;
}

const endless = 1_000_000_000;

/** Residual capacities between halves of nodes: 2n takes frames in, 2n + 1 sends them on. */
interface Flow {
  readonly start: Int32Array;
  readonly to: Int32Array;
  /** The arc that runs the other way. */
  readonly back: Int32Array;
  readonly capacity: Int32Array;
}

/** How many things have to fail for a crossing to go: 1 for a tunnel, each cable of an aggregate; never for the cable of a host. */
const capacityOf = (network: Network, element: number): number => {
  const bundle = network.bundles[element];
  if (bundle === undefined) return 1;
  const isAccess = ends.some((end) => entryOf(network.design.devices, bundle[end].device).kind === 'host');
  return isAccess ? endless : bundle.alive.length;
};

/** `standing` says which ways are open; with `isWide` those count, too, that a tree blocks or an aggregate doesn't use now. */
const flowOf = (network: Network, ways: SegmentWays, isWide: boolean): Flow => {
  const standing: Standing = isWide
    ? { ...undisturbed(network), blocked: new Set(), unused: new Set() }
    : undisturbed(network);
  const arcs: { readonly from: number; readonly to: number; readonly capacity: number }[] = [];
  for (let node = 0; node < ways.nodeCount; node += 1) {
    const element = ways.element[node]!;
    if (element >= 0 && standing.elements[element] !== 1) continue;
    arcs.push({
      from: 2 * node,
      to: 2 * node + 1,
      capacity: element < 0 ? endless : capacityOf(network, element),
    });
    for (let edge = ways.edgeStart[node]!; edge < ways.edgeStart[node + 1]!; edge += 1) {
      if (isOpen(ways, edge, standing))
        arcs.push({ from: 2 * node + 1, to: 2 * ways.edgeTo[edge]!, capacity: endless });
    }
  }
  const start = new Int32Array(2 * ways.nodeCount + 1);
  for (const { from, to } of arcs) {
    start[from + 1]! += 1;
    start[to + 1]! += 1;
  }
  for (let half = 0; half < 2 * ways.nodeCount; half += 1) start[half + 1]! += start[half]!;
  const next = start.slice();
  const flow = {
    start,
    to: new Int32Array(arcs.length * 2),
    back: new Int32Array(arcs.length * 2),
    capacity: new Int32Array(arcs.length * 2),
  };
  for (const { from, to, capacity } of arcs) {
    const [there, back] = [next[from]!, next[to]!];
    next[from]! += 1;
    next[to]! += 1;
    flow.to[there] = to;
    flow.to[back] = from;
    flow.back[there] = back;
    flow.back[back] = there;
    flow.capacity[there] = capacity;
  }
  return flow;
};

/** A shortest way on which capacity is left, as arcs by the half they lead to; -1 where the search doesn't get. */
const search = (flow: Flow, capacity: Int32Array, source: number): Int32Array => {
  const arcInto = new Int32Array(flow.start.length - 1).fill(-1);
  arcInto[source] = -2;
  const open = [source];
  for (const half of open)
    for (let arc = flow.start[half]!; arc < flow.start[half + 1]!; arc += 1) {
      const to = flow.to[arc]!;
      if (capacity[arc] === 0 || arcInto[to] !== -1) continue;
      arcInto[to] = arc;
      open.push(to);
    }
  return arcInto;
};

/**
 * Elements of a least cut between two points, unless it is as large as `most`: what a largest flow fills (Ford and
 * Fulkerson 1956). Undefined also where nothing that can fail lies between them, or they aren't joined.
 */
const leastCut = (
  ways: SegmentWays,
  flow: Flow,
  from: number,
  to: number,
  most: number,
): readonly number[] | undefined => {
  const capacity = flow.capacity.slice();
  const [source, sink] = [2 * from, 2 * (ways.points.length + to) + 1];
  let total = 0;
  for (;;) {
    const arcInto = search(flow, capacity, source);
    if (arcInto[sink] === -1) {
      if (total === 0) return undefined;
      const cut = new Set<number>();
      for (let node = 0; node < ways.nodeCount; node += 1)
        if (arcInto[2 * node] !== -1 && arcInto[2 * node + 1] === -1 && ways.element[node]! >= 0)
          cut.add(ways.element[node]!);
      return [...cut];
    }
    let room = endless;
    for (let half = sink; half !== source; half = flow.to[flow.back[arcInto[half]!]!]!)
      room = Math.min(room, capacity[arcInto[half]!]!);
    for (let half = sink; half !== source;) {
      const arc = arcInto[half]!;
      capacity[arc]! -= room;
      capacity[flow.back[arc]!]! += room;
      half = flow.to[flow.back[arc]!]!;
    }
    total += room;
    if (total >= most) return undefined;
  }
};

const elementsOf = (network: Network, cut: readonly number[]): readonly ElementRef[] =>
  cut
    .flatMap((element): ElementRef[] => {
      const bundle = network.bundles[element];
      return bundle === undefined
        ? [{ collection: 'tunnels', id: network.tunnelIds[element - network.firstTunnelElement]! }]
        : bundle.alive.map((id) => ({ collection: 'links', id }));
    })
    .sort((x, y) => (`${x.collection} ${x.id}` < `${y.collection} ${y.id}` ? -1 : 1));

/** The least cut between the first point and any other. */
const leastOf = (network: Network, ways: SegmentWays, isWide: boolean): readonly ElementRef[] | undefined => {
  const flow = flowOf(network, ways, isWide);
  let best: readonly ElementRef[] | undefined;
  for (let to = 1; to < ways.points.length && best?.length !== 1; to += 1) {
    const cut = leastCut(ways, flow, 0, to, best?.length ?? endless);
    if (cut !== undefined) best = elementsOf(network, cut);
  }
  return best;
};

/** How many pairs of the segment the failure of all these parts. */
const pairsParted = (network: Network, segment: Id, failed: readonly ElementRef[]): number => {
  const answer = casualtiesOf(network, failed);
  if (!answer.ok) throw new Error(`cables and tunnels can fail: ${JSON.stringify(answer.problems)}`);
  const { segments } = outageOf(network, failed, answer.casualties);
  return segments.find((one) => one.segment === segment)?.pairCount ?? 0;
};

/**
 * For every segment with joined points, few cables and tunnels that part it when they fail together: the least cut between
 * its first point and any other, cables of hosts left out. Trees and aggregates may have something in reserve: what is cut
 * of the ways open now counts only if it parts the segment in an outage, what is cut of all ways always does. Segments that
 * no such failure parts have none.
 */
export const smallestSegmentCuts = (design: DesignFacts): readonly SegmentCut[] => {
  const network = indexNetwork(design);
  const { blocked, unused } = undisturbed(network);
  const hasReserve = blocked.size > 0 || unused.size > 0;
  return segmentWays(network).flatMap((ways): SegmentCut[] => {
    const { segment } = ways;
    const candidates = [leastOf(network, ways, false), hasReserve ? leastOf(network, ways, true) : undefined];
    const [best] = candidates
      .filter((elements) => elements !== undefined)
      .map((elements) => ({ segment, elements, pairCount: pairsParted(network, segment, elements) }))
      .filter(({ pairCount }) => pairCount > 0)
      .sort((x, y) => x.elements.length - y.elements.length);
    return best === undefined ? [] : [best];
  });
};
