import type { Knex } from 'knex';
import type { Decide, Revision } from '#contract/revisions.ts';
import { isIssued, issueOf } from '#contract/revisions.ts';
import { collections } from '#engine/model/design.ts';
import type { Finding } from '#engine/rules/finding.ts';
import { Refusal } from '../errors.ts';
import { recordActivity } from '../repositories/activity.ts';
import { listAuthors } from '../repositories/design-patches.ts';
import { findSnapshot } from '../repositories/design-snapshots.ts';
import { findCreation } from '../repositories/designs.ts';
import {
  listRevisions,
  readRevisionContent,
  settleRevision,
  supersedeIssued,
} from '../repositories/revisions.ts';
import { checkFactsOf } from './check-facts.ts';
import type { Context } from './context.ts';
import { freezeChecks } from './freeze-checks.ts';
import type { HeldRevision } from './on-revision.ts';
import { moveDesign, onRevision } from './on-revision.ts';
import { mailDecision } from './review-mails.ts';
import { nextLabel } from './revision-labels.ts';
import type { StoredDocument } from './stored-documents.ts';

/** Approves the revision in review, or sends it back with a reason. */
export function decideReview(
  context: Context,
  personId: string,
  revisionId: string,
  decide: Decide,
): Promise<Revision> {
  return onRevision(context, personId, revisionId, 'review.decide', (trx, held) =>
    decide.decision === 'approve'
      ? approve(context, trx, held, decide.note ?? '')
      : backToDraft(context, trx, held, 'sent-back', decide.note),
  );
}

/** Takes back the question for a review: the design is a draft again, the frozen copy stays on record. */
export function withdrawReview(context: Context, personId: string, revisionId: string): Promise<Revision> {
  return onRevision(context, personId, revisionId, 'review.ask', (trx, held) =>
    backToDraft(context, trx, held, 'withdrawn', ''),
  );
}

async function backToDraft(
  context: Context,
  trx: Knex.Transaction,
  held: HeldRevision,
  state: 'withdrawn' | 'sent-back',
  note: string,
): Promise<StoredDocument | null> {
  const { revision, actor, at } = held;
  refuseUnlessInReview(revision);
  await settleRevision(trx, revision.id, { state, by: actor, at, note });
  await record(trx, held, state === 'withdrawn' ? 'review.withdrawn' : 'review.sent-back', revision);
  if (state === 'sent-back') await mailDecision(context, trx, state, held.design, revision, actor, note);
  return startDraft(context, trx, held);
}

/** Makes the design a draft under the next label. */
export async function startDraft(
  context: Context,
  trx: Knex.Transaction,
  { design, actor }: Pick<HeldRevision, 'design' | 'actor'>,
): Promise<StoredDocument | null> {
  const used = (await listRevisions(trx, design.id)).map(({ label }) => label);
  const issue = { revision: nextLabel(used, undefined), status: 'Draft' };
  return (await moveDesign(context, trx, actor, design, 'draft', issue)).saved;
}

async function approve(
  context: Context,
  trx: Knex.Transaction,
  held: HeldRevision,
  note: string,
): Promise<StoredDocument | null> {
  const { revision, design, actor, at } = held;
  refuseUnlessInReview(revision);
  await refuseSoleAuthor(trx, held);
  const { document } = await readRevisionContent(trx, revision.id);
  // Checked as things stand today: waivers end, and other designs take numbers.
  const { checks, open } = freezeChecks(document, await checkFactsOf(context, trx, design));
  refuseBlocking(revision, open);
  const before = await supersedeIssued(trx, design.id, {
    by: actor,
    at,
    note: `Replaced by revision ${revision.label}`,
  });
  await settleRevision(trx, revision.id, { state: 'approved', by: actor, at, note, checks });
  await record(trx, held, 'review.approved', revision);
  await mailDecision(context, trx, 'approved', design, revision, actor, note);
  if (before !== null) await record(trx, held, 'design.superseded', before, { by: revision.label });
  const issue = issueOf({
    label: revision.label,
    state: 'approved',
    decidedBy: actor,
    decidedAt: at.toISOString(),
  });
  return (await moveDesign(context, trx, actor, design, 'approved', issue)).saved;
}

const shownFindings = 3;

function refuseBlocking({ label }: Revision, open: readonly Finding[]): void {
  const blocking = open.filter(({ severity }) => severity === 'blocking');
  if (blocking.length === 0) return;
  const shown = blocking.slice(0, shownFindings).map(({ sentence }) => sentence);
  const more = blocking.length - shown.length;
  const [what, them] =
    blocking.length === 1 ? ['a blocking finding', 'it'] : [`${blocking.length} blocking findings`, 'them'];
  throw new Refusal(
    'conflict',
    `Revision ${label} has ${what}: ${shown.join('; ')}${more > 0 ? `; and ${more} more` : ''}. Send it back to have ${them} mended, or waive ${them} with a reason.`,
    {
      details: blocking.map(({ sentence }) => ({
        path: 'findings',
        value: sentence,
        expected: 'expected to be mended or waived',
      })),
    },
  );
}

/** A second pair of eyes: who alone drew what is new since the last approval does not approve it. */
async function refuseSoleAuthor(
  trx: Knex.Transaction,
  { revision, design, actor }: HeldRevision,
): Promise<void> {
  const last = (await listRevisions(trx, design.id)).find(({ state }) => isIssued(state));
  const authors = new Set(await listAuthors(trx, design.id, last?.sequence ?? 0, revision.sequence));
  if (last === undefined && (await beganDrawn(trx, design.id)))
    authors.add((await findCreation(trx, design.id))?.personId ?? null);
  if (authors.size !== 1 || !authors.has(actor.id)) return;
  const since = last === undefined ? '' : ` since revision ${last.label}`;
  throw new Refusal(
    'not-allowed',
    `You alone drew what is new${since}, and a second pair of eyes has to approve it; ask a reviewer or another owner.`,
  );
}

/** Whether the document that a design began with had anything drawn in it, as a copy or an import has. */
async function beganDrawn(trx: Knex.Transaction, designId: string): Promise<boolean> {
  const { document } = await findSnapshot(trx, designId, 0);
  return collections.some((collection) => Object.keys(document[collection]).length > 0);
}

function refuseUnlessInReview({ label, state, decidedBy, note }: Revision): void {
  if (state === 'in-review') return;
  const by = decidedBy === null ? '' : ` by ${decidedBy.name}`;
  const words = {
    withdrawn: `Revision ${label} was taken back${by} meanwhile; wait until a review is asked for again.`,
    'sent-back': `Revision ${label} was sent back${by} already${note === '' ? '' : `: ${note}`}`,
    approved: `Revision ${label} was approved${by} already; there is nothing to decide any more.`,
    built: `Revision ${label} was approved${by} and is built; start the next revision for changes.`,
    superseded: `Revision ${label} was approved${by} and is superseded; open the newest one.`,
  };
  throw new Refusal('conflict', words[state], {
    details: [{ path: 'state', value: state, expected: 'expected in-review' }],
  });
}

/** Notes what became of a revision. */
export async function record(
  trx: Knex.Transaction,
  { design, actor, at }: HeldRevision,
  action: 'review.withdrawn' | 'review.sent-back' | 'review.approved' | 'design.built' | 'design.superseded',
  { id, label }: Pick<Revision, 'id' | 'label'>,
  details: Readonly<Record<string, string>> = {},
): Promise<void> {
  await recordActivity(trx, {
    workspaceId: design.workspaceId,
    at,
    action,
    personId: actor.id,
    object: { kind: 'revision', id, name: design.title },
    designId: design.id,
    details: { revision: label, ...details },
  });
}
