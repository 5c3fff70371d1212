import { applyPatch } from '../model/merge-patch.ts';
import type { Id } from '../model/scalars.ts';
import { landingOf, tunnelPath } from '../network/association-path.ts';
import { indexNetwork } from '../network/index-network.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { findStorms } from './find-storms.ts';
import type { FloodGraph } from './flood-graph.ts';
import { floodGraph } from './flood-graph.ts';
import { allClasses, classBit, frameClasses } from './frame-classes.ts';
import { placesOf } from './places.ts';
import { removalPatch } from './removal-patch.ts';
import type { Storm } from './storm.ts';
import { strongComponents } from './strong-components.ts';

/** What to take out so that a storm can't be. */
export interface Cuts {
  readonly tunnels: readonly Id[];
  readonly cables: readonly Id[];
  /** True where fewer can't do: a single element. Nothing is claimed of larger cuts. */
  readonly isSmallest: boolean;
}

interface Element {
  readonly index: number;
  readonly ids: readonly Id[];
  readonly kind: 'tunnels' | 'cables';
  readonly latencyUs: number;
  readonly rateBps: number;
}

/** What isn't known counts as worst, so that a known good way is kept before it. */
const tunnelQuality = (
  network: Network,
  id: Id,
): { readonly latencyUs: number; readonly rateBps: number } => {
  const path = tunnelPath(network, id);
  if (!path.ok) return { latencyUs: Infinity, rateBps: 0 };
  const transport = entryOf(network.design.transports, path.transport);
  const rates = [path.landingA, path.landingB].flatMap((landing) => {
    const { rateUpBps, rateDownBps } = landingOf(network, landing);
    return [rateUpBps, rateDownBps];
  });
  const known = [transport.rateBps, ...rates].filter((rate) => rate !== undefined);
  return {
    latencyUs: transport.latencyUs ?? Infinity,
    rateBps: known.length === 0 ? 0 : Math.min(...known),
  };
};

const elementsOf = (network: Network, storm: Storm): readonly Element[] => {
  const bundles = new Set(storm.cables.map((id) => network.bundleByCable.get(id)!));
  const cables = [...bundles].map((bundle): Element => {
    const speeds = [bundle.a, bundle.b].map(
      ({ device, port }) => entryOf(network.design.devices, device).ports[port]?.speedBps ?? 0,
    );
    return {
      index: bundle.index,
      ids: bundle.alive,
      kind: 'cables',
      latencyUs: 0,
      rateBps: Math.min(...speeds) * bundle.alive.length,
    };
  });
  const tunnels = storm.tunnels.map((id): Element => ({
    index: network.firstTunnelElement + placesOf(network).tunnelIndex.get(id)!,
    ids: [id],
    kind: 'tunnels',
    ...tunnelQuality(network, id),
  }));
  return [...cables, ...tunnels].sort(
    (a, b) =>
      (a.latencyUs === b.latencyUs ? 0 : a.latencyUs - b.latencyUs) ||
      b.rateBps - a.rateBps ||
      (a.ids[0]! < b.ids[0]! ? -1 : 1),
  );
};

/** By element, the places that it joins. */
const placesJoined = (
  graph: FloodGraph,
  elements: readonly Element[],
): ReadonlyMap<number, readonly number[]> => {
  const joined = new Map<number, Set<number>>(elements.map(({ index }) => [index, new Set()]));
  for (let node = 0; node < graph.nodeCount; node += 1)
    if (graph.into[node]! >= 0) joined.get(graph.element[node]!)?.add(graph.into[node]!);
  return new Map([...joined].map(([index, places]) => [index, [...places]]));
};

/** Elements outside a maximum spanning forest that takes the best first. */
const outsideForest = (graph: FloodGraph, elements: readonly Element[]): readonly Element[] => {
  const parent = new Map<number, number>();
  const root = (place: number): number => {
    let at = place;
    while (parent.has(at)) at = parent.get(at)!;
    return at;
  };
  const joined = placesJoined(graph, elements);
  return elements.filter(({ index }) => {
    const [first, ...rest] = joined.get(index)!;
    if (first === undefined) return false;
    let isClosing = rest.length === 0;
    for (const place of rest) {
      const [a, b] = [root(first), root(place)];
      if (a === b) isClosing = true;
      else parent.set(Math.max(a, b), Math.min(a, b));
    }
    return isClosing;
  });
};

/** Taking every one of so many back in by turns is still instant; beyond it nobody would read the list. */
const cutsReconsidered = 48;

/** Without those that turn out not to matter, such as legs that isolation keeps apart anyway. */
const needed = (
  graph: FloodGraph,
  storm: readonly Element[],
  cuts: readonly Element[],
): readonly Element[] => {
  if (cuts.length > cutsReconsidered) return cuts;
  const inStorm = new Set(storm.map(({ index }) => index));
  const left = new Set(cuts);
  const hasCycle = (): boolean => {
    const out = new Set([...left].map(({ index }) => index));
    const isLeftOut = (node: number): boolean =>
      !inStorm.has(graph.element[node]!) || out.has(graph.element[node]!);
    const sets = graph.hasFilters ? frameClasses.map(classBit) : [allClasses];
    return sets.some((classes) => strongComponents(graph, classes, isLeftOut).cyclic.length > 0);
  };
  for (const element of cuts) {
    left.delete(element);
    if (hasCycle()) left.add(element);
  }
  return [...left];
};

/**
 * What to take out to end a storm, keeping what is fast and wide: what lies outside a maximum spanning forest that prefers
 * low latency and then high capacity, without what isn't needed, checked by looking for storms in the design without it.
 */
export const suggestCuts = (network: Network, storm: Storm): Cuts => {
  let current = network;
  let found: readonly Storm[] = [storm];
  const cut = { tunnels: [] as Id[], cables: [] as Id[] };
  const concerned = new Set([...storm.tunnels, ...storm.cables]);
  while (found.length > 0) {
    const graph = floodGraph(current);
    for (const left of found) {
      const elements = elementsOf(current, left);
      const cuts = needed(graph, elements, outsideForest(graph, elements));
      // VLANs that two forwarders lead into each other go round on one cable, which no forest leaves out.
      for (const element of cuts.length > 0 ? cuts : elements.slice(-1))
        cut[element.kind].push(...element.ids);
    }
    const design = applyPatch(network.design, removalPatch(network, cut));
    current = indexNetwork(design);
    // Spanning tree may open other ways once something is gone; each round takes at least one element out.
    found = findStorms(floodGraph(current)).filter(({ tunnels, cables }) =>
      [...tunnels, ...cables].some((id) => concerned.has(id)),
    );
  }
  return {
    tunnels: [...new Set(cut.tunnels)].sort(),
    cables: [...new Set(cut.cables)].sort(),
    isSmallest:
      cut.tunnels.length + new Set(cut.cables.map((id) => network.bundleByCable.get(id))).size === 1,
  };
};
