import type { LoggedPatch } from '../contract/designs.ts';
import type { Design } from '../engine/model/design.ts';
import type { MergePatch } from '../engine/model/merge-patch.ts';
import { applyPatch, isEmptyPatch } from '../engine/model/merge-patch.ts';
import type { Edit } from './edit-storage.ts';
import { overlapWith } from './overlapping-edits.ts';
import type { PatchHistory } from './patch-history.ts';
import { leaveToOthers } from './patch-history.ts';

/** What a person has to be told of others' work on the same things. */
export type Told =
  /** Two changed the same: whose stands, and how the design was before and after that. */
  | {
      readonly kind: 'settled';
      readonly stands: 'mine' | 'theirs';
      readonly by: string;
      readonly before: Design;
      readonly after: Design;
    }
  /** A step can't be taken back or done again: somebody has changed all of it since. */
  | { readonly kind: 'taken-over'; readonly label: string; readonly by: string };

interface Meeting {
  /** As it was before what is fresh. */
  readonly document: Design;
  /** What was logged since, own edits among it. */
  readonly fresh: readonly LoggedPatch[];
  /** Own edits of the last moment, acknowledged or not. */
  readonly recent: readonly Edit[];
  /** Own edits that no log held so far. */
  readonly pending: readonly Edit[];
  readonly history: PatchHistory;
}

/**
 * What becomes of one's own steps when others' edits arrive: what others changed is left to them. Where both changed the
 * same, the later in the log stands, and both are to be told.
 */
export const meetOthers = ({
  document,
  fresh,
  recent,
  pending,
  history,
}: Meeting): { readonly history: PatchHistory; readonly told: readonly Told[] } => {
  const told: Told[] = [];
  const own = new Set(recent.map(({ editId }) => editId));
  // Later in the log than the patch that is looked at, or still to be logged.
  const later = new Set(pending.map(({ editId }) => editId));
  let before = document;
  let left = history;
  for (const logged of fresh) {
    const theirs = logged.patch as MergePatch;
    const after = applyPatch(before, theirs);
    if (!later.delete(logged.editId) && !own.has(logged.editId) && logged.by !== null) {
      const { by } = logged;
      const both = recent.filter(({ patch }) => !isEmptyPatch(overlapWith(patch, theirs)));
      const ours = both.filter(({ editId }) => later.has(editId));
      const last = both.at(-1);
      if (ours.length > 0) {
        const stands = ours.reduce((at, { patch }) => applyPatch(at, overlapWith(patch, theirs)), after);
        told.push({ kind: 'settled', stands: 'mine', by, before: after, after: stands });
      } else if (last !== undefined) {
        const stands = applyPatch(before, overlapWith(theirs, last.patch));
        told.push({ kind: 'settled', stands: 'theirs', by, before, after: stands });
      }
      left = leaveToOthers(left, theirs, by, ours.length);
    }
    before = after;
  }
  return { history: left, told };
};
