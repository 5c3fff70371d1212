import type { Knex } from 'knex';
import type { Thread } from '#contract/comments.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch, inversePatch, isEmptyPatch } from '#engine/model/merge-patch.ts';
import type { Drift } from '#engine/model/patch-drift.ts';
import { referenceProblems } from '#engine/model/parse-design.ts';
import { patchDrift } from '#engine/model/patch-drift.ts';
import { settlePatch } from '#engine/model/settle-patch.ts';
import { Refusal, notFound } from '../errors.ts';
import { announce } from '../live/announce.ts';
import { recordActivity } from '../repositories/activity.ts';
import type { CommentRow, SuggestionRow } from '../repositories/comments.ts';
import { findComment, listComments, setApplied, setResolved } from '../repositories/comments.ts';
import { listPatches } from '../repositories/design-patches.ts';
import type { DesignRow } from '../repositories/designs.ts';
import { calledOf, requireCommentFor, threadOf } from './comment-threads.ts';
import type { Context } from './context.ts';
import { refuseUnlessDraft } from './design-states.ts';
import { logEdits, onLockedDesign } from './log-edits.ts';
import { settleEdits } from './settle-edits.ts';
import { loadDocument } from './stored-documents.ts';

/** A suggestion as it is kept, once it is sure that the design would stay valid with it. */
export async function suggestionFor(
  context: Context,
  trx: Knex.Transaction,
  design: DesignRow,
  { patch, baseSequence }: Pick<SuggestionRow, 'patch' | 'baseSequence'>,
): Promise<Pick<SuggestionRow, 'patch' | 'before' | 'baseSequence'>> {
  if (baseSequence > design.sequence) {
    throw new Refusal(
      'conflict',
      `The design has ${design.sequence} patches here, so nothing can be suggested on top of number ${baseSequence}; open the design again.`,
    );
  }
  const { document: base } = await loadDocument(context, trx, { id: design.id, sequence: baseSequence });
  const before = inversePatch(base, patch);
  if (isEmptyPatch(before)) {
    throw new Refusal(
      'invalid-request',
      "'suggestion.patch' changes nothing: expected a change of the design.",
      {
        details: [
          { path: 'suggestion.patch', value: 'no change', expected: 'expected a change of the design' },
        ],
      },
    );
  }
  const settled = settleEdits(base, [{ editId: '', patch }], []);
  // A reference to nothing would be repaired by removing what refers: nobody suggested that.
  const problems = settled.ok ? referenceProblems(applyPatch(base, patch)) : settled.problems;
  const [first] = problems;
  if (first !== undefined) {
    throw new Refusal(
      !settled.ok && settled.reason === 'too-large' ? 'too-large' : 'invalid-design',
      `The suggestion would leave no valid design: ${first.path} would be ${first.value}, ${first.expected}.`,
      { details: problems },
    );
  }
  return { patch, before, baseSequence };
}

/**
 * Makes a suggestion a patch of the design, by whoever applies it. What others removed meanwhile stays removed. Where the
 * design has moved on in what is changed, only when that is confirmed.
 */
export async function applySuggestion(
  context: Context,
  personId: string,
  commentId: string,
  { editId, confirmed = false }: { readonly editId: string; readonly confirmed?: boolean },
): Promise<{ thread: Thread; sequence: number }> {
  const { designId } = await requireCommentFor(context, personId, commentId, 'design.edit');
  return onLockedDesign(context, personId, designId, 'design.edit', async (trx, design) => {
    const comment = await findComment(trx, commentId);
    if (comment === null) throw notFound('comment');
    const suggestion = pendingSuggestion(comment);
    refuseUnlessDraft(design);
    const { document } = await loadDocument(context, trx, design);
    const drift = patchDrift(document, suggestion.patch, suggestion.before);
    if (drift.length > 0 && !confirmed) throw movedOn(drift);
    const since = await listPatches(trx, designId, suggestion.baseSequence, design.sequence);
    const left = settlePatch(
      document,
      suggestion.patch,
      since.map(({ patch }) => patch),
    );
    if (isEmptyPatch(inversePatch(document, left))) throw nothingLeft(drift);
    const saved = await logEdits(
      context,
      trx,
      personId,
      design,
      [{ editId, patch: suggestion.patch }],
      suggestion.baseSequence,
    );
    const sequence = saved?.sequence ?? design.sequence;
    const at = context.clock();
    const threadId = comment.threadId ?? comment.id;
    await setApplied(trx, commentId, personId, at, sequence);
    await setResolved(trx, threadId, { personId, at });
    const rows = await listComments(trx, designId, threadId);
    await recordActivity(trx, {
      workspaceId: design.workspaceId,
      at,
      action: 'suggestion.applied',
      personId,
      object: { kind: 'comment', id: commentId, name: calledOf(rows, design) },
      designId,
    });
    await announce(trx, { designId, change: 'comments' });
    return { saved, answer: { thread: threadOf(rows), sequence } };
  });
}

function pendingSuggestion({ suggestion }: CommentRow): SuggestionRow & { readonly patch: MergePatch } {
  if (suggestion === null) throw new Refusal('conflict', 'The comment suggests no change.');
  if (suggestion.appliedAt !== null) {
    throw new Refusal(
      'conflict',
      `The suggestion is applied already${suggestion.appliedBy === null ? '' : `, by ${suggestion.appliedBy.name}`}.`,
    );
  }
  return suggestion;
}

const mostPlaces = 20;
const written = (value: unknown): string => {
  if (value === undefined) return 'not there';
  const text = JSON.stringify(value);
  return text.length > 80 ? `${text.slice(0, 79)}…` : text;
};

function movedOn(drift: readonly Drift[]): Refusal {
  const places = drift.length === 1 ? 'one place' : `${drift.length} places`;
  return new Refusal(
    'conflict',
    `The design has changed since in ${places} that the suggestion changes; look at it, then apply it all the same or not.`,
    { details: detailsOf(drift) },
  );
}

function nothingLeft(drift: readonly Drift[]): Refusal {
  return new Refusal(
    'conflict',
    'Nothing of the suggestion is left to apply: what it changes is gone, or already so.',
    { details: detailsOf(drift) },
  );
}

const detailsOf = (drift: readonly Drift[]) =>
  drift.slice(0, mostPlaces).map(({ path, was, now }) => ({
    path: path.join('.'),
    value: written(now),
    expected: `expected ${written(was)}`,
  }));
