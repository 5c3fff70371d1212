import type { DeleteWorkspace } from '#contract/workspace-export.ts';
import { authorise } from '../auth/authorise.ts';
import { Refusal, notFound } from '../errors.ts';
import { isDemoPerson } from '../repositories/demo-people.ts';
import { hasSecondStep } from '../repositories/second-steps.ts';
import { deleteWorkspaces, findWorkspace, lockWorkspace } from '../repositories/workspaces.ts';
import { requirePassword } from './accounts.ts';
import { announcePlacesIn } from './announce-places.ts';
import type { Context } from './context.ts';
import { requireSecondStep } from './second-step.ts';

/**
 * Deletes a workspace with all that is in it. Who does names it and proves again who they are; accounts and sessions stay.
 * To its members it is as if it had never been.
 */
export async function deleteWorkspace(
  context: Context,
  personId: string,
  workspaceId: string,
  { name, password, code }: DeleteWorkspace,
): Promise<void> {
  const { knex } = context.database;
  await authorise(knex, personId, 'workspace.manage', workspaceId, 'workspace');
  if (await isDemoPerson(knex, personId)) {
    throw new Refusal('conflict', 'The demo’s workspace stays; start one of your own, which you can delete.');
  }
  await requireName(context, workspaceId, name);
  await requirePassword(context, personId, password, 'password');
  if (await hasSecondStep(knex, personId)) await requireSecondStep(context, personId, code ?? '');
  await knex.transaction(async (trx) => {
    await lockWorkspace(trx, workspaceId);
    // Meanwhile the person may have become another than an owner.
    await authorise(trx, personId, 'workspace.manage', workspaceId, 'workspace');
    await announcePlacesIn(trx, workspaceId);
    await deleteWorkspaces(trx, [workspaceId]);
  });
}

async function requireName({ database }: Context, workspaceId: string, name: string): Promise<void> {
  const workspace = await findWorkspace(database.knex, workspaceId);
  if (workspace === null) throw notFound('workspace');
  if (workspace.name === name.trim()) return;
  throw new Refusal(
    'invalid-request',
    `The name is not that of this workspace; type ${workspace.name} to delete it.`,
    { details: [{ path: 'name', value: name.slice(0, 80), expected: `expected ${workspace.name}` }] },
  );
}
