import { randomUUID } from 'node:crypto';
import type { LoggedPatch, SavedPatches } from '#contract/designs.ts';
import type { Knex } from 'knex';
import { authorise } from '../auth/authorise.ts';
import { Refusal, notFound } from '../errors.ts';
import type { NewPatch, PatchRow } from '../repositories/design-patches.ts';
import { appendPatches, findLoggedEdits, listPatches } from '../repositories/design-patches.ts';
import type { DesignRow } from '../repositories/designs.ts';
import { findDesign, lockDesign, updateAfterSave } from '../repositories/designs.ts';
import { checkFactsOf } from './check-facts.ts';
import type { Context } from './context.ts';
import { summarise } from './design-summary.ts';
import type { Edit } from './settle-edits.ts';
import { settleEdits } from './settle-edits.ts';
import { documentSaved, loadDocument } from './stored-documents.ts';
import type { StoredDocument } from './stored-documents.ts';

export interface EditsToSave {
  readonly baseSequence: number;
  readonly edits: readonly Edit[];
}

const lockTimeoutMs = 10_000;

/**
 * Saves edits that were made on top of a sequence number, all or none, and answers everything logged since. An edit that
 * the log holds already is not applied again.
 */
export async function saveEdits(
  context: Context,
  personId: string,
  designId: string,
  { baseSequence, edits }: EditsToSave,
): Promise<SavedPatches> {
  const { patches, row } = await inSave(context, personId, designId, async (trx, design) => {
    if (baseSequence > design.sequence) throw aheadOfServer(baseSequence, design.sequence);
    const logged = await findLoggedEdits(
      trx,
      designId,
      edits.map(({ editId }) => editId),
    );
    const fresh = firstOfEach(edits).filter(({ editId }) => !logged.has(editId));
    const saved = await append(context, trx, personId, design, fresh, baseSequence);
    const sequence = saved?.sequence ?? design.sequence;
    return {
      saved,
      answer: {
        patches: await listPatches(trx, designId, baseSequence, sequence),
        row: (await findDesign(trx, designId)) ?? design,
      },
    };
  });
  return { sequence: row.sequence, patches: patches.map(loggedPatchOf), counts: row.counts };
}

/** Gives a design another title: a patch like any other, since the title stands in the document. */
export async function saveTitle(
  context: Context,
  personId: string,
  designId: string,
  title: string,
): Promise<void> {
  await inSave(context, personId, designId, async (trx, design) => {
    if (design.title === title) return { saved: null, answer: null };
    const edit = { editId: randomUUID(), patch: { meta: { title } } };
    return { saved: await append(context, trx, personId, design, [edit], design.sequence), answer: null };
  });
}

/** Everything logged after a sequence number. */
export async function readPatches(
  { database: { knex } }: Context,
  personId: string,
  designId: string,
  after: number,
): Promise<{ sequence: number; patches: LoggedPatch[] }> {
  const design = await findDesign(knex, designId);
  if (design === null) throw notFound('design');
  await authorise(knex, personId, 'design.read', design.workspaceId, 'design');
  if (after > design.sequence) throw aheadOfServer(after, design.sequence);
  const patches = await listPatches(knex, designId, after, design.sequence);
  return { sequence: design.sequence, patches: patches.map(loggedPatchOf) };
}

/** Refuses changes to what is put away. */
export function refuseArchived(design: Pick<DesignRow, 'archivedAt' | 'engagementArchivedAt'>): void {
  if (design.archivedAt !== null) {
    throw new Refusal('conflict', 'The design is archived; restore it before you change it.');
  }
  if (design.engagementArchivedAt !== null) {
    throw new Refusal('conflict', 'The engagement is archived; restore it before you change its designs.');
  }
}

interface SaveResult<T> {
  readonly saved: StoredDocument | null;
  readonly answer: T;
}

async function inSave<T>(
  context: Context,
  personId: string,
  designId: string,
  work: (trx: Knex.Transaction, design: DesignRow) => Promise<SaveResult<T>>,
): Promise<T> {
  const { saved, answer } = await context.database.knex.transaction(async (trx) => {
    // An answer to a save promises that it outlives a crash, whatever the server's default is.
    await trx.raw('set local synchronous_commit = on');
    await trx.raw(`set local lock_timeout = ${lockTimeoutMs}`);
    const design = await lockDesign(trx, designId);
    if (design === null) throw notFound('design');
    await authorise(trx, personId, 'design.edit', design.workspaceId, 'design');
    refuseArchived(design);
    return work(trx, design);
  });
  if (saved !== null) documentSaved(context, designId, saved);
  return answer;
}

async function append(
  context: Context,
  trx: Knex.Transaction,
  personId: string,
  design: DesignRow,
  edits: readonly Edit[],
  baseSequence: number,
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
    sequence: design.sequence + index + 1,
  }));
  const sequence = design.sequence + patches.length;
  const at = context.clock();
  await appendPatches(trx, design.id, patches, personId, at);
  const summary = summarise(settled.document, await checkFactsOf(context, trx, design));
  await updateAfterSave(trx, design.id, { sequence, summary, personId, at });
  return { sequence, document: settled.document, snapshotSequence: stored.snapshotSequence };
}

function firstOfEach(edits: readonly Edit[]): readonly Edit[] {
  return [...new Map([...edits].reverse().map((edit) => [edit.editId, edit])).values()].reverse();
}

function aheadOfServer(asked: number, sequence: number): Refusal {
  return new Refusal(
    'conflict',
    `The design has ${sequence} patches here, so nothing can follow number ${asked}; open the design again.`,
  );
}

function loggedPatchOf({ at, ...row }: PatchRow): LoggedPatch {
  return { ...row, at: at.toISOString() };
}
