import type { Action } from '#contract/session.ts';
import type { Knex } from 'knex';
import { authorise } from '../auth/authorise.ts';
import { Refusal, notFound } from '../errors.ts';
import { announce } from '../live/announce.ts';
import type { NewPatch } from '../repositories/design-patches.ts';
import { appendPatches, listPatches } from '../repositories/design-patches.ts';
import type { DesignRow } from '../repositories/designs.ts';
import { lockDesign, updateAfterSave } from '../repositories/designs.ts';
import { checkFactsOf } from './check-facts.ts';
import type { Context } from './context.ts';
import { refuseArchived } from './design-states.ts';
import { summarise } from './design-summary.ts';
import type { Edit } from './settle-edits.ts';
import { settleEdits } from './settle-edits.ts';
import { documentSaved, loadDocument } from './stored-documents.ts';
import type { StoredDocument } from './stored-documents.ts';

const lockTimeoutMs = 10_000;

export interface LoggedResult<T> {
  readonly saved: StoredDocument | null;
  readonly answer: T;
}

/**
 * Works on a design that nobody else can change meanwhile, once it is sure that the person may. What was logged outlives a
 * crash when this is done.
 */
export async function onLockedDesign<T>(
  context: Context,
  personId: string,
  designId: string,
  action: Action,
  work: (trx: Knex.Transaction, design: DesignRow) => Promise<LoggedResult<T>>,
): Promise<T> {
  const { saved, answer } = await context.database.knex.transaction(async (trx) => {
    // An answer to a save promises that it outlives a crash, whatever the server's default is.
    await trx.raw('set local synchronous_commit = on');
    await trx.raw(`set local lock_timeout = ${lockTimeoutMs}`);
    const design = await lockDesign(trx, designId);
    if (design === null) throw notFound('design');
    await authorise(trx, personId, action, design.workspaceId, 'design');
    refuseArchived(design);
    return work(trx, design);
  });
  if (saved !== null) documentSaved(context, designId, saved);
  return answer;
}

/**
 * Appends edits to the log as they settle on what was logged since `baseSequence`; null where there are none. With `issue`
 * they are what a change of state writes into the title block.
 */
export async function logEdits(
  context: Context,
  trx: Knex.Transaction,
  personId: string,
  design: DesignRow,
  edits: readonly Edit[],
  baseSequence: number,
  issue = false,
): Promise<StoredDocument | null> {
  if (edits.length === 0) return null;
  const stored = await loadDocument(context, trx, design);
  const since = await listPatches(trx, design.id, baseSequence, design.sequence);
  const settled = settleEdits(
    stored.document,
    edits,
    since.map(({ patch }) => patch),
  );
  if (!settled.ok) {
    const first = settled.problems[0];
    const where =
      first === undefined
        ? ''
        : `: ${first.path === '' ? 'it' : first.path} would be ${first.value}, ${first.expected}`;
    throw settled.reason === 'too-large'
      ? new Refusal('too-large', `The design would be too large${where}.`, { details: settled.problems })
      : new Refusal('invalid-design', `The edits would leave no valid design${where}.`, {
          details: settled.problems,
        });
  }
  const patches = settled.edits.map((edit, index): NewPatch => ({
    ...edit,
    issue,
    sequence: design.sequence + index + 1,
  }));
  const sequence = design.sequence + patches.length;
  const at = context.clock();
  await appendPatches(trx, design.id, patches, personId, at);
  const summary = summarise(settled.document, await checkFactsOf(context, trx, design));
  await updateAfterSave(trx, design.id, { sequence, summary, personId, at });
  await announce(trx, { designId: design.id, change: 'patches', sequence });
  return { sequence, document: settled.document, snapshotSequence: stored.snapshotSequence };
}
