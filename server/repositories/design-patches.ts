import type { Knex } from 'knex';
import type { MergePatch } from '#engine/model/merge-patch.ts';

export interface PatchRow {
  readonly sequence: number;
  readonly editId: string;
  /** Name of who made it; null for a repair. */
  readonly by: string | null;
  readonly at: Date;
  readonly patch: MergePatch;
  readonly repair: boolean;
}

/** The patches with sequence numbers above `after` up to `upTo`, in order. */
export async function listPatches(
  knex: Knex,
  designId: string,
  after: number,
  upTo: number,
): Promise<readonly PatchRow[]> {
  return knex('design_patches')
    .leftJoin('people', 'people.id', 'design_patches.made_by')
    .where({ design_id: designId })
    .where('sequence', '>', after)
    .where('sequence', '<=', upTo)
    .orderBy('sequence')
    .select<PatchRow[]>({
      sequence: 'sequence',
      editId: 'edit_id',
      by: 'people.name',
      at: 'made_at',
      patch: 'patch',
      repair: 'is_repair',
    });
}

/** Which of these edits the log holds already. */
export async function findLoggedEdits(
  knex: Knex,
  designId: string,
  editIds: readonly string[],
): Promise<ReadonlySet<string>> {
  const found = await knex('design_patches')
    .where({ design_id: designId })
    .whereIn('edit_id', editIds)
    .pluck<string[]>('edit_id');
  return new Set(found);
}

export interface NewPatch {
  readonly sequence: number;
  readonly editId: string;
  readonly patch: MergePatch;
  readonly repair: boolean;
  /** Written into the title block when the state changed: nobody's drawing. */
  readonly issue: boolean;
}

const rowsPerStatement = 500;

/** Appends to the log. The person stands by their own edits; a repair is nobody's. */
export async function appendPatches(
  trx: Knex.Transaction,
  designId: string,
  patches: readonly NewPatch[],
  personId: string,
  at: Date,
): Promise<void> {
  const rows = patches.map(({ sequence, editId, patch, repair, issue }) => ({
    design_id: designId,
    sequence,
    edit_id: editId,
    made_by: repair ? null : personId,
    made_at: at,
    is_repair: repair,
    is_issue: issue,
    patch: JSON.stringify(patch),
  }));
  await trx.batchInsert('design_patches', rows, rowsPerStatement);
}

/** Who drew what was logged after one number up to another; null for who is gone. */
export async function listAuthors(
  knex: Knex,
  designId: string,
  after: number,
  upTo: number,
): Promise<readonly (string | null)[]> {
  return knex('design_patches')
    .where({ design_id: designId, is_repair: false, is_issue: false })
    .where('sequence', '>', after)
    .where('sequence', '<=', upTo)
    .distinct('made_by')
    .pluck<(string | null)[]>('made_by');
}

/** When which patch was made and by whom, without what it says; in order. */
export async function listPatchTimes(
  knex: Knex,
  designId: string,
): Promise<readonly (Pick<PatchRow, 'sequence' | 'by' | 'at' | 'repair'> & { readonly issue: boolean })[]> {
  return knex('design_patches')
    .leftJoin('people', 'people.id', 'design_patches.made_by')
    .where({ design_id: designId })
    .orderBy('sequence')
    .select({
      sequence: 'sequence',
      by: 'people.name',
      at: 'made_at',
      repair: 'is_repair',
      issue: 'is_issue',
    });
}
