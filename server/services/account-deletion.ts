import type { DeletionPreview } from '#contract/account.ts';
import { Refusal } from '../errors.ts';
import { announcePlace } from '../live/announce.ts';
import { recordActivity } from '../repositories/activity.ts';
import { deleteTokens } from '../repositories/api-tokens.ts';
import { isDemoPerson } from '../repositories/demo-people.ts';
import type { Standing } from '../repositories/members.ts';
import { deleteMembership, listStandings } from '../repositories/members.ts';
import type { Account } from '../repositories/people.ts';
import { emptyAccount } from '../repositories/people.ts';
import { deleteSecondStep, hasSecondStep } from '../repositories/second-steps.ts';
import { deleteAllSessions } from '../repositories/sessions.ts';
import { deleteWorkspaces, lockWorkspace } from '../repositories/workspaces.ts';
import { requirePassword } from './accounts.ts';
import type { Context } from './context.ts';
import { requireSecondStep } from './second-step.ts';

/** What deleting the account would mean: what stands in its way, and which workspaces go with it. */
export async function previewDeletion({ database }: Context, personId: string): Promise<DeletionPreview> {
  const { knex } = database;
  const standings = await listStandings(knex, personId);
  return {
    lastOwnerOf: standings.filter(isNeeded).map(named),
    aloneIn: standings.filter(isAlone).map(named),
    needsCode: await hasSecondStep(knex, personId),
    isOffered: !(await isDemoPerson(knex, personId)),
  };
}

/**
 * Deletes a person's account: nobody can sign in with it any more, its memberships, tokens and sessions go, and so do
 * workspaces that nobody else is in. The name stays, marked, on what the person did.
 */
export async function deleteAccount(
  context: Context,
  { id, name }: Account,
  proof: { readonly password: string; readonly code?: string | undefined },
): Promise<void> {
  const { database, clock } = context;
  if (await isDemoPerson(database.knex, id)) {
    throw new Refusal('conflict', 'The people of the demo stay; sign in as somebody of your own to leave.');
  }
  await requirePassword(context, id, proof.password, 'password');
  if (await hasSecondStep(database.knex, id)) await requireSecondStep(context, id, proof.code ?? '');
  await database.knex.transaction(async (trx) => {
    const at = clock();
    // In one order, so that two who leave at once wait for one another and don't stand in each other's way.
    const ids = (await listStandings(trx, id)).map(({ workspaceId }) => workspaceId).sort();
    for (const workspaceId of ids) await lockWorkspace(trx, workspaceId);
    const standings = await listStandings(trx, id);
    const needed = standings.filter(isNeeded);
    if (needed.length > 0) {
      const names = needed.map(({ workspaceName }) => workspaceName).join(', ');
      throw new Refusal(
        'conflict',
        `You are the only owner of ${names}, and others are in there; make one of them an owner on its page People first, or delete the workspace.`,
      );
    }
    await deleteWorkspaces(
      trx,
      standings.filter(isAlone).map(({ workspaceId }) => workspaceId),
    );
    for (const { workspaceId } of standings.filter((each) => !isAlone(each))) {
      await recordActivity(trx, {
        workspaceId,
        at,
        action: 'person.left',
        personId: id,
        object: { kind: 'person', id, name },
      });
      await deleteMembership(trx, workspaceId, id);
      await announcePlace(trx, { workspaceId, personId: id });
    }
    await deleteTokens(trx, id);
    await deleteSecondStep(trx, id);
    await deleteAllSessions(trx, id);
    await emptyAccount(trx, id, at);
  });
}

const isAlone = ({ others }: Standing): boolean => others === 0;
const isNeeded = (standing: Standing): boolean => standing.isLastOwner && !isAlone(standing);
const named = ({ workspaceId, workspaceName }: Standing) => ({ workspaceId, workspaceName });
