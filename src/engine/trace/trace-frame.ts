import type { Design, ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import { indexNetwork } from '../network/index-network.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import type { Answer } from '../wire/problem.ts';
import { crossingGraph } from './crossing-graph.ts';
import type { KnownFinding } from './explanations.ts';
import { explainStorm } from './explanations.ts';
import { followerOf } from './follow-crossing.ts';
import type { Following } from './follower.ts';
import type { LearnedPlaces, StatedLearning } from './learned-places.ts';
import { learnedAsStated, learnedOfHost, nothingLearned } from './learned-places.ts';
import type { Probe, ProbeInput } from './probe.ts';
import { readProbe } from './probe.ts';
import { ownCut, sourceHop } from './source-hop.ts';
import { stormGrowth } from './storm-growth.ts';
import type { Surroundings } from './told-by.ts';
import type { Assumption, Trace } from './trace.ts';
import { traceTree } from './trace-tree.ts';
import { namesIn } from './trace-words.ts';
import { tracedFrame } from './traced-frame.ts';
import { traceSummary } from './trace-summary.ts';

export interface TraceOptions {
  /** Where bridges believe the destination to be, in place of what they would have learned: stale entries, say. */
  readonly learned?: readonly StatedLearning[];
  /** The design's findings, so that the trace can point at those that would have told. */
  readonly findings?: readonly KnownFinding[];
}

const learnedFor = (
  network: Network,
  { destination, packet }: Probe,
  stated: readonly StatedLearning[] | undefined,
): LearnedPlaces => {
  if (destination.kind !== 'host') return nothingLearned;
  if (stated !== undefined) return learnedAsStated(network, stated);
  if (!destination.learned) return nothingLearned;
  return learnedOfHost(network, destination.host, packet.kind === 'ip' ? packet.version : 'other');
};

const segmentOf = ({ design }: Network, { source }: Probe): Pick<Surroundings, 'segment'> => {
  const device = 'host' in source ? design.devices[source.host] : undefined;
  const id = device?.kind === 'host' ? device.segment : undefined;
  return id === undefined ? {} : { segment: { id, protocols: entryOf(design.segments, id).protocols ?? [] } };
};

/**
 * Follows one frame through a design: every hop of every copy with its bytes and the decision taken there, and how each copy
 * ends. Refuses a probe that names what the design doesn't hold, or that contradicts itself.
 */
export const traceFrame = (design: Design, input: ProbeInput, options: TraceOptions = {}): Answer<Trace> => {
  const network = indexNetwork(design);
  const read = readProbe(network, input);
  if (!read.ok) return read;
  const { probe } = read;
  const own = ownCut(network, probe);
  const assumptions = new Map<string, Assumption>();
  const assume = (code: Assumption['code'], element: ElementRef, words: string): void => {
    assumptions.set(`${code} ${element.collection} ${element.id}`, { code, element, words });
  };
  const frame = tracedFrame(network, probe, own.pieces?.[0]?.packetBytes);
  const following: Following = {
    network,
    frame,
    learned: learnedFor(network, probe, options.learned),
    assume,
  };
  const follower = followerOf(following);
  const source = sourceHop(following, follower, probe, own);
  const graph = crossingGraph(source.onward, follower.hopOf);
  const growth = stormGrowth(graph);
  const explains = growth === undefined ? [] : explainStorm(growth.cycle, options.findings);
  const storm = growth === undefined || explains.length === 0 ? growth : { ...growth, explains };
  const names = namesIn(network.design);
  const { steps, deliveries } = traceTree(source, graph, {
    names,
    around: {
      association: (tunnel: Id) => network.design.tunnels[tunnel]?.association,
      ...segmentOf(network, probe),
    },
    ...(options.findings === undefined ? {} : { findings: options.findings }),
  });
  return {
    ok: true,
    steps,
    deliveries,
    ...(storm === undefined ? {} : { storm }),
    assumptions: [...assumptions.values()],
    words: traceSummary(names, probe, steps, deliveries, storm),
  };
};
