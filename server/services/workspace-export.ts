import type { Knex } from 'knex';
import type { Activity } from '#contract/activity.ts';
import { noPools } from '#contract/numbering.ts';
import { authorise } from '../auth/authorise.ts';
import { notFound } from '../errors.ts';
import { listActivity, recordActivity } from '../repositories/activity.ts';
import { listComments } from '../repositories/comments.ts';
import type { PatchRow } from '../repositories/design-patches.ts';
import { listPatches } from '../repositories/design-patches.ts';
import type { DesignRow } from '../repositories/designs.ts';
import { listDesigns } from '../repositories/designs.ts';
import { listEngagements } from '../repositories/engagements.ts';
import { listProfiles } from '../repositories/equipment-profiles.ts';
import { listMembers } from '../repositories/members.ts';
import { listRevisions, readRevisionContent } from '../repositories/revisions.ts';
import { listShares } from '../repositories/shares.ts';
import { listStandingWaivers, listWithdrawnWaivers } from '../repositories/waivers.ts';
import { findPools } from '../repositories/workspace-pools.ts';
import { findWorkspace } from '../repositories/workspaces.ts';
import type { Context } from './context.ts';
import { loadDocument } from './stored-documents.ts';

const rowsAtOnce = 500;

/**
 * Everything of a workspace as one JSON text, in pieces, as it is at one moment. What opens anything stays out: hashes,
 * tokens, secrets. That somebody took it along is recorded first.
 */
export async function exportWorkspace(
  context: Context,
  personId: string,
  workspaceId: string,
): Promise<AsyncIterable<string>> {
  const at = context.clock();
  await context.database.knex.transaction(async (trx) => {
    await authorise(trx, personId, 'workspace.manage', workspaceId, 'workspace');
    const workspace = await findWorkspace(trx, workspaceId);
    if (workspace === null) throw notFound('workspace');
    await recordActivity(trx, {
      workspaceId,
      at,
      action: 'workspace.exported',
      personId,
      object: { kind: 'workspace', id: workspaceId, name: workspace.name },
    });
  });
  return atOneMoment(context, workspaceId, at);
}

async function* atOneMoment(context: Context, workspaceId: string, at: Date): AsyncGenerator<string> {
  const trx = await context.database.knex.transaction({ isolationLevel: 'repeatable read', readOnly: true });
  try {
    yield* pieces(context, trx, workspaceId, at);
  } finally {
    // Nothing was written; whoever breaks the download off ends it here, too.
    await trx.rollback();
  }
}

async function* pieces(
  context: Context,
  trx: Knex.Transaction,
  workspaceId: string,
  at: Date,
): AsyncGenerator<string> {
  const members = await listMembers(trx, workspaceId);
  const pools = await findPools(trx, workspaceId);
  const head = {
    format: 'longpatch-workspace',
    version: 1,
    exportedAt: at.toISOString(),
    workspace: await findWorkspace(trx, workspaceId),
    people: members.map(({ personId, name, email, role }) => ({ personId, name, email, role })),
    pools: pools?.pools ?? noPools,
    profiles: (await listProfiles(trx, workspaceId)).map(withoutWorkspace),
    engagements: (await listEngagements(trx, workspaceId, true)).map(withoutWorkspace),
  };
  yield `${JSON.stringify(head).slice(0, -1)},"designs":[`;
  let separator = '';
  for (const design of await listDesigns(trx, workspaceId, true)) {
    const told = JSON.stringify(await describeDesign(context, trx, design));
    yield `${separator}${told.slice(0, -1)},"patches":`;
    yield* jsonArray(patchesOf(trx, design));
    yield '}';
    separator = ',';
  }
  yield '],"activity":';
  yield* jsonArray(activityOf(trx, workspaceId));
  yield '}';
}

async function describeDesign(context: Context, trx: Knex.Transaction, design: DesignRow) {
  const { engagementName: _, engagementArchivedAt: __, ...row } = withoutWorkspace(design);
  const revisions = [];
  for (const { contentHash: ___, ...revision } of await listRevisions(trx, design.id))
    revisions.push({ ...revision, ...(await readRevisionContent(trx, revision.id)) });
  const waivers = [
    ...(await listStandingWaivers(trx, design.id)),
    ...(await listWithdrawnWaivers(trx, design.id, Number.MAX_SAFE_INTEGER)),
  ];
  const shares = await listShares(trx, design.id);
  return {
    ...row,
    document: (await loadDocument(context, trx, design)).document,
    revisions,
    waivers,
    comments: await listComments(trx, design.id),
    shares: shares.map(({ passphraseHash: ____, hasPassphrase: _____, ...share }) => share),
  };
}

async function* patchesOf(trx: Knex.Transaction, design: DesignRow): AsyncGenerator<PatchRow> {
  for (let after = 0; after < design.sequence; after += rowsAtOnce)
    yield* await listPatches(trx, design.id, after, Math.min(after + rowsAtOnce, design.sequence));
}

async function* activityOf(trx: Knex.Transaction, workspaceId: string): AsyncGenerator<Activity> {
  let before: string | undefined;
  do {
    const rows: readonly Activity[] = await listActivity(trx, workspaceId, {}, { before, count: rowsAtOnce });
    yield* rows;
    before = rows.length < rowsAtOnce ? undefined : rows.at(-1)?.id;
  } while (before !== undefined);
}

async function* jsonArray(items: AsyncIterable<unknown>): AsyncGenerator<string> {
  let separator = '';
  yield '[';
  for await (const item of items) {
    yield separator + JSON.stringify(item);
    separator = ',';
  }
  yield ']';
}

function withoutWorkspace<Row extends { readonly workspaceId: string }>({
  workspaceId: _,
  ...row
}: Row): Omit<Row, 'workspaceId'> {
  return row;
}
