import type { Engagement } from '#contract/designs.ts';
import { deletedForDays } from '#contract/designs.ts';
import { authorise } from '../auth/authorise.ts';
import { notFound } from '../errors.ts';
import { listDesigns, removeDeletedDesigns } from '../repositories/designs.ts';
import type { EngagementRow } from '../repositories/engagements.ts';
import {
  findEngagement,
  insertEngagement,
  listEngagements,
  updateEngagement,
} from '../repositories/engagements.ts';
import type { Context } from './context.ts';
import { summaryOf } from './design-summary.ts';
import { withCurrentCounts } from './waivers.ts';

const deletedForMs = deletedForDays * 24 * 60 * 60 * 1000;

/** A workspace's engagements with their designs; archived ones of both kinds only when asked for. */
export async function readEngagements(
  context: Context,
  personId: string,
  workspaceId: string,
  withArchived: boolean,
): Promise<Engagement[]> {
  const { knex } = context.database;
  await authorise(knex, personId, 'workspace.read', workspaceId, 'workspace');
  await removeDeletedDesigns(knex, workspaceId, new Date(context.clock().getTime() - deletedForMs));
  const [engagements, listed] = await Promise.all([
    listEngagements(knex, workspaceId, withArchived),
    listDesigns(knex, workspaceId, withArchived),
  ]);
  const designs = await withCurrentCounts(context, listed);
  return engagements.map((engagement) => ({
    ...withoutDesigns(engagement),
    designs: designs.filter(({ engagementId }) => engagementId === engagement.id).map(summaryOf),
  }));
}

export async function createEngagement(
  { database: { knex }, clock }: Context,
  personId: string,
  workspaceId: string,
  { name, summary = '' }: { readonly name: string; readonly summary?: string },
): Promise<Engagement> {
  await authorise(knex, personId, 'engagement.create', workspaceId, 'workspace');
  const engagement = await insertEngagement(knex, { workspaceId, name, summary }, clock());
  return { ...withoutDesigns(engagement), designs: [] };
}

/** Renames, describes, archives or restores an engagement. */
export async function changeEngagement(
  context: Context,
  personId: string,
  engagementId: string,
  change: { readonly name?: string; readonly summary?: string; readonly archived?: boolean },
): Promise<Engagement> {
  const { database, clock } = context;
  const workspaceId = await database.knex.transaction(async (trx) => {
    const before = await findEngagement(trx, engagementId);
    if (before === null) throw notFound('engagement');
    await authorise(trx, personId, 'engagement.edit', before.workspaceId, 'engagement');
    const { archived, ...words } = change;
    const isArchived = before.archivedAt !== null;
    await updateEngagement(trx, engagementId, {
      ...words,
      ...(archived === undefined || archived === isArchived ? {} : { archivedAt: archived ? clock() : null }),
    });
    return before.workspaceId;
  });
  const all = await readEngagements(context, personId, workspaceId, true);
  const changed = all.find(({ id }) => id === engagementId);
  if (changed === undefined) throw notFound('engagement');
  return changed;
}

function withoutDesigns(row: EngagementRow): Omit<Engagement, 'designs'> {
  return { ...row, archivedAt: row.archivedAt?.toISOString() ?? null };
}
