import { DirectedGraph } from 'graphology';
import { connectedComponents, stronglyConnectedComponents } from 'graphology-components';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { findStorms } from '#engine/flood/find-storms.ts';
import type { FloodGraph } from '#engine/flood/flood-graph.ts';
import { floodGraph } from '#engine/flood/flood-graph.ts';
import { tunnelSegments } from '#engine/flood/tunnel-segments.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import { largeDesign } from './large-design.ts';
import type { Times } from './measure.ts';
import { timesOf } from './measure.ts';

export interface Work {
  readonly what: string;
  readonly times: Times;
  /** What the product promises at 1,000 devices. */
  readonly boundMs?: number;
}

const read = (text: string): Design => {
  const parsed = parseDesign(JSON.parse(text));
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.problems.slice(0, 3)));
  return parsed.value;
};

/** One edit of each kind that people make most, as merge patches. */
const editsOf = (design: Design): readonly { readonly what: string; readonly patch: MergePatch }[] => {
  const tunnel = Object.keys(design.tunnels)[0]!;
  const host = Object.keys(design.devices).find((id) => design.devices[id]!.kind === 'host')!;
  const cable = Object.keys(design.links).find((id) => design.links[id]!.kind === 'cable')!;
  const forwarder = Object.keys(design.forwarders)[0]!;
  return [
    { what: 'a VNI', patch: { tunnels: { [tunnel]: { a: { vni: 16_000_000 } } } } },
    { what: "a host's name", patch: { devices: { [host]: { name: 'kiosk-7' } } } },
    { what: 'a cable taken out', patch: { links: { [cable]: null } } },
    {
      what: 'an isolation group',
      patch: { forwarders: { [forwarder]: { circuits: { access: { isolation: 'one' } } } } },
    },
    { what: 'a title', patch: { meta: { title: 'Renamed' } } },
  ];
};

const asGeneralGraph = (graph: FloodGraph): DirectedGraph => {
  const general = new DirectedGraph();
  for (let node = 0; node < graph.nodeCount; node += 1) general.addNode(node);
  for (let node = 0; node < graph.nodeCount; node += 1)
    for (let edge = graph.edgeStart[node]!; edge < graph.edgeStart[node + 1]!; edge += 1)
      general.mergeDirectedEdge(node, graph.edgeTo[edge]!);
  return general;
};

export interface Measured {
  readonly counts: Readonly<Record<string, number>>;
  readonly work: readonly Work[];
  /** Our storm detection in parts of what a general graph library takes on the same graph. */
  readonly ratios: readonly { readonly what: string; readonly ratio: number }[];
}

/** Times every part of a check of one design. */
export const measureEngine = (deviceCount: number): Measured => {
  const text = JSON.stringify(largeDesign(deviceCount));
  const fresh = (): Design => read(text);
  const indexed = () => indexNetwork(fresh());
  const flooded = () => {
    const network = indexed();
    floodGraph(network);
    return network;
  };
  const design = fresh();
  const network = indexNetwork(design);
  const graph = floodGraph(network);
  const findings = runRules(design);
  const storms = timesOf(flooded, (one) => findStorms(floodGraph(one)));
  const general = asGeneralGraph(graph);
  const ratio = (what: string, run: () => unknown) => ({
    what,
    ratio: storms.medianMs / timesOf(() => undefined, run).medianMs,
  });
  return {
    counts: {
      sites: Object.keys(design.sites).length,
      devices: Object.keys(design.devices).length,
      links: Object.keys(design.links).length,
      tunnels: Object.keys(design.tunnels).length,
      segments: Object.keys(design.segments).length,
      crossings: graph.nodeCount,
      edges: graph.edgeCount,
      findings: findings.length,
    },
    work: [
      { what: 'parse', times: timesOf(() => JSON.parse(text) as unknown, parseDesign) },
      { what: 'index', times: timesOf(fresh, indexNetwork) },
      { what: 'flood graph', times: timesOf(indexed, floodGraph) },
      { what: 'storms', times: storms },
      { what: 'segments of tunnels', times: timesOf(flooded, tunnelSegments) },
      { what: 'all rules from scratch', times: timesOf(fresh, runRules), boundMs: 100 },
      ...editsOf(design).map(({ what, patch }) => ({
        what: `all rules after an edit: ${what}`,
        times: timesOf(
          () => {
            const before = fresh();
            runRules(before);
            return before;
          },
          (before) => runRules(applyPatch(before, patch)),
        ),
        boundMs: 16,
      })),
    ],
    ratios: [
      ratio('connected components', () => connectedComponents(general)),
      ratio('strongly connected components', () => stronglyConnectedComponents(general)),
      ratio('building the graph and its strongly connected components', () =>
        stronglyConnectedComponents(asGeneralGraph(graph)),
      ),
    ],
  };
};
