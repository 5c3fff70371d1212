import { randomUUID } from 'node:crypto';
import type { Knex } from 'knex';
import type { Restore, Restored } from '#contract/revisions.ts';
import type { Design } from '#engine/model/design.ts';
import { diffPatch, isEmptyPatch } from '#engine/model/merge-patch.ts';
import { withIssueOf } from '#engine/model/issue.ts';
import { notFound } from '../errors.ts';
import { recordActivity } from '../repositories/activity.ts';
import type { DesignRow } from '../repositories/designs.ts';
import { findDesign } from '../repositories/designs.ts';
import { findRevision, readRevisionContent } from '../repositories/revisions.ts';
import type { Context } from './context.ts';
import { startDraft } from './decide-review.ts';
import { documentAt } from './design-history.ts';
import { refuseUnlessDraft } from './design-states.ts';
import { logEdits, onLockedDesign } from './log-edits.ts';
import { actorOf } from './on-revision.ts';
import { loadDocument } from './stored-documents.ts';

/** Makes the draft what the design was in a revision or after a patch: one edit, on record, that can be undone. */
export function restoreDesign(
  context: Context,
  personId: string,
  designId: string,
  restore: Restore,
): Promise<Restored> {
  return onLockedDesign<Restored>(context, personId, designId, 'design.edit', async (trx, asked) => {
    if (asked.state === 'in-review') refuseUnlessDraft(asked);
    const past = await pastOf(trx, asked, restore);
    const actor = await actorOf(trx, personId);
    const started = asked.state === 'draft' ? null : await startDraft(context, trx, { design: asked, actor });
    const design = (await findDesign(trx, designId)) ?? asked;
    const { document } = started ?? (await loadDocument(context, trx, design));
    // What the title block says of the issue belongs to the draft, whatever is drawn.
    const patch = diffPatch(document, withIssueOf(past.document, document));
    if (isEmptyPatch(patch)) return { saved: started, answer: { sequence: design.sequence, editId: null } };
    const editId = randomUUID();
    const saved = await logEdits(context, trx, personId, design, [{ editId, patch }], design.sequence);
    await recordActivity(trx, {
      workspaceId: design.workspaceId,
      at: context.clock(),
      action: 'revision.restored',
      personId,
      object: { kind: 'design', id: designId, name: design.title },
      designId,
      details: past.details,
    });
    return { saved, answer: { sequence: saved?.sequence ?? design.sequence, editId } };
  });
}

async function pastOf(
  trx: Knex.Transaction,
  design: DesignRow,
  { revisionId, sequence }: Restore,
): Promise<{ readonly document: Design; readonly details: Readonly<Record<string, string>> }> {
  if (revisionId === undefined) {
    const patch = String(sequence);
    return { document: await documentAt(trx, design, sequence!), details: { patch } };
  }
  const revision = await findRevision(trx, revisionId);
  if (revision?.designId !== design.id) throw notFound('revision');
  const { document } = await readRevisionContent(trx, revisionId);
  return { document, details: { revision: revision.label } };
}
