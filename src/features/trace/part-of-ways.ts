import type { HopRow } from './hop-rows.ts';
import type { TraceResult } from './trace-result.ts';

/** Where two probes stop having the same way. */
export interface PartOfWays {
  /** Hops that both take alike, from the sender on. */
  readonly together: number;
  /** The first hop that is not the same: of the first probe, of the second. Absent where one of them ends before. */
  readonly first?: HopRow;
  readonly second?: HopRow;
}

const wayOf = (result: TraceResult, { step, kind }: HopRow): string => {
  const { crossing, tags, elements } = result.trace.steps[step]!;
  return JSON.stringify([kind, crossing ?? elements[0], tags]);
};

/** The first hop at which two probes differ: another way, another end, or cut for one of them only; undefined for none. */
export const partOfWays = (a: TraceResult, b: TraceResult): PartOfWays | undefined => {
  const most = Math.max(a.hops.length, b.hops.length);
  for (let at = 0; at < most; at += 1) {
    const [first, second] = [a.hops[at], b.hops[at]];
    const isSame =
      first !== undefined &&
      second !== undefined &&
      wayOf(a, first) === wayOf(b, second) &&
      first.leaf?.tone === second.leaf?.tone &&
      first.isCut === second.isCut;
    if (isSame) continue;
    return {
      together: at,
      ...(first === undefined ? {} : { first }),
      ...(second === undefined ? {} : { second }),
    };
  }
  return undefined;
};

/** The same in words. */
export const partWords = (part: PartOfWays | undefined): string => {
  if (part === undefined) return 'Both take the same way to the same end.';
  const { together, first, second } = part;
  const at = first ?? second;
  const where = at === undefined ? '' : ` ${at.number}, ${at.title}`;
  const shared =
    together === 0
      ? 'They part at once'
      : `They share ${together} ${together === 1 ? 'hop' : 'hops'} and part`;
  return `${shared} at hop${where}: first ${endWords(first)}, second ${endWords(second)}.`;
};

const endWords = (row: HopRow | undefined): string => {
  if (row === undefined) return 'has ended before';
  if (row.leaf?.tone === 'lost') return 'is dropped';
  if (row.leaf !== undefined) return row.leaf.tone === 'arrives' ? 'arrives' : 'ends';
  return row.isCut ? 'is cut and goes on' : 'goes on';
};
