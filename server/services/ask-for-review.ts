import { createHash } from 'node:crypto';
import type { Knex } from 'knex';
import type { AskForReview, Revision } from '#contract/revisions.ts';
import { revisionStateWords } from '#contract/revisions.ts';
import { canonicalJson } from '#engine/model/canonical-json.ts';
import type { Design } from '#engine/model/design.ts';
import { withoutIssue } from '#engine/model/issue.ts';
import { sameJson } from '#engine/model/merge-patch.ts';
import { Refusal, notFound } from '../errors.ts';
import { recordActivity } from '../repositories/activity.ts';
import type { DesignRow } from '../repositories/designs.ts';
import {
  findRevision,
  insertRevision,
  listRevisions,
  readRevisionContent,
} from '../repositories/revisions.ts';
import { checkFactsOf } from './check-facts.ts';
import type { Context } from './context.ts';
import { freezeChecks } from './freeze-checks.ts';
import { onLockedDesign } from './log-edits.ts';
import { actorOf, moveDesign } from './on-revision.ts';
import { mailReviewAsked } from './review-mails.ts';
import { nextLabel } from './revision-labels.ts';
import { loadDocument } from './stored-documents.ts';

/** Freezes the draft as its next revision and puts that to review; until it is decided or taken back nobody edits. */
export function askForReview(
  context: Context,
  personId: string,
  designId: string,
  { message = '', sequence }: AskForReview,
): Promise<Revision> {
  return onLockedDesign(context, personId, designId, 'review.ask', async (trx, design) => {
    refuseUnlessReady(design, sequence);
    const revisions = await listRevisions(trx, designId);
    const { document: drawn } = await loadDocument(context, trx, design);
    await refuseSameAgain(trx, drawn, revisions);
    const actor = await actorOf(trx, personId);
    const label = nextLabel(
      revisions.map((revision) => revision.label),
      drawn.meta.revision,
    );
    const moved = await moveDesign(context, trx, actor, design, 'in-review', {
      revision: label,
      status: revisionStateWords['in-review'],
    });
    const { document } = moved.saved ?? { document: drawn };
    const at = context.clock();
    const id = await insertRevision(trx, {
      designId,
      number: (revisions[0]?.number ?? 0) + 1,
      label,
      sequence: moved.answer.sequence,
      document,
      contentHash: contentHashOf(document),
      checks: freezeChecks(document, await checkFactsOf(context, trx, moved.answer)).checks,
      message,
      askedBy: actor,
      askedAt: at,
    });
    await recordActivity(trx, {
      workspaceId: design.workspaceId,
      at,
      action: 'review.asked',
      personId,
      object: { kind: 'revision', id, name: design.title },
      designId,
      details: { revision: label },
    });
    await mailReviewAsked(context, trx, moved.answer, actor, message);
    const revision = await findRevision(trx, id);
    if (revision === null) throw notFound('revision');
    return { saved: moved.saved, answer: revision };
  });
}

/** SHA-256 of a document as canonical JSON, hex. */
export function contentHashOf(document: Design): string {
  return createHash('sha256').update(canonicalJson(document)).digest('hex');
}

const notNow: { readonly [state in Exclude<DesignRow['state'], 'draft'>]: string } = {
  'in-review': 'The design is in review already; take that back first if you want to ask anew.',
  approved: 'The design is approved; start the next revision and change something before you ask again.',
  built: 'The design is built; start the next revision and change something before you ask again.',
  superseded: 'The design is superseded; start the next revision before you ask for a review.',
};

function refuseUnlessReady({ state, sequence, changedBy }: DesignRow, seen: number): void {
  if (state !== 'draft') throw new Refusal('conflict', notNow[state]);
  if (sequence === seen) return;
  const who = changedBy === null ? '' : ` by ${changedBy}`;
  throw new Refusal(
    'conflict',
    `The design was changed${who} since you looked at it; look at it as it is now before you ask for a review.`,
    { details: [{ path: 'sequence', value: String(seen), expected: `expected ${sequence}` }] },
  );
}

async function refuseSameAgain(
  trx: Knex.Transaction,
  document: Design,
  revisions: readonly Revision[],
): Promise<void> {
  const last = revisions.find(({ state }) => state === 'approved' || state === 'built');
  if (last === undefined) return;
  const { document: before } = await readRevisionContent(trx, last.id);
  if (!sameJson(withoutIssue(before), withoutIssue(document))) return;
  throw new Refusal(
    'conflict',
    `Nothing differs from revision ${last.label}, which is approved; there is nothing to review.`,
  );
}
