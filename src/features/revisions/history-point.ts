import type { Revision } from '../../contract/revisions.ts';

/** A moment in a design's life that can be looked at: as it is now, a revision, or after one of its patches. */
export type HistoryPoint =
  | { readonly kind: 'now' }
  | { readonly kind: 'revision'; readonly label: string }
  | { readonly kind: 'patch'; readonly sequence: number };

/** A point as the address says it: 'now', 'revision-C', 'patch-17'. */
export const writePoint = (point: HistoryPoint): string => {
  if (point.kind === 'now') return 'now';
  return point.kind === 'revision' ? `revision-${point.label}` : `patch-${point.sequence}`;
};

export type ReadPoint =
  { readonly ok: true; readonly point: HistoryPoint } | { readonly ok: false; readonly problem: string };

/** Reads a point from the address, for a design with these revisions and this many patches. */
export const readPoint = (
  field: string,
  text: string,
  revisions: readonly Revision[],
  sequence: number,
): ReadPoint => {
  if (text === 'now') return { ok: true, point: { kind: 'now' } };
  const label = /^revision-(.+)$/.exec(text)?.[1];
  if (label !== undefined && revisions.some((revision) => revision.label === label))
    return { ok: true, point: { kind: 'revision', label } };
  const number = /^patch-(\d{1,9})$/.exec(text)?.[1];
  if (number !== undefined && Number(number) <= sequence)
    return { ok: true, point: { kind: 'patch', sequence: Number(number) } };
  const why =
    label === undefined
      ? number === undefined
        ? 'is no moment of this design'
        : `is yet to come, the last is patch-${sequence}`
      : 'is no revision of this design';
  return { ok: false, problem: `‘${field}’ in the address is ${text}, which ${why}. Choose another below.` };
};

/** A point in words, within a sentence. */
export const pointWords = (point: HistoryPoint): string => {
  if (point.kind === 'now') return 'the design as it is now';
  if (point.kind === 'revision') return `revision ${point.label}`;
  return point.sequence === 0 ? 'the design as it began' : `the design after edit ${point.sequence}`;
};
