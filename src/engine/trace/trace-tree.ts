import type { FloodStep } from '../flood/storm.ts';
import type { ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import type { CrossingGraph } from './crossing-graph.ts';
import type { KnownFinding } from './explanations.ts';
import { explainDrop, explainStorm } from './explanations.ts';
import type { Hop } from './follower.ts';
import { crossingKey, tagsOf } from './follower.ts';
import type { Trace, TraceStep, Verdict } from './trace.ts';
import type { Names } from './trace-words.ts';
import { decisionWords, reasonWords } from './trace-words.ts';

/** Beyond this many hops a way that is followed already isn't followed again; every way is followed once. */
export const mostRepeatedSteps = 2_000;

interface TreeContext {
  readonly names: Names;
  readonly association: (tunnel: Id) => Id | undefined;
  readonly findings?: readonly KnownFinding[];
}

interface Open {
  readonly hop: Hop;
  readonly parent: number;
}

/** The hops of every copy, nearest first. In a storm, and where copies are very many, each way is followed once. */
export const traceTree = (
  source: Hop,
  graph: CrossingGraph,
  { names, association, findings }: TreeContext,
): Pick<Trace, 'steps' | 'deliveries'> => {
  const steps: TraceStep[] = [];
  const first = new Map<number, number>();
  const arrivals = new Map<Id, number[]>();

  const cycleTo = (ancestor: number, from: number): readonly FloodStep[] | undefined => {
    const cycle: FloodStep[] = [];
    for (let at: number | undefined = from; at !== undefined; at = steps[at]!.parent) {
      const { crossing } = steps[at]!;
      if (crossing !== undefined) cycle.unshift(crossing);
      if (at === ancestor) return cycle;
    }
    return undefined;
  };
  const cutBefore = (parent: number): number | undefined => {
    for (
      let at: number | undefined = parent < 0 ? undefined : parent;
      at !== undefined;
      at = steps[at]!.parent
    )
      if (steps[at]!.pieces !== undefined) return at;
    return undefined;
  };
  const arrived = (to: ElementRef, at: number | undefined): Verdict => {
    const who = names.element(to);
    if (at === undefined) return { code: 'delivered', to, words: `${who} receives it` };
    const pieces = steps[at]!.pieces!;
    return {
      code: 'fragmented',
      to,
      at,
      pieces,
      words: `${who} receives it, cut underway into ${pieces.length} pieces of ${pieces.map(({ packetBytes }) => packetBytes).join(', ')} bytes`,
    };
  };
  const verdictOf = (hop: Hop, index: number, parent: number): Verdict | undefined => {
    const { end } = hop;
    if (end === undefined) return undefined;
    if (end.code === 'delivered') {
      arrivals.set(end.to.id, [...(arrivals.get(end.to.id) ?? []), index]);
      return arrived(end.to, hop.pieces === undefined ? cutBefore(parent) : index);
    }
    const explains = end.byDesign ? [] : explainDrop(end.reason, association, findings);
    return {
      code: 'dropped',
      reason: end.reason,
      byDesign: end.byDesign,
      words: reasonWords(names, end.reason),
      ...(explains.length === 0 ? {} : { explains }),
    };
  };
  const againVerdict = (sameAs: number, parent: number, isEndless: boolean): Verdict => {
    if (!isEndless)
      return { code: 'repeats', sameAs, words: `One more copy, on the way that hop ${sameAs} takes` };
    const cycle = cycleTo(sameAs, parent);
    const explains = cycle === undefined ? [] : explainStorm(cycle, findings);
    return {
      code: 'circulating',
      sameAs,
      ...(cycle === undefined ? {} : { cycle }),
      words:
        cycle === undefined
          ? `One more copy of those that never end, on the way that hop ${sameAs} takes`
          : `It comes round to where it was on hop ${sameAs}, and so for ever`,
      ...(explains.length === 0 ? {} : { explains }),
    };
  };
  const add = (hop: Hop, parent: number, verdict: Verdict | undefined): void => {
    const { crossing, step, from, to, elements, facts, wire, pieces } = hop;
    steps.push({
      index: steps.length,
      ...(parent < 0 ? {} : { parent }),
      ...(from === undefined ? {} : { from }),
      ...(to === undefined ? {} : { to }),
      elements,
      ...(step === undefined ? {} : { crossing: step }),
      tags: tagsOf(crossing),
      ...(crossing === undefined || crossing.hopLimit === 0 ? {} : { hopLimit: crossing.hopLimit }),
      decisions: facts.map((fact) => ({ ...fact, words: decisionWords(names, fact) })),
      ...(wire === undefined ? {} : { wire }),
      ...(pieces === undefined ? {} : { pieces }),
      ...(verdict === undefined ? {} : { verdict }),
    });
  };

  const queue: Open[] = [{ hop: source, parent: -1 }];
  for (let i = 0; i < queue.length; i += 1) {
    const { hop, parent } = queue[i]!;
    const index = steps.length;
    const key = hop.crossing === undefined ? undefined : crossingKey(hop.crossing);
    const before = key === undefined ? undefined : first.get(key);
    const isEndless = key !== undefined && !graph.copies.has(key);
    if (before !== undefined && (isEndless || index >= mostRepeatedSteps)) {
      add(hop, parent, againVerdict(before, parent, isEndless));
      continue;
    }
    if (key !== undefined && before === undefined) first.set(key, index);
    add(hop, parent, verdictOf(hop, index, parent));
    const targets = key === undefined ? graph.starts : hop.onward.map((crossing) => crossingKey(crossing));
    for (const target of hop.end === undefined ? targets : [])
      queue.push({ hop: graph.hops.get(target)!, parent: index });
    for (const stopped of hop.stopped) queue.push({ hop: stopped, parent: index });
  }
  return { steps, deliveries: deliveriesOf(source, graph, arrivals) };
};

const deliveriesOf = (
  source: Hop,
  { hops, copies }: CrossingGraph,
  arrivals: ReadonlyMap<Id, readonly number[]>,
): Trace['deliveries'] => {
  // A frame that comes from outside may be for the very device it comes to.
  const counts = new Map<Id, number | 'endless'>(
    source.end?.code === 'delivered' ? [[source.end.to.id, 1]] : [],
  );
  for (const [key, { end }] of hops) {
    if (end?.code !== 'delivered') continue;
    const before = counts.get(end.to.id) ?? 0;
    const own = copies.get(key);
    counts.set(end.to.id, own === undefined || before === 'endless' ? 'endless' : before + own);
  }
  return [...counts]
    .sort(([a], [b]) => (a < b ? -1 : 1))
    .map(([device, count]) => ({ device, copies: count, steps: arrivals.get(device) ?? [] }));
};
