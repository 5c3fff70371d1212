import type { Decorations, Tone } from '../../drawing/decorations.ts';
import { elementKey } from '../../drawing/decorations.ts';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import type { Trace } from '../../engine/trace/trace.ts';
import type { HopRow } from './hop-rows.ts';

const dimmable = ['devices', 'endpoints', 'links', 'associations', 'tunnels'] as const;
const lit: readonly Tone[] = ['lit'];
const dimmed: readonly Tone[] = ['dimmed'];

/** The pipes of tunnels in which the frame is too long, at the end where it goes in. */
const overhangsOf = (hops: readonly HopRow[], { steps }: Trace): Decorations['overhangs'] =>
  hops.flatMap(({ step, isFailing }) => {
    const { verdict, crossing } = steps[step]!;
    if (!isFailing || verdict?.code !== 'dropped' || verdict.reason.code !== 'oversize') return [];
    const { tunnel, packetBytes, mtuBytes } = verdict.reason;
    const end = crossing?.direction === 'b-to-a' ? ('b' as const) : ('a' as const);
    return [{ tunnel, end, packetBytes, mtuBytes }];
  });

/**
 * How a trace shows on the sheet: what the frame has passed so far lit and numbered, the rest dimmed. Of several hops at one
 * place the first one's number stands there. The findings' own marks make room for it.
 */
export const traceToDecorations = (
  design: Design,
  trace: Trace,
  passed: readonly HopRow[],
  isOver: boolean,
): Partial<Decorations> => {
  const tones: { [key: string]: readonly Tone[] } = {};
  for (const collection of dimmable)
    for (const id of Object.keys(design[collection])) tones[elementKey({ collection, id })] = dimmed;
  const light = (ref: ElementRef): void => {
    // A jacket is neither lit nor dimmed: the cord in it is.
    if (ref.collection === 'associations') tones[elementKey(ref)] = [];
    else if (ref.collection === 'devices' && ref.member !== undefined) {
      tones[elementKey({ collection: 'devices', id: ref.id })] = [];
      tones[elementKey({ collection: 'devices', id: ref.id, member: ref.member })] = lit;
    } else if (ref.collection !== 'transports')
      tones[elementKey({ collection: ref.collection, id: ref.id })] = lit;
  };
  for (const ref of [...trace.steps[0]!.elements, ...passed.flatMap((hop) => hop.lit)]) light(ref);
  const numbered = new Map<string, NonNullable<Decorations['hops']>[number]>();
  for (const { number, at, isFailing } of passed) {
    const key = elementKey(at);
    const before = numbered.get(key);
    if (before === undefined || (isFailing && !before.failing))
      numbered.set(key, { number, at, failing: isFailing });
  }
  return {
    tones,
    hops: [...numbered.values()],
    balloons: [],
    ghosts: [],
    overhangs: overhangsOf(passed, trace),
    loops: isOver && trace.storm !== undefined ? [{ steps: trace.storm.cycle }] : [],
  };
};
