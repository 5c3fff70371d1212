import { randomUUID } from 'node:crypto';
import type { LoggedPatch, SavedPatches } from '#contract/designs.ts';
import { authorise } from '../auth/authorise.ts';
import { Refusal, notFound } from '../errors.ts';
import type { PatchRow } from '../repositories/design-patches.ts';
import { findLoggedEdits, listPatches } from '../repositories/design-patches.ts';
import { findDesign } from '../repositories/designs.ts';
import type { Context } from './context.ts';
import { refuseUnlessDraft } from './design-states.ts';
import { logEdits, onLockedDesign } from './log-edits.ts';
import type { Edit } from './settle-edits.ts';

export interface EditsToSave {
  readonly baseSequence: number;
  readonly edits: readonly Edit[];
}

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
  const { patches, row } = await onLockedDesign(
    context,
    personId,
    designId,
    'design.edit',
    async (trx, design) => {
      if (baseSequence > design.sequence) throw aheadOfServer(baseSequence, design.sequence);
      const logged = await findLoggedEdits(
        trx,
        designId,
        edits.map(({ editId }) => editId),
      );
      const fresh = firstOfEach(edits).filter(({ editId }) => !logged.has(editId));
      // What is saved already stays acknowledged, whatever became of the design since.
      if (fresh.length > 0) refuseUnlessDraft(design);
      const saved = await logEdits(context, trx, personId, design, fresh, baseSequence);
      const sequence = saved?.sequence ?? design.sequence;
      return {
        saved,
        answer: {
          patches: await listPatches(trx, designId, baseSequence, sequence),
          row: (await findDesign(trx, designId)) ?? design,
        },
      };
    },
  );
  return { sequence: row.sequence, patches: patches.map(loggedPatchOf), counts: row.counts };
}

/** Gives a design another title: a patch like any other, since the title stands in the document. */
export async function saveTitle(
  context: Context,
  personId: string,
  designId: string,
  title: string,
): Promise<void> {
  await onLockedDesign(context, personId, designId, 'design.edit', async (trx, design) => {
    if (design.title === title) return { saved: null, answer: null };
    refuseUnlessDraft(design);
    const edit = { editId: randomUUID(), patch: { meta: { title } } };
    return { saved: await logEdits(context, trx, personId, design, [edit], design.sequence), answer: null };
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
