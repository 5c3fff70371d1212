import { DirectedGraph } from 'graphology';
import { connectedComponents, stronglyConnectedComponents } from 'graphology-components';
import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch, inversePatch } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { findStorms } from '#engine/flood/find-storms.ts';
import type { FloodGraph } from '#engine/flood/flood-graph.ts';
import { floodGraph } from '#engine/flood/flood-graph.ts';
import { tunnelSegments } from '#engine/flood/tunnel-segments.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { everySingleFailure } from '#engine/outage/every-single-failure.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import { traceFrame } from '#engine/trace/trace-frame.ts';
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

interface Edit {
  readonly what: string;
  /** Another value each time, so that nothing is known of the design after it. */
  readonly patch: (n: number) => MergePatch;
}

/** One edit of each kind that people make most, in a place where it matters. */
const editsOf = (design: Design): readonly Edit[] => {
  const tunnel = Object.keys(design.tunnels)[0]!;
  const host = Object.keys(design.devices).find((id) => design.devices[id]!.kind === 'host')!;
  const switches = Object.keys(design.devices).filter((id) => design.devices[id]!.kind === 'switch');
  const accessSwitch = switches.find((id) =>
    Object.values(design.devices[id]!.ports).some(({ mode }) => mode === 'access'),
  )!;
  const accessPort = Object.entries(design.devices[accessSwitch]!.ports).find(
    ([, { mode }]) => mode === 'access',
  )![0];
  const cables = Object.keys(design.links).filter((id) => design.links[id]!.kind === 'cable');
  const forwarder = Object.keys(design.forwarders)[0]!;
  const transport = Object.keys(design.transports)[0]!;
  const segment = Object.keys(design.segments)[0]!;
  const association = Object.keys(design.associations)[0]!;
  const { site } = design.devices[host]!;
  const otherSite = Object.keys(design.sites).find((id) => id !== site)!;
  const plug = (device: string) => ({
    device,
    port: Object.keys(design.devices[device]!.ports).at(-1)!,
  });
  return [
    { what: 'a VNI', patch: (n) => ({ tunnels: { [tunnel]: { a: { vni: 16_000_000 + n } } } }) },
    { what: "a host's name", patch: (n) => ({ devices: { [host]: { name: `kiosk-${n}` } } }) },
    {
      what: "a port's VLAN",
      patch: (n) => ({ devices: { [accessSwitch]: { ports: { [accessPort]: { vlan: 2_000 + n } } } } }),
    },
    {
      what: 'a cable added',
      patch: (n) => ({
        links: { [`cb-new-${n}`]: { kind: 'cable', a: plug(switches[0]!), b: plug(switches.at(-1)!) } },
      }),
    },
    { what: 'a cable taken out', patch: (n) => ({ links: { [cables[n % cables.length]!]: null } }) },
    {
      what: 'a host added',
      patch: (n) => ({
        devices: { [`h-new-${n}`]: { kind: 'host', site, name: `new-${n}`, ports: {} } },
      }),
    },
    {
      what: 'a host to another site',
      patch: (n) => ({ devices: { [host]: { site: otherSite, name: `moved-${n}` } } }),
    },
    { what: "a transport's MTU", patch: (n) => ({ transports: { [transport]: { mtu: 1_380 + n } } }) },
    {
      what: 'an isolation group',
      patch: (n) => ({ forwarders: { [forwarder]: { circuits: { access: { isolation: `g${n}` } } } } }),
    },
    { what: "a segment's MTU", patch: (n) => ({ segments: { [segment]: { mtu: 1_300 + n } } }) },
    {
      what: 'an IKE lifetime',
      patch: (n) => ({ associations: { [association]: { a: { ikeLifetimeSeconds: 3_600 + n } } } }),
    },
    { what: 'a title', patch: (n) => ({ meta: { title: `Issue ${n}` } }) },
    { what: 'a device moved', patch: (n) => ({ layout: { devices: { [host]: { x: 40 * n, y: 0 } } } }) },
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

/** A broadcast from a host of the segment with the most sites, on a network that is known already. */
const traced = (design: Design): Times => {
  const siteCount = (id: string): number => Object.keys(design.segments[id]!.sites).length;
  const [segment] = Object.keys(design.segments).sort((a, b) => siteCount(b) - siteCount(a));
  const host = indexNetwork(design).hostsBySegment.get(segment!)![0]!;
  return timesOf(
    () => ({
      source: { host },
      destination: { kind: 'broadcast' as const },
      packet: { kind: 'non-ip' as const, frameBytes: 64, etherType: 0x0806 },
    }),
    (probe) => {
      const traced = traceFrame(design, probe);
      if (!traced.ok) throw new Error(JSON.stringify(traced.problems));
    },
  );
};

/** Checks of a design in which one edit was made, each time after the one before was taken back and checked. */
const afterEdits = (design: Design): readonly Work[] =>
  editsOf(design).map(({ what, patch }) => {
    let current = design;
    let undo: MergePatch = {};
    return {
      what: `all rules after an edit: ${what}`,
      times: timesOf(
        (run) => {
          current = applyPatch(current, undo);
          runRules(current);
          const edit = patch(run + 2);
          undo = inversePatch(current, edit);
          return edit;
        },
        (edit) => {
          current = applyPatch(current, edit);
          return runRules(current);
        },
      ),
      boundMs: 16,
    };
  });

export interface Measured {
  readonly counts: Readonly<Record<string, number>>;
  readonly work: readonly Work[];
  /** Our storm detection in parts of what a general graph library takes on the same graph. */
  readonly ratios: readonly { readonly what: string; readonly ratio: number }[];
}

/** Times every part of a check of one design. */
export const measureEngine = (measured: Design): Measured => {
  const text = JSON.stringify(measured);
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
      ...afterEdits(design),
      { what: 'a broadcast traced', times: traced(design), boundMs: 5 },
      ...(Object.keys(design.devices).length > 1_000
        ? []
        : [{ what: 'every single failure', times: timesOf(fresh, everySingleFailure), boundMs: 2_000 }]),
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
