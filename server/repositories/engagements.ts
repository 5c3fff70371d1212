import type { Knex } from 'knex';

export interface EngagementRow {
  readonly id: string;
  readonly workspaceId: string;
  readonly name: string;
  readonly summary: string;
  readonly archivedAt: Date | null;
}

const columns = {
  id: 'id',
  workspaceId: 'workspace_id',
  name: 'name',
  summary: 'summary',
  archivedAt: 'archived_at',
};

/** A workspace's engagements, the oldest first. */
export async function listEngagements(
  knex: Knex,
  workspaceId: string,
  withArchived: boolean,
): Promise<readonly EngagementRow[]> {
  const query = knex('engagements').where({ workspace_id: workspaceId }).orderBy(['created_at', 'id']);
  if (!withArchived) query.whereNull('archived_at');
  return query.select<EngagementRow[]>(columns);
}

export async function findEngagement(knex: Knex, id: string): Promise<EngagementRow | null> {
  return (await knex('engagements').where({ id }).first<EngagementRow>(columns)) ?? null;
}

export async function insertEngagement(
  knex: Knex,
  engagement: { readonly workspaceId: string; readonly name: string; readonly summary: string },
  at: Date,
): Promise<EngagementRow> {
  const rows = await knex('engagements')
    .insert({
      workspace_id: engagement.workspaceId,
      name: engagement.name,
      summary: engagement.summary,
      created_at: at,
    })
    .returning<{ id: string }[]>('id');
  return { id: rows[0]!.id, ...engagement, archivedAt: null };
}

export async function updateEngagement(
  knex: Knex,
  id: string,
  change: { readonly name?: string; readonly summary?: string; readonly archivedAt?: Date | null },
): Promise<void> {
  const columnsToSet = {
    ...(change.name === undefined ? {} : { name: change.name }),
    ...(change.summary === undefined ? {} : { summary: change.summary }),
    ...(change.archivedAt === undefined ? {} : { archived_at: change.archivedAt }),
  };
  if (Object.keys(columnsToSet).length > 0) await knex('engagements').where({ id }).update(columnsToSet);
}
