import type { Revision, Sitting, SittingList } from '../../contract/revisions.ts';

/** One line of a design's history. */
export type TimelineEntry =
  | { readonly kind: 'revision'; readonly at: string; readonly revision: Revision }
  | { readonly kind: 'sitting'; readonly at: string; readonly sitting: Sitting }
  | { readonly kind: 'begun'; readonly at: string; readonly by: string | null };

const sequenceOf = (entry: TimelineEntry): number => {
  if (entry.kind === 'revision') return entry.revision.sequence;
  return entry.kind === 'sitting' ? entry.sitting.lastSequence : 0;
};
// What is frozen comes after the edits that are in it.
const rankOf = (entry: TimelineEntry): number => ['begun', 'sitting', 'revision'].indexOf(entry.kind);

/** Revisions and sittings as one line of time, the newest first, down to the beginning. */
export const timelineEntries = (
  revisions: readonly Revision[],
  { sittings, createdBy, createdAt }: SittingList,
): readonly TimelineEntry[] =>
  [
    ...revisions.map((revision) => ({ kind: 'revision' as const, at: revision.askedAt, revision })),
    ...sittings.map((sitting) => ({ kind: 'sitting' as const, at: sitting.from, sitting })),
    { kind: 'begun' as const, at: createdAt, by: createdBy },
  ].sort((a, b) => sequenceOf(b) - sequenceOf(a) || rankOf(b) - rankOf(a));
