import type { Knex } from 'knex';
import type { DesignNumbers } from '#engine/numbering/numbering-context.ts';

/** A design whose numbers others should keep clear of, without the numbers. */
export interface NeighbourRow {
  readonly id: string;
  readonly title: string;
  readonly engagementName: string;
  readonly sequence: number;
  /** Changes when its numbers do; null where they were not kept yet. */
  readonly digest: string | null;
}

/**
 * The other designs of a workspace, the last changed first: not those put away or superseded, nor those of the same
 * identification number, which are versions of one drawing.
 */
export async function listNeighbours(
  knex: Knex,
  workspaceId: string,
  design: { readonly id: string; readonly identification: string | null },
): Promise<readonly NeighbourRow[]> {
  const query = knex('designs')
    .join('engagements', 'engagements.id', 'designs.engagement_id')
    .where({ workspace_id: workspaceId })
    .whereNull('designs.archived_at')
    .whereNull('engagements.archived_at')
    .whereNot({ state: 'superseded' })
    .whereNot({ 'designs.id': design.id })
    .orderBy([{ column: 'designs.changed_at', order: 'desc' }, { column: 'designs.id' }])
    .select<NeighbourRow[]>({
      id: 'designs.id',
      title: 'designs.title',
      engagementName: 'engagements.name',
      sequence: 'designs.sequence',
      digest: 'designs.numbers_digest',
    });
  if (design.identification !== null)
    query.whereRaw('designs.identification is distinct from ?', [design.identification]);
  return query;
}

/** What these designs hold, by id. */
export async function findNumbers(
  knex: Knex,
  ids: readonly string[],
): Promise<ReadonlyMap<string, DesignNumbers>> {
  const rows = await knex('designs')
    .whereIn('id', ids)
    .whereNotNull('numbers')
    .select<{ id: string; numbers: DesignNumbers }[]>('id', 'numbers');
  return new Map(rows.map(({ id, numbers }) => [id, numbers]));
}
