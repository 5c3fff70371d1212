import type { Design, ElementRef } from '../../engine/model/design.ts';
import { deviceAt } from '../../engine/trace/device-at.ts';
import type { ProbeInput } from '../../engine/trace/probe.ts';
import type { DropReason, Explanation, Trace, TraceStep, Verdict } from '../../engine/trace/trace.ts';
import type { WhatFits } from '../../engine/trace/what-fits.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';
import type { HopRow, StripRow } from './hop-rows.ts';

/** What came of a frame, for the bar at the end of its strip. */
export interface TraceVerdict {
  readonly tone: 'arrives' | 'milder' | 'lost' | 'meant';
  /** What and where. */
  readonly what: string;
  readonly why: string;
  /** The finding that would have told. */
  readonly findingKey?: string;
  /** The check that would, where no finding was made. */
  readonly rule?: string;
  /** The largest packet that would pass, where size is what was wrong. */
  readonly insteadBytes?: number;
  /** The number of the hop that decides it. */
  readonly hop?: number;
}

type Drop = Extract<Verdict, { readonly code: 'dropped' }>;
type Dropped = TraceStep & { readonly verdict: Drop };

const stop = (words: string): string => (words === '' || /[.!?]$/.test(words) ? words : `${words}.`);

/** Nobody hears of it, not even the sender. */
const isSilent = (reason: DropReason): boolean =>
  reason.code === 'oversize'
    ? reason.answer === 'none'
    : reason.code !== 'exceeds-own-mtu' && reason.code !== 'not-cabled';

/** Where a copy ends: the device or transport that ends it. */
const placeOf = (design: Design, { from, to, elements, verdict }: Dropped): string => {
  const { reason } = verdict;
  if (reason.code === 'transport-filters')
    return nameOf(design, { collection: 'transports', id: reason.transport });
  if (reason.code === 'oversize' && reason.where === 'underway') {
    const transport = elements.find(({ collection }) => collection === 'transports');
    if (transport !== undefined) return nameOf(design, transport);
  }
  if ('device' in reason) return nameOf(design, { collection: 'devices', id: reason.device });
  const end: ElementRef | undefined = from ?? to ?? elements[0];
  return end === undefined
    ? 'the sender'
    : nameOf(design, { collection: 'devices', id: deviceAt(design, end) });
};

const tellsOf = (explains: readonly Explanation[] | undefined): Partial<TraceVerdict> => {
  const [first] = explains ?? [];
  if (first === undefined) return {};
  return first.key === undefined ? { rule: first.rule } : { findingKey: first.key };
};

const droppedVerdict = (
  design: Design,
  step: Dropped,
  numberOf: (step: number) => number | undefined,
  fits: WhatFits | undefined,
): TraceVerdict => {
  const { verdict, index } = step;
  const { reason, byDesign, words } = verdict;
  const place = placeOf(design, step);
  const isSize =
    reason.code === 'oversize' || reason.code === 'oversize-frame' || reason.code === 'exceeds-own-mtu';
  const largest = fits?.largestBytes ?? (reason.code === 'oversize' ? reason.largestBytes : undefined);
  const hop = numberOf(index);
  return {
    tone: byDesign ? 'meant' : 'lost',
    what: byDesign
      ? `Stopped at ${place}, as it should be.`
      : `Dropped at ${place}${isSilent(reason) ? ' without a word' : ''}.`,
    why: stop(words),
    ...tellsOf(verdict.explains),
    ...(isSize && largest !== undefined && largest > 0 ? { insteadBytes: largest } : {}),
    ...(hop === undefined ? {} : { hop }),
  };
};

const copiesWords = (copies: number | 'endless'): string =>
  copies === 'endless' ? 'copies without end' : `${copies} copies`;

/** The hop with the least room to spare, in words. */
const tightest = (rows: readonly StripRow[]): string => {
  let best: HopRow | undefined;
  let least = Infinity;
  for (const row of rows) {
    if (row.kind === 'branch' || row.bar?.pipeBytes === undefined) continue;
    const spare = row.bar.pipeBytes - row.bar.ipPacketBytes;
    if (spare >= least) continue;
    [best, least] = [row, spare];
  }
  return best === undefined
    ? ''
    : ` Least room on hop ${best.number}, ${best.title}: ${best.measure}, ${least === 0 ? 'nothing' : `${least} B`} to spare.`;
};

/** A packet that its own sender cuts is no fault of the way. */
const ownCutWords = (steps: readonly TraceStep[], at: number): string | undefined => {
  const step = steps[at];
  const own = step?.decisions.find(({ code }) => code === 'cut-by-source');
  return own === undefined
    ? undefined
    : `${own.words}: ${(step?.pieces ?? []).map(({ packetBytes }) => packetBytes).join(' + ')} B`;
};

const isDropped = (step: TraceStep): step is Dropped => step.verdict?.code === 'dropped';

/** What came of it, where, why, and which finding would have told. */
export const verdictOf = (
  design: Design,
  { destination }: ProbeInput,
  { steps, deliveries, storm, words }: Trace,
  rows: readonly StripRow[],
  fits: WhatFits | undefined,
): TraceVerdict => {
  const numbers = new Map(
    rows.flatMap((row) => (row.kind === 'hop' ? [[row.step, row.number] as const] : [])),
  );
  const numberOf = (step: number): number | undefined => numbers.get(step);
  if (storm !== undefined)
    return {
      tone: 'lost',
      what:
        storm.growth === 'multiplies' ? 'A storm: copies multiply.' : 'A storm: copies go round for ever.',
      why: `The cycle has ${storm.hopsPerRound} hops. ${stop(words)}`,
      ...tellsOf(storm.explains),
    };
  const drops = steps.filter(isDropped);
  const cause = drops.find(({ verdict }) => !verdict.byDesign) ?? drops[0];
  const hops = rows.reduce((count, row) => (row.kind === 'branch' ? count : count + 1), 0);
  const pieces = steps.find(({ verdict }) => verdict?.code === 'fragmented')?.verdict;
  if (destination.kind === 'host') {
    const name = nameOf(design, { collection: 'devices', id: destination.host });
    const delivery = deliveries.find(({ device }) => device === destination.host);
    if (delivery === undefined)
      return cause === undefined
        ? { tone: 'lost', what: `Does not reach ${name}.`, why: stop(words) }
        : droppedVerdict(design, cause, numberOf, fits);
    if (delivery.copies !== 1)
      return {
        tone: 'milder',
        what: `Reaches ${name} in ${copiesWords(delivery.copies)}.`,
        why: 'A host that gets everything twice counts wrong at best; there is more than one way to it.',
      };
    if (pieces?.code === 'fragmented')
      return {
        tone: 'milder',
        what: `Reaches ${name} in pieces.`,
        why: stop(ownCutWords(steps, pieces.at) ?? pieces.words),
        ...(fits?.largestBytes === undefined ? {} : { insteadBytes: fits.largestBytes }),
      };
    return {
      tone: 'arrives',
      what: `Reaches ${name}.`,
      why: `${hops} ${hops === 1 ? 'hop' : 'hops'}.${tightest(rows)}`,
    };
  }
  const several = deliveries.filter(({ copies }) => copies !== 1).length;
  const lost = drops.filter(({ verdict }) => !verdict.byDesign);
  if (deliveries.length === 0)
    return cause === undefined
      ? { tone: 'lost', what: 'Reaches nobody.', why: stop(words) }
      : {
          ...droppedVerdict(design, cause, numberOf, fits),
          what: `Reaches nobody: ${cause.verdict.byDesign ? 'stopped' : 'dropped'} at ${placeOf(design, cause)}.`,
        };
  const who =
    deliveries.length === 1
      ? nameOf(design, { collection: 'devices', id: deliveries[0]!.device })
      : `${deliveries.length} devices`;
  if (lost.length > 0) {
    const first = droppedVerdict(design, lost[0]!, numberOf, fits);
    const more = lost.length === 1 ? 'a copy was' : `${lost.length} copies were`;
    return { ...first, what: `Reaches ${who}; ${more} dropped, first at ${placeOf(design, lost[0]!)}.` };
  }
  if (several > 0)
    return {
      tone: 'milder',
      what: `Reaches ${who}, ${several} of them more than once.`,
      why: 'There is more than one way to them, and nothing takes the second copy out.',
    };
  return { tone: 'arrives', what: `Reaches ${who}.`, why: `${hops} hops.${tightest(rows)}` };
};
