import type { DesignSummary } from '#contract/designs.ts';
import type { Revision } from '#contract/revisions.ts';
import { issueOf } from '#contract/revisions.ts';
import { Refusal } from '../errors.ts';
import { setBuilt, supersedeIssued } from '../repositories/revisions.ts';
import { dayOf } from './check-facts.ts';
import type { Context } from './context.ts';
import { record, startDraft } from './decide-review.ts';
import { summaryOf } from './design-summary.ts';
import { requireDesign } from './designs.ts';
import { onLockedDesign } from './log-edits.ts';
import { actorOf, moveDesign, onRevision } from './on-revision.ts';

/** Notes the day on which an approved revision was built. */
export function markBuilt(
  context: Context,
  personId: string,
  revisionId: string,
  builtOn: string,
): Promise<Revision> {
  return onRevision(context, personId, revisionId, 'design.build', async (trx, held) => {
    const { revision, design, actor } = held;
    if (revision.state !== 'approved') throw notApproved(revision, 'marked as built');
    refuseDay(builtOn, revision.decidedAt!, held.at);
    await setBuilt(trx, revision.id, actor, builtOn);
    await record(trx, held, 'design.built', revision, { on: builtOn });
    // A later draft goes on beside it.
    if (design.state !== 'approved') return null;
    return (await moveDesign(context, trx, actor, design, 'built', issueOf({ ...revision, state: 'built' })))
      .saved;
  });
}

/** Ends the time of the revision to build from, though no other takes its place. */
export function supersedeRevision(
  context: Context,
  personId: string,
  revisionId: string,
  reason: string,
): Promise<Revision> {
  return onRevision(context, personId, revisionId, 'design.build', async (trx, held) => {
    const { revision, design, actor, at } = held;
    if (revision.state !== 'approved' && revision.state !== 'built')
      throw notApproved(revision, 'superseded');
    await supersedeIssued(trx, design.id, { by: actor, at, note: reason });
    await record(trx, held, 'design.superseded', revision, { reason });
    if (design.state !== 'approved' && design.state !== 'built') return null;
    const issue = issueOf({ ...revision, state: 'superseded' });
    return (await moveDesign(context, trx, actor, design, 'superseded', issue)).saved;
  });
}

/** Makes an approved, built or superseded design a draft again; what was approved stays as it is. */
export async function startNextRevision(
  context: Context,
  personId: string,
  designId: string,
): Promise<DesignSummary> {
  await onLockedDesign(context, personId, designId, 'design.edit', async (trx, design) => {
    if (design.state === 'in-review')
      throw new Refusal(
        'conflict',
        'The design is in review; take that back, or wait for the decision, before you start the next revision.',
      );
    if (design.state === 'draft') return { saved: null, answer: null };
    const actor = await actorOf(trx, personId);
    return { saved: await startDraft(context, trx, { design, actor }), answer: null };
  });
  return summaryOf(await requireDesign(context, designId));
}

function notApproved({ label, state, supersededBy }: Revision, what: string): Refusal {
  const by = supersededBy === null ? '' : ` by ${supersededBy.name}`;
  const words = {
    'in-review': `is in review and not approved, so it can’t be ${what}; wait for the decision`,
    withdrawn: `was taken back, so it can’t be ${what}; ask for a review again`,
    'sent-back': `was sent back, so it can’t be ${what}; mend the draft and ask again`,
    approved: 'is approved',
    built: 'is marked as built already',
    superseded: `was superseded${by}, so it can’t be ${what}; open the newest one`,
  };
  return new Refusal('conflict', `Revision ${label} ${words[state]}.`, {
    details: [{ path: 'state', value: state, expected: 'expected approved' }],
  });
}

// The day is the builder's own: it begins up to 14 hours before UTC's and ends up to 12 hours after it.
const earliestZoneMs = 14 * 60 * 60 * 1000;
const latestZoneMs = 12 * 60 * 60 * 1000;

function refuseDay(builtOn: string, approvedAt: string, now: Date): void {
  const first = dayOf(new Date(Date.parse(approvedAt) - latestZoneMs));
  const last = dayOf(new Date(now.getTime() + earliestZoneMs));
  if (builtOn >= first && builtOn <= last) return;
  const expected =
    builtOn < first
      ? `expected a day not before the approval on ${approvedAt.slice(0, 10)}`
      : 'expected today or an earlier day';
  throw new Refusal('invalid-request', `'builtOn' is ${builtOn}: ${expected}.`, {
    details: [{ path: 'builtOn', value: builtOn, expected }],
  });
}
