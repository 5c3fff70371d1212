import type { Knex } from 'knex';
import type { Membership } from '#contract/session.ts';
import type { WorkspaceSettings } from '#contract/workspaces.ts';
import { authorise } from '../auth/authorise.ts';
import { permissions } from '../auth/permissions.ts';
import { tokenLimits } from '../auth/token-limits.ts';
import { Refusal, notFound } from '../errors.ts';
import { recordActivity } from '../repositories/activity.ts';
import { listMembers } from '../repositories/members.ts';
import type { MembershipRow } from '../repositories/memberships.ts';
import { insertMembership, insertWorkspace, listMemberships } from '../repositories/memberships.ts';
import { hasSecondStep } from '../repositories/second-steps.ts';
import { findWorkspace, lockWorkspace, updateWorkspace } from '../repositories/workspaces.ts';
import { announcePlacesIn } from './announce-places.ts';
import type { Context } from './context.ts';

/** A person's workspaces by name, and what they may do there; a request with a token sees those that the token reaches. */
export async function readMemberships({ database }: Context, personId: string): Promise<Membership[]> {
  const [rows, isSecured] = await Promise.all([
    listMemberships(database.knex, personId),
    hasSecondStep(database.knex, personId),
  ]);
  const only = tokenLimits()?.workspaceId ?? null;
  return rows
    .filter(({ workspaceId }) => only === null || workspaceId === only)
    .map((row) => membershipOf(row, isSecured));
}

function membershipOf({ requiresSecondStep, ...row }: MembershipRow, isSecured: boolean): Membership {
  const needsSecondStep = requiresSecondStep && !isSecured;
  return { ...row, actions: needsSecondStep ? [] : [...permissions[row.role]], needsSecondStep };
}

/** Starts a workspace; whoever does owns it. */
export async function startWorkspace(context: Context, personId: string, name: string): Promise<Membership> {
  const workspaceId = await context.database.knex.transaction((trx) =>
    insertOwnedWorkspace(trx, personId, name, context.clock()),
  );
  const made = (await readMemberships(context, personId)).find((each) => each.workspaceId === workspaceId);
  if (made === undefined) throw new Error('a workspace went as it was made');
  return made;
}

/** Puts a workspace down with its owner. */
export async function insertOwnedWorkspace(
  trx: Knex.Transaction,
  personId: string,
  name: string,
  at: Date,
): Promise<string> {
  const workspaceId = await insertWorkspace(trx, name);
  await insertMembership(trx, workspaceId, personId, 'owner');
  await recordActivity(trx, {
    workspaceId,
    at,
    action: 'workspace.created',
    personId,
    object: { kind: 'workspace', id: workspaceId, name },
  });
  return workspaceId;
}

/** What owners set for their workspace. */
export async function readSettings(
  { database: { knex } }: Context,
  personId: string,
  workspaceId: string,
): Promise<WorkspaceSettings> {
  await authorise(knex, personId, 'workspace.manage', workspaceId, 'workspace');
  return settingsOf(knex, workspaceId);
}

/** Renames a workspace, or asks its members for two-step sign-in; who asks must have it themselves. */
export async function changeSettings(
  { database, clock }: Context,
  personId: string,
  workspaceId: string,
  change: { readonly name?: string; readonly requiresSecondStep?: boolean },
): Promise<WorkspaceSettings> {
  return database.knex.transaction(async (trx) => {
    await lockWorkspace(trx, workspaceId);
    await authorise(trx, personId, 'workspace.manage', workspaceId, 'workspace');
    const before = await settingsOf(trx, workspaceId);
    const details: Record<string, string> = {};
    if (change.name !== undefined && change.name !== before.name) {
      details['nameBefore'] = before.name;
      details['name'] = change.name;
    }
    if (change.requiresSecondStep !== undefined && change.requiresSecondStep !== before.requiresSecondStep) {
      if (change.requiresSecondStep && !(await hasSecondStep(trx, personId))) {
        throw new Refusal(
          'conflict',
          'You have not set up two-step sign-in yourself and would shut yourself out; do so first, under Account.',
        );
      }
      details['twoStep'] = change.requiresSecondStep ? 'required' : 'not required';
    }
    if (Object.keys(details).length === 0) return before;
    await updateWorkspace(trx, workspaceId, change);
    await recordActivity(trx, {
      workspaceId,
      at: clock(),
      action: 'workspace.changed',
      personId,
      object: { kind: 'workspace', id: workspaceId, name: change.name ?? before.name },
      details,
    });
    await announcePlacesIn(trx, workspaceId);
    return settingsOf(trx, workspaceId);
  });
}

async function settingsOf(knex: Knex, workspaceId: string): Promise<WorkspaceSettings> {
  const [workspace, members] = [await findWorkspace(knex, workspaceId), await listMembers(knex, workspaceId)];
  if (workspace === null) throw notFound('workspace');
  return { ...workspace, withoutSecondStep: members.filter((member) => !member.hasSecondStep).length };
}
