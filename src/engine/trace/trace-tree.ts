import type { FloodStep } from '../flood/storm.ts';
import type { ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import type { CrossingGraph } from './crossing-graph.ts';
import type { KnownFinding } from './explanations.ts';
import { explainDrop, explainStorm } from './explanations.ts';
import type { Hop } from './follower.ts';
import { crossingKey, tagsOf } from './follower.ts';
import type { Surroundings } from './told-by.ts';
import type { Trace, TraceStep, Verdict } from './trace.ts';
import type { Names } from './trace-words.ts';
import { decisionWords, reasonWords } from './trace-words.ts';

/** Beyond this many hops no copy is listed that takes a way which is followed already; every way is followed once. */
export const mostRepeatedSteps = 1_000;

interface TreeContext {
  readonly names: Names;
  readonly around: Omit<Surroundings, 'lowered'>;
  readonly findings?: readonly KnownFinding[];
}

interface Open {
  readonly hop: Hop;
  readonly parent: number;
  /** The hop that takes the same way already; this one is a leaf then. */
  readonly again?: number;
}

/** The hops of every copy, nearest first. In a storm, and where copies are very many, each way is followed once. */
export const traceTree = (
  source: Hop,
  graph: CrossingGraph,
  { names, around, findings }: TreeContext,
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
  const loweredOnWay = (parent: number): readonly Id[] => {
    const devices: Id[] = [];
    for (
      let at: number | undefined = parent < 0 ? undefined : parent;
      at !== undefined;
      at = steps[at]!.parent
    )
      for (const decision of steps[at]!.decisions)
        if (decision.code === 'hop-limit-lowered') devices.push(decision.device);
    return devices;
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
    const explains = explainDrop(
      end.reason,
      { ...around, lowered: loweredOnWay(parent) },
      { byDesign: end.byDesign, ...(findings === undefined ? {} : { findings }) },
    );
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
  const keyOf = ({ crossing }: Hop): number | undefined =>
    crossing === undefined ? undefined : crossingKey(crossing);
  const isEndless = (hop: Hop): boolean => {
    const key = keyOf(hop);
    return key !== undefined && !graph.copies.has(key);
  };
  const targetsOf = (hop: Hop): readonly number[] => {
    const key = keyOf(hop);
    return key === undefined ? graph.starts : graph.next.get(key)!;
  };
  const add = (hop: Hop, parent: number, verdict: Verdict | undefined): void => {
    const { crossing, step, from, to, elements, facts, wire, pieces } = hop;
    // Built field by field: traces of large designs have a thousand of these.
    const added: { -readonly [field in keyof TraceStep]: TraceStep[field] } = {
      index: steps.length,
      elements,
      tags: tagsOf(crossing),
      decisions: facts.map((fact) => ({ ...fact, words: decisionWords(names, fact) })),
    };
    if (parent >= 0) added.parent = parent;
    if (from !== undefined) added.from = from;
    if (to !== undefined) added.to = to;
    if (step !== undefined) added.crossing = step;
    if (crossing !== undefined && crossing.hopLimit > 0) added.hopLimit = crossing.hopLimit;
    if (wire !== undefined) added.wire = wire;
    if (pieces !== undefined) added.pieces = pieces;
    if (verdict !== undefined) added.verdict = verdict;
    steps.push(added);
  };

  // A hop's place in the queue is its index, since each becomes one step.
  const queue: Open[] = [{ hop: source, parent: -1 }];
  for (let index = 0; index < queue.length; index += 1) {
    const { hop, parent, again } = queue[index]!;
    if (again !== undefined) {
      add(hop, parent, againVerdict(again, parent, isEndless(hop)));
      continue;
    }
    let left: { readonly sameAs: number; readonly hop: Hop } | undefined;
    const before = queue.length;
    for (const target of hop.end === undefined ? targetsOf(hop) : []) {
      const next = graph.hops.get(target)!;
      const sameAs = first.get(target);
      const isOpened = sameAs === undefined || (!isEndless(next) && queue.length < mostRepeatedSteps);
      if (sameAs === undefined) first.set(target, queue.length);
      if (isOpened) queue.push({ hop: next, parent: index });
      else if (queue.length < mostRepeatedSteps) queue.push({ hop: next, parent: index, again: sameAs });
      else left ??= { sameAs, hop: next };
    }
    for (const stopped of hop.stopped) queue.push({ hop: stopped, parent: index });
    const isLast = left !== undefined && queue.length === before;
    add(hop, parent, verdictOf(hop, index, parent));
    if (isLast)
      steps[index] = { ...steps[index]!, verdict: againVerdict(left!.sameAs, index, isEndless(left!.hop)) };
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
