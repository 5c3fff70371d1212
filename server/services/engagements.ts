import type { Engagement } from '#contract/designs.ts';
import { deletedForDays } from '#contract/designs.ts';
import { authorise } from '../auth/authorise.ts';
import { notFound } from '../errors.ts';
import { recordActivity } from '../repositories/activity.ts';
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
  { database, clock }: Context,
  personId: string,
  workspaceId: string,
  { name, summary = '' }: { readonly name: string; readonly summary?: string },
): Promise<Engagement> {
  return database.knex.transaction(async (trx) => {
    await authorise(trx, personId, 'engagement.create', workspaceId, 'workspace');
    const at = clock();
    const engagement = await insertEngagement(trx, { workspaceId, name, summary }, at);
    await recordActivity(trx, {
      workspaceId,
      at,
      action: 'engagement.created',
      personId,
      object: { kind: 'engagement', id: engagement.id, name },
    });
    return { ...withoutDesigns(engagement), designs: [] };
  });
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
    const at = clock();
    const isArchived = before.archivedAt !== null;
    await updateEngagement(trx, engagementId, {
      ...words,
      ...(archived === undefined || archived === isArchived ? {} : { archivedAt: archived ? at : null }),
    });
    const details = changesOf(before, change);
    if (Object.keys(details).length > 0)
      await recordActivity(trx, {
        workspaceId: before.workspaceId,
        at,
        action: 'engagement.changed',
        personId,
        object: { kind: 'engagement', id: engagementId, name: change.name ?? before.name },
        details,
      });
    return before.workspaceId;
  });
  const all = await readEngagements(context, personId, workspaceId, true);
  const changed = all.find(({ id }) => id === engagementId);
  if (changed === undefined) throw notFound('engagement');
  return changed;
}

function changesOf(
  before: EngagementRow,
  {
    name,
    summary,
    archived,
  }: { readonly name?: string; readonly summary?: string; readonly archived?: boolean },
): Readonly<Record<string, string>> {
  return {
    ...(name === undefined || name === before.name ? {} : { nameBefore: before.name }),
    ...(summary === undefined || summary === before.summary ? {} : { summary: 'changed' }),
    ...(archived === undefined || archived === (before.archivedAt !== null)
      ? {}
      : { archived: archived ? 'yes' : 'no' }),
  };
}

function withoutDesigns(row: EngagementRow): Omit<Engagement, 'designs'> {
  return { ...row, archivedAt: row.archivedAt?.toISOString() ?? null };
}
