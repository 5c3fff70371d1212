import type { Network } from '../network/network.ts';
import { perNetwork } from '../network/network.ts';
import type { SegmentWays } from './segment-ways.ts';
import { isOpen, segmentWays } from './segment-ways.ts';
import type { Change, Standing } from './standing.ts';
import { undisturbed } from './standing.ts';

/** What one point's frames get to, as a tree in the order of a depth-first walk. */
interface Spread {
  readonly order: Int32Array;
  /** By node: its place in `order`, -1 where frames don't get. */
  readonly position: Int32Array;
  /** By place in `order`: nodes of the branch that begins there, itself included. */
  readonly branchSize: Int32Array;
}

/** The ways of a segment with what each of its points reaches while nothing has failed. */
export interface SegmentSpread {
  readonly ways: SegmentWays;
  readonly spreads: readonly Spread[];
  /** By point: how many others it reaches, and how many reach it, together. */
  readonly joined: Int32Array;
}

const spreadFrom = (ways: SegmentWays, source: number, standing: Standing): Spread => {
  const { edgeStart, edgeTo } = ways;
  const position = new Int32Array(ways.nodeCount).fill(-1);
  const order: number[] = [];
  const size: number[] = [];
  const path: { readonly node: number; edge: number }[] = [];
  const enter = (node: number): void => {
    position[node] = order.length;
    order.push(node);
    size.push(1);
    path.push({ node, edge: edgeStart[node]! });
  };
  enter(source);
  for (let top = path.at(-1); top !== undefined; top = path.at(-1)) {
    if (top.edge === edgeStart[top.node + 1]!) {
      path.pop();
      const above = path.at(-1);
      if (above !== undefined) size[position[above.node]!]! += size[position[top.node]!]!;
      continue;
    }
    const { edge } = top;
    top.edge += 1;
    const to = edgeTo[edge]!;
    if (position[to] === -1 && isOpen(ways, edge, standing)) enter(to);
  }
  return { order: Int32Array.from(order), position, branchSize: Int32Array.from(size) };
};

const joinedBy = (count: number, spreads: readonly Spread[]): Int32Array => {
  const joined = new Int32Array(count);
  for (let from = 0; from < count; from += 1)
    for (let to = 0; to < count; to += 1)
      if (from !== to && spreads[from]!.position[count + to]! >= 0) {
        joined[from]! += 1;
        joined[to]! += 1;
      }
  return joined;
};

/** Of every segment, what its points reach while nothing has failed. */
export const segmentSpreads = perNetwork((network): readonly SegmentSpread[] => {
  const standing = undisturbed(network);
  return segmentWays(network).map((ways) => {
    const spreads = ways.points.map((_point, source) => spreadFrom(ways, source, standing));
    return { ways, spreads, joined: joinedBy(ways.points.length, spreads) };
  });
});

/** By node: 1 where the frames of a point get. */
const reachedFrom = (ways: SegmentWays, source: number, standing: Standing): Uint8Array => {
  const { edgeStart, edgeTo } = ways;
  const reached = new Uint8Array(ways.nodeCount);
  const open = [source];
  reached[source] = 1;
  for (let node = open.pop(); node !== undefined; node = open.pop())
    for (let edge = edgeStart[node]!; edge < edgeStart[node + 1]!; edge += 1) {
      const to = edgeTo[edge]!;
      if (reached[to] === 1 || !isOpen(ways, edge, standing)) continue;
      reached[to] = 1;
      open.push(to);
    }
  return reached;
};

/** Which points the frames of a point no longer get to, in order. */
type LostTargets = readonly number[];

/** Branches that lost elements cut off, as nodes at which they begin; a branch inside another is left out. */
const cutBranches = (ways: SegmentWays, { position, branchSize }: Spread, lost: readonly number[]) => {
  const starts: number[] = [];
  for (const element of lost)
    for (const node of ways.nodesByElement.get(element) ?? [])
      if (position[node]! >= 0) starts.push(position[node]!);
  starts.sort((a, b) => a - b);
  const branches: number[] = [];
  let nodes = 0;
  let end = -1;
  for (const start of starts) {
    if (start < end) continue;
    branches.push(start);
    end = start + branchSize[start]!;
    nodes += branchSize[start]!;
  }
  return { branches, nodes };
};

/** Points that a spread reached and that are cut off with the lost elements, after all that can has found another open way. */
const lostTargets = (
  ways: SegmentWays,
  spread: Spread,
  source: number,
  lost: readonly number[],
  standing: Standing,
): LostTargets => {
  const { order, position, branchSize } = spread;
  const { branches, nodes } = cutBranches(ways, spread, lost);
  if (nodes === 0) return [];
  // Where little is left, walking that is less work than looking for ways back into what is cut.
  if (nodes * 2 > order.length) return missing(ways, spread, reachedFrom(ways, source, standing), source);
  const restored = new Set<number>();
  const isCut = (node: number): boolean =>
    position[node]! >= 0 && isInBranch(branches, branchSize, position[node]!) && !restored.has(node);
  const found: number[] = [];
  eachOf(branches, branchSize, (at) => {
    const node = order[at]!;
    const crossed = ways.element[node]!;
    if (crossed >= 0 && standing.elements[crossed] !== 1) return;
    for (let back = ways.backStart[node]!; back < ways.backStart[node + 1]!; back += 1) {
      const from = ways.backFrom[back]!;
      if (position[from]! >= 0 && !isCut(from) && isOpen(ways, ways.backEdge[back]!, standing)) {
        found.push(node);
        return;
      }
    }
  });
  for (const node of found) restored.add(node);
  for (const node of found)
    for (let edge = ways.edgeStart[node]!; edge < ways.edgeStart[node + 1]!; edge += 1) {
      const to = ways.edgeTo[edge]!;
      if (!isCut(to) || !isOpen(ways, edge, standing)) continue;
      restored.add(to);
      found.push(to);
    }
  const count = ways.points.length;
  const targets: number[] = [];
  eachOf(branches, branchSize, (at) => {
    const node = order[at]!;
    if (isTarget(count, source, node) && !restored.has(node)) targets.push(node - count);
  });
  return targets.sort((x, y) => x - y);
};

const eachOf = (branches: readonly number[], branchSize: Int32Array, take: (at: number) => void): void => {
  for (const start of branches) for (let at = start; at < start + branchSize[start]!; at += 1) take(at);
};

/** Whether a place in the order lies in one of the branches, which come in order and apart from each other. */
const isInBranch = (branches: readonly number[], branchSize: Int32Array, at: number): boolean => {
  let [low, high] = [0, branches.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (branches[middle]! <= at) low = middle + 1;
    else high = middle;
  }
  const start = branches[low - 1];
  return start !== undefined && at < start + branchSize[start]!;
};

const isTarget = (count: number, source: number, node: number): boolean =>
  node >= count && node < count * 2 && node !== count + source;

/** Points that a spread reached and that aren't reached now. */
const missing = (ways: SegmentWays, before: Spread, now: Uint8Array, source: number): LostTargets => {
  const count = ways.points.length;
  const targets: number[] = [];
  for (let node = count; node < count * 2; node += 1)
    if (before.position[node]! >= 0 && now[node] === 0 && isTarget(count, source, node))
      targets.push(node - count);
  return targets;
};

/** For each point of a segment, those that it reached and no longer does; points that reach all that they did are left out. */
export const segmentLosses = (
  { ways, spreads }: SegmentSpread,
  change: Change,
): ReadonlyMap<number, LostTargets> => {
  const losses = new Map<number, LostTargets>();
  spreads.forEach((spread, source) => {
    const targets = change.isLossOnly
      ? lostTargets(ways, spread, source, change.lost, change.standing)
      : missing(ways, spread, reachedFrom(ways, source, change.standing), source);
    if (targets.length > 0) losses.set(source, targets);
  });
  return losses;
};

const spreadsByElement = perNetwork((network): ReadonlyMap<number, readonly SegmentSpread[]> => {
  const byElement = new Map<number, SegmentSpread[]>();
  for (const spread of segmentSpreads(network))
    for (const element of spread.ways.nodesByElement.keys()) {
      const list = byElement.get(element);
      if (list === undefined) byElement.set(element, [spread]);
      else list.push(spread);
    }
  return byElement;
});

/** The segments whose ways a change touches, in order of id. */
export const touchedSpreads = (network: Network, change: Change): readonly SegmentSpread[] => {
  const byElement = spreadsByElement(network);
  const touched = new Set<SegmentSpread>();
  for (const element of [...change.lost, ...change.gained])
    for (const spread of byElement.get(element) ?? []) touched.add(spread);
  if (change.changedPlaces.length > 0)
    for (const spread of segmentSpreads(network))
      if (change.changedPlaces.some((place) => spread.ways.places.has(place))) touched.add(spread);
  return [...touched].sort((x, y) => (x.ways.segment < y.ways.segment ? -1 : 1));
};
