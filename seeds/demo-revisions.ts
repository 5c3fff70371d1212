import { randomUUID } from 'node:crypto';
import type { Knex } from 'knex';
import { issueOf } from '#contract/revisions.ts';
import type { Design } from '#engine/model/design.ts';
import type { Issue } from '#engine/model/issue.ts';
import { asIssued, issuePatch } from '#engine/model/issue.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { appendPatches } from '../server/repositories/design-patches.ts';
import { insertSnapshot } from '../server/repositories/design-snapshots.ts';
import { insertDesign, setDesignState, updateAfterSave } from '../server/repositories/designs.ts';
import type { Actor } from '../server/repositories/revisions.ts';
import { insertRevision, settleRevision } from '../server/repositories/revisions.ts';
import { contentHashOf } from '../server/services/ask-for-review.ts';
import { nothingKnown } from '../server/services/check-facts.ts';
import { summarise } from '../server/services/design-summary.ts';
import { freezeChecks } from '../server/services/freeze-checks.ts';

const oneDayMs = 24 * 60 * 60 * 1000;

interface Story {
  readonly engagementId: string;
  readonly architect: Actor;
  readonly reviewer: Actor;
  /** When the design was changed last. */
  readonly at: Date;
}

/** Whether a demo design has been through a review, and how far. */
export type Reviewed = 'in-review' | 'approved-and-changed';

/** Keeps a design that was put to review, and perhaps approved and changed since, as people would have done it. */
export async function insertReviewedDesign(
  trx: Knex.Transaction,
  design: Design,
  reviewed: Reviewed,
  story: Story,
): Promise<void> {
  const { engagementId, architect, reviewer, at } = story;
  const label = design.meta.revision ?? 'A';
  const document = asIssued(design, { revision: label, status: 'In review' });
  const askedAt = new Date(at.getTime() - 2 * oneDayMs);
  const designId = await insertDesign(trx, engagementId, summarise(document), architect.id, askedAt);
  await insertSnapshot(trx, designId, { sequence: 0, document });
  const { checks } = freezeChecks(document, nothingKnown);
  const id = await insertRevision(trx, {
    designId,
    number: 1,
    label,
    sequence: 0,
    document,
    contentHash: contentHashOf(document),
    checks,
    message:
      reviewed === 'in-review'
        ? 'Ticketing for three terminals over the ring. Please look at the sizes on the way.'
        : 'One controller and its standby. Please look at the association before we order.',
    askedBy: architect,
    askedAt,
  });
  if (reviewed === 'in-review') {
    await setDesignState(trx, designId, 'in-review');
    return;
  }
  const decidedAt = new Date(at.getTime() - oneDayMs);
  const note = 'Checked against the survey of both sites.';
  await settleRevision(trx, id, { state: 'approved', by: reviewer, at: decidedAt, note, checks });
  const approved = issueOf({
    label,
    state: 'approved',
    decidedBy: reviewer,
    decidedAt: decidedAt.toISOString(),
  });
  const nextDraft: Issue = { revision: 'B', status: 'Draft' };
  const steps = [
    { by: reviewer, at: decidedAt, patch: issuePatch(approved), issue: true },
    { by: architect, at, patch: issuePatch(nextDraft), issue: true },
    { by: architect, at, patch: laterChange(document), issue: false },
  ];
  let now = document;
  for (const [index, step] of steps.entries()) {
    const patch = { sequence: index + 1, editId: randomUUID(), patch: step.patch, repair: false };
    await appendPatches(trx, designId, [{ ...patch, issue: step.issue }], step.by.id, step.at);
    now = applyPatch(now, step.patch);
    const saved = { sequence: index + 1, summary: summarise(now), personId: step.by.id, at: step.at };
    await updateAfterSave(trx, designId, saved);
  }
}

/** What the next revision is for: another VNI, and a wider replay window. */
function laterChange({ tunnels, associations }: Design): MergePatch {
  const vni = 10_126;
  const replayWindow = 1024;
  return {
    tunnels: Object.fromEntries(Object.keys(tunnels).map((id) => [id, { a: { vni }, b: { vni } }])),
    associations: Object.fromEntries(
      Object.keys(associations).map((id) => [id, { a: { replayWindow }, b: { replayWindow } }]),
    ),
  };
}
