import type { Id } from '../model/scalars.ts';
import { outerVlan, untagged } from '../network/frame-tags.ts';
import { entryOf } from '../network/network.ts';
import type { FloodGraph } from './flood-graph.ts';
import type { ClassSet } from './frame-classes.ts';
import { allClasses, classBit, classesIn, frameClasses } from './frame-classes.ts';
import { segmentReaches } from './segment-nodes.ts';
import type { FloodStep, Storm } from './storm.ts';
import { strongComponents } from './strong-components.ts';

/** The crossing of a node, in a design's own names. */
export const stepOf = (graph: FloodGraph, node: number): FloodStep => {
  const { network } = graph;
  const element = graph.element[node]!;
  const bundle = network.bundles[element];
  const vlan = outerVlan(graph.tags[node]!);
  return {
    ...(bundle === undefined
      ? { collection: 'tunnels', id: network.tunnelIds[element - network.firstTunnelElement]! }
      : { collection: 'links', id: (bundle.alive[0] ?? bundle.cables[0])! }),
    direction: graph.direction[node] === 0 ? 'a-to-b' : 'b-to-a',
    ...(graph.tags[node] === untagged ? {} : { vlan }),
  };
};

/** Enough to look from every node of any storm that people draw, and a bound for those that nobody could read anyway. */
const edgesLookedAt = 400_000;

/** A shortest cycle among nodes of one component; the first found among equals, so that the same design shows the same one. */
const shortestCycle = (
  graph: FloodGraph,
  nodes: readonly number[],
  isIn: (node: number) => boolean,
  classes: ClassSet,
): readonly number[] => {
  let best: readonly number[] | undefined;
  let budget = edgesLookedAt;
  const cameFrom = new Map<number, number>();
  for (const start of nodes) {
    if (best !== undefined && (best.length === 1 || budget <= 0)) break;
    cameFrom.clear();
    let layer: readonly number[] = [start];
    for (let depth = 1; layer.length > 0 && (best === undefined || depth < best.length); depth += 1) {
      const next: number[] = [];
      for (const node of layer)
        for (let edge = graph.edgeStart[node]!; edge < graph.edgeStart[node + 1]!; edge += 1) {
          budget -= 1;
          const target = graph.edgeTo[edge]!;
          if ((graph.edgeClasses[edge]! & classes) === 0 || !isIn(target)) continue;
          if (target === start) {
            const cycle = [node];
            while (cycle[0] !== start) cycle.unshift(cameFrom.get(cycle[0]!)!);
            if (best === undefined || cycle.length < best.length) best = cycle;
          } else if (!cameFrom.has(target)) {
            cameFrom.set(target, node);
            next.push(target);
          }
        }
      if (best !== undefined && depth >= best.length) break;
      layer = next;
    }
  }
  return best!;
};

/** Nodes of one storm, found for one set of classes. */
interface Cyclic {
  readonly nodes: readonly number[];
  readonly classes: ClassSet;
}

/** Components are found once where nothing tells classes of frames apart, class by class otherwise. */
const cyclicParts = (graph: FloodGraph): readonly Cyclic[] => {
  if (!graph.hasFilters)
    return strongComponents(graph, allClasses).cyclic.map((nodes) => ({ nodes, classes: allClasses }));
  const parts = new Map<string, Cyclic>();
  for (const frame of frameClasses)
    for (const nodes of strongComponents(graph, classBit(frame)).cyclic) {
      const key = nodes.join(' ');
      parts.set(key, { nodes, classes: (parts.get(key)?.classes ?? 0) | classBit(frame) });
    }
  return [...parts.values()];
};

/** Puts together what goes round the same elements: the two directions of a ring, and several VLANs on the same cables. */
const joinedByElements = (graph: FloodGraph, parts: readonly Cyclic[]): readonly (readonly Cyclic[])[] => {
  const parent = parts.map((_part, i) => i);
  const root = (i: number): number => {
    let at = i;
    while (parent[at] !== at) at = parent[at]!;
    return at;
  };
  const partOf = new Map<number, number>();
  parts.forEach(({ nodes }, i) => {
    for (const node of nodes) {
      const element = graph.element[node]!;
      const other = partOf.get(element);
      if (other === undefined) partOf.set(element, i);
      else parent[Math.max(root(i), root(other))] = Math.min(root(i), root(other));
    }
  });
  const groups = new Map<number, Cyclic[]>();
  parts.forEach((part, i) => groups.set(root(i), [...(groups.get(root(i)) ?? []), part]));
  return [...groups.values()];
};

const multiplies = (graph: FloodGraph, { nodes, classes }: Cyclic): boolean => {
  const inside = new Set(nodes);
  return nodes.some((node) => {
    let stays: ClassSet = 0;
    for (let edge = graph.edgeStart[node]!; edge < graph.edgeStart[node + 1]!; edge += 1) {
      if (!inside.has(graph.edgeTo[edge]!)) continue;
      const open = graph.edgeClasses[edge]! & classes;
      if ((open & stays) !== 0) return true;
      stays |= open;
    }
    return false;
  });
};

const describe = (graph: FloodGraph, parts: readonly Cyclic[]): Storm => {
  const { network, forwarding } = graph;
  const { design } = network;
  const nodes = [...new Set(parts.flatMap((part) => part.nodes))];
  const elements = [...new Set(nodes.map((node) => graph.element[node]!))];
  const bundles = elements.flatMap((element) => network.bundles[element] ?? []);
  const tunnels = elements
    .flatMap((element) => network.tunnelIds[element - network.firstTunnelElement] ?? [])
    .sort();
  const cables = bundles.flatMap(({ alive }) => alive).sort();
  const devices = [...new Set(nodes.map((node) => forwarding.places.all[graph.into[node]!]!.device))].sort();
  const inSomePart = new Set(nodes);
  const segments: Id[] = segmentReaches(graph)
    .filter(({ nodes: reached }) => reached.some((node) => inSomePart.has(node)))
    .map(({ segment }) => segment);
  const cycles = parts.map(({ nodes: own, classes }) => {
    const inside = new Set(own);
    // One class: a cycle of edges open to different ones is none that a frame goes round.
    return shortestCycle(graph, own, (node) => inside.has(node), classes & -classes);
  });
  const shortest = cycles.reduce((a, b) => (b.length < a.length ? b : a));
  return {
    key: [...tunnels, ...cables].join(' '),
    steps: shortest.map((node) => stepOf(graph, node)),
    tunnels,
    cables,
    devices,
    sites: [...new Set(devices.map((id) => entryOf(design.devices, id).site))].sort(),
    segments,
    copies: parts.some((part) => multiplies(graph, part)) ? 'multiply' : 'circulate',
    frames: classesIn(parts.reduce((set, { classes }) => set | classes, 0)),
  };
};

// By the identity of the graph: nothing of a storm changes while frames go the same ways.
const known = new WeakMap<object, readonly Storm[]>();

/**
 * Every storm that the design allows: wherever the flood graph has a cycle, a broadcast that gets there never ends. In
 * order of their elements; [] where there is none.
 */
export const findStorms = (graph: FloodGraph): readonly Storm[] => {
  const before = known.get(graph.identity);
  if (before !== undefined) return before;
  const storms = joinedByElements(graph, cyclicParts(graph))
    .map((parts) => describe(graph, parts))
    .sort((a, b) => (a.key < b.key ? -1 : a.key > b.key ? 1 : 0));
  known.set(graph.identity, storms);
  return storms;
};
