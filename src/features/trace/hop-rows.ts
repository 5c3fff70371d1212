import type { Design, ElementRef } from '../../engine/model/design.ts';
import { forwardingMembers } from '../../engine/network/network.ts';
import { IP_HEADER_BYTES } from '../../engine/reference/ip.ts';
import { deviceAt } from '../../engine/trace/device-at.ts';
import type { ProbeInput } from '../../engine/trace/probe.ts';
import type { Trace, TraceStep, Verdict } from '../../engine/trace/trace.ts';
import { bytesOf } from '../../engine/wire/layer.ts';
import { blocksOf, type ByteBar } from '../../lib/byte-blocks.ts';
import { isInFrame, isInIpPacket } from '../../lib/layer-names.ts';
import { branchTitle, hopWords, insideWords, leafWords } from './hop-words.ts';

/** How a copy ends, as its row says it. */
export interface Leaf {
  readonly tone: 'arrives' | 'pieces' | 'lost' | 'meant' | 'endless' | 'again';
  readonly words: string;
}

interface RowBasics {
  readonly key: string;
  /** How often the copies have parted before it. */
  readonly depth: number;
  /** The branches that it stands in, by their keys, outermost first. */
  readonly under: readonly string[];
}

/** One stretch of the way with its bytes; `inside` a gateway the packet before it is encrypted. */
export interface HopRow extends RowBasics {
  readonly kind: 'hop' | 'inside';
  /** From 1; the sheet repeats it. */
  readonly number: number;
  /** Place in `Trace.steps`. */
  readonly step: number;
  readonly title: string;
  readonly note: string;
  /** Whether and how it fits, at the row's end. */
  readonly measure: string;
  /** Absent where nothing is sent, or the bytes aren't known. */
  readonly bar?: ByteBar;
  readonly isCut: boolean;
  readonly isFailing: boolean;
  readonly leaf?: Leaf;
  /** All of it as sentences. */
  readonly sentences: string;
  /** Where its number stands on the sheet. */
  readonly at: ElementRef;
  /** What the lamp is on once the frame got here. */
  readonly lit: readonly ElementRef[];
}

/** The head of one of several ways that copies take from here. */
export interface BranchRow extends RowBasics {
  readonly kind: 'branch';
  readonly title: string;
  readonly hops: number;
  readonly counts: LeafCounts;
}

export type StripRow = HopRow | BranchRow;

export interface LeafCounts {
  readonly arrives: number;
  readonly lost: number;
  readonly meant: number;
  readonly endless: number;
}

const toneOf = (verdict: Verdict): Leaf['tone'] => {
  switch (verdict.code) {
    case 'delivered':
      return 'arrives';
    case 'fragmented':
      return 'pieces';
    case 'dropped':
      return verdict.byDesign ? 'meant' : 'lost';
    case 'circulating':
      return 'endless';
    case 'repeats':
      return 'again';
  }
};

const childrenOf = ({ steps }: Trace): readonly (readonly number[])[] => {
  const children: number[][] = steps.map(() => []);
  for (const { index, parent } of steps) if (parent !== undefined) children[parent]!.push(index);
  return children;
};

// Three hops read at a glance; a head over fewer would only be in the way.
const leastHopsOfBranch = 3;

interface Plan {
  readonly step: number;
  readonly depth: number;
  readonly under: readonly string[];
}

const barOf = (step: TraceStep, ipHeaderBytes: number): ByteBar | undefined => {
  const { wire } = step;
  if (wire === undefined) return undefined;
  return {
    ...blocksOf(wire.layers.filter(isInFrame), ipHeaderBytes),
    ipPacketBytes: wire.outerIpPacketBytes,
    ...(wire.mtuBytes === undefined ? {} : { pipeBytes: wire.mtuBytes }),
  };
};

/** The packet that VXLAN makes, before ESP goes round it; undefined where there is no ESP. */
const insideBar = ({ wire }: TraceStep, ipHeaderBytes: number): ByteBar | undefined => {
  if (wire === undefined || !wire.layers.some(({ id }) => id === 'esp-header')) return undefined;
  const layers = wire.layers.filter(
    (layer) =>
      isInIpPacket(layer) &&
      !layer.id.startsWith('esp-') &&
      layer.id !== 'outer-ip' &&
      layer.id !== 'nat-traversal-udp',
  );
  return { ...blocksOf(layers, ipHeaderBytes), ipPacketBytes: bytesOf(layers) };
};

const noCounts: LeafCounts = { arrives: 0, lost: 0, meant: 0, endless: 0 };
const countLeaf = (counts: LeafCounts, tone: Leaf['tone']): LeafCounts => {
  const name = tone === 'pieces' ? 'arrives' : tone === 'again' ? 'endless' : tone;
  return { ...counts, [name]: counts[name] + 1 };
};

/** Steps, hops and leaves beneath each step, itself included. */
const tallies = (
  trace: Trace,
  children: readonly (readonly number[])[],
): readonly { readonly hops: number; readonly counts: LeafCounts }[] => {
  const made: { hops: number; counts: LeafCounts }[] = new Array(trace.steps.length);
  // A step's children come after it, so that from the end each finds theirs done.
  for (let at = trace.steps.length - 1; at >= 0; at -= 1) {
    const { verdict } = trace.steps[at]!;
    let hops = 1;
    let counts = verdict === undefined ? noCounts : countLeaf(noCounts, toneOf(verdict));
    for (const child of children[at]!) {
      const below = made[child]!;
      hops += below.hops;
      counts = {
        arrives: counts.arrives + below.counts.arrives,
        lost: counts.lost + below.counts.lost,
        meant: counts.meant + below.counts.meant,
        endless: counts.endless + below.counts.endless,
      };
    }
    made[at] = { hops, counts };
  }
  return made;
};

/**
 * A trace as the rows of its strip: along each way from the sender, the ways after one another where copies part. The
 * sender has a row of its own only where something happens there.
 */
export const hopRows = (design: Design, probe: ProbeInput, trace: Trace): readonly StripRow[] => {
  const ipHeaderBytes = probe.packet.kind === 'ip' ? IP_HEADER_BYTES[probe.packet.version] : 0;
  const children = childrenOf(trace);
  const tally = tallies(trace, children);
  const rows: StripRow[] = [];
  const numberOfStep = new Map<number, number>();
  let number = 0;

  const add = (step: TraceStep, { depth, under }: Plan): void => {
    const { index, verdict, elements, crossing, pieces } = step;
    const isSource = crossing === undefined && step.parent === undefined;
    if (isSource && verdict === undefined && pieces === undefined && step.decisions.length < 2) return;
    const before = step.parent === undefined ? undefined : trace.steps[step.parent];
    const inside = insideBar(step, ipHeaderBytes);
    const basics = { step: index, depth, under };
    const [element = { collection: 'devices', id: '' } as const] = elements;
    if (inside !== undefined && step.from !== undefined) {
      number += 1;
      const words = insideWords(design, step, before);
      rows.push({
        ...basics,
        ...words,
        kind: 'inside',
        key: `${index} inside`,
        number,
        measure: `${inside.ipPacketBytes} B, no pipe yet`,
        bar: inside,
        isCut: false,
        isFailing: false,
        sentences: `${words.title}: ${words.note}. ${inside.ipPacketBytes} bytes before they are encrypted.`,
        at: step.from,
        lit: [step.from, litDevice(design, step.from)],
      });
    }
    number += 1;
    numberOfStep.set(index, number);
    const bar = barOf(step, ipHeaderBytes);
    const tone = verdict === undefined ? undefined : toneOf(verdict);
    const words = hopWords(design, step, before);
    const isFailing = tone === 'lost' || (verdict?.code === 'circulating' && verdict.cycle !== undefined);
    rows.push({
      ...basics,
      ...words,
      kind: 'hop',
      key: String(index),
      number,
      ...(bar === undefined ? {} : { bar }),
      isCut: pieces !== undefined && crossing !== undefined,
      isFailing,
      at: verdict === undefined ? element : markOf(design, step, element),
      lit: litOf(design, step),
    });
  };

  // Not by recursion: the way through a chain of a thousand switches is a thousand hops deep.
  const waiting: Plan[] = [{ step: 0, depth: 0, under: [] }];
  while (waiting.length > 0) {
    const plan = waiting.pop()!;
    const below = children[plan.step]!;
    const step = trace.steps[plan.step]!;
    add(step, plan);
    const parts = below.length > 1;
    const plans = below.map((child): Plan => {
      if (!parts) return { ...plan, step: child };
      const depth = plan.depth + 1;
      const isBranch = tally[child]!.hops >= leastHopsOfBranch;
      return { step: child, depth, under: isBranch ? [...plan.under, `branch ${child}`] : plan.under };
    });
    waiting.push(...plans.reverse());
    // The head of a branch stands before its first hop, which is taken from the pile next.
    const next = waiting.at(-1);
    if (next !== undefined) headOf(next);
  }
  // Ends may name hops that come further down.
  return rows.map((row) => {
    const verdict = row.kind === 'hop' ? trace.steps[row.step]!.verdict : undefined;
    if (row.kind === 'branch' || verdict === undefined) return row;
    const words = leafWords(verdict, (step) => numberOfStep.get(step));
    return { ...row, leaf: { tone: toneOf(verdict), words }, sentences: `${row.sentences} ${words}.` };
  });

  function headOf({ step, depth, under }: Plan): void {
    const key = `branch ${step}`;
    if (under.at(-1) !== key) return;
    rows.push({
      kind: 'branch',
      key,
      depth,
      under: under.slice(0, -1),
      title: branchTitle(design, trace.steps[step]!),
      ...tally[step]!,
    });
  }
};

/** A device where a frame is: of a pair the member that has it. */
const litDevice = (design: Design, end: ElementRef): ElementRef => {
  const id = deviceAt(design, end);
  const device = design.devices[id];
  if (device?.kind !== 'ha-pair') return { collection: 'devices', id };
  return { collection: 'devices', id, member: end.member ?? forwardingMembers(device)[0]! };
};

/** What lights up: the devices at both ends, and what is crossed between them. */
const litOf = (design: Design, { from, to, elements, verdict }: TraceStep): readonly ElementRef[] => {
  const at = (end: ElementRef | undefined): readonly ElementRef[] =>
    end === undefined ? [] : [litDevice(design, end), ...(end.collection === 'endpoints' ? [end] : [])];
  // What is dropped before it leaves lights nothing beyond its sender.
  if (verdict?.code === 'dropped' && isDroppedBeforeLeaving(verdict.reason.code)) return at(from);
  return [...at(from), ...at(to), ...(from === undefined ? [] : elements)];
};

/** What ends at a gateway's WAN port is numbered there, not halfway down the tunnel. */
const markOf = (design: Design, { elements, verdict }: TraceStep, usual: ElementRef): ElementRef => {
  if (verdict?.code !== 'dropped' || verdict.reason.code !== 'oversize' || verdict.reason.where !== 'gateway')
    return usual;
  const ref = elements.find(({ collection }) => collection === 'links');
  const landing = ref === undefined ? undefined : design.links[ref.id];
  if (landing?.kind !== 'landing') return usual;
  const device = design.devices[landing.device];
  const member = device?.kind === 'ha-pair' ? forwardingMembers(device)[0] : undefined;
  return {
    collection: 'devices',
    id: landing.device,
    port: landing.port,
    ...(member === undefined ? {} : { member }),
  };
};

const isDroppedBeforeLeaving = (code: string): boolean =>
  ['oversize', 'association-down', 'tunnel-down', 'exceeds-own-mtu', 'isolation', 'split-horizon'].includes(
    code,
  );
