import type { Knex } from 'knex';
import type { Pools } from '#contract/numbering.ts';

export interface WorkspacePoolsRow {
  readonly pools: Pools;
  readonly changedAt: Date;
  /** The person's name. */
  readonly changedBy: string | null;
}

export async function findPools(knex: Knex, workspaceId: string): Promise<WorkspacePoolsRow | null> {
  const row = await knex('workspace_pools')
    .leftJoin('people', 'people.id', 'workspace_pools.changed_by')
    .where({ workspace_id: workspaceId })
    .first<WorkspacePoolsRow | undefined>({
      pools: 'pools',
      changedAt: 'changed_at',
      changedBy: 'people.name',
    });
  return row ?? null;
}

/** Holds a workspace's pools until the transaction ends, also where there are none yet. */
export async function lockPools(trx: Knex.Transaction, workspaceId: string): Promise<void> {
  await trx('workspaces').where({ id: workspaceId }).forUpdate().first('id');
}

export async function putPools(
  trx: Knex.Transaction,
  workspaceId: string,
  pools: Pools,
  personId: string,
  at: Date,
): Promise<void> {
  const columns = { pools: JSON.stringify(pools), changed_at: at, changed_by: personId };
  await trx('workspace_pools')
    .insert({ workspace_id: workspaceId, ...columns })
    .onConflict('workspace_id')
    .merge(columns);
}
