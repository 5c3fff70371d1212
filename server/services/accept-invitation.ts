import type { Knex } from 'knex';
import type { OfferedInvitation } from '#contract/invitations.ts';
import { hashLinkToken } from '../auth/link-tokens.ts';
import { hashPassword } from '../auth/passwords.ts';
import { Refusal } from '../errors.ts';
import { announcePlace } from '../live/announce.ts';
import { recordActivity } from '../repositories/activity.ts';
import type { InvitationRow } from '../repositories/invitations.ts';
import { endInvitation, findInvitationByToken } from '../repositories/invitations.ts';
import { findPlace, insertMembership } from '../repositories/memberships.ts';
import type { Account } from '../repositories/people.ts';
import { findAccount, findAccountByEmail, insertPerson } from '../repositories/people.ts';
import { lockWorkspace } from '../repositories/workspaces.ts';
import type { Context } from './context.ts';

export interface Newcomer {
  readonly name: string;
  readonly password: string;
}

/** What a link invites to, for whoever holds it. */
export async function readOfferedInvitation(
  { database: { knex }, clock }: Context,
  token: string,
): Promise<OfferedInvitation> {
  const invitation = await findInvitationByToken(knex, hashLinkToken(token), clock());
  if (invitation === null) throw endedInvitation();
  const { workspaceName, invitedBy, email, role, expiresAt } = invitation;
  return {
    workspaceName,
    invitedBy,
    email,
    role,
    expiresAt: expiresAt.toISOString(),
    hasAccount: (await findAccountByEmail(knex, email)) !== null,
  };
}

/**
 * Uses an invitation up: the person it is for is in the workspace then. Who has an account must be signed in with it; for a
 * newcomer an account is made.
 */
export async function acceptInvitation(
  { database, clock }: Context,
  token: string,
  { signedIn, newcomer }: { readonly signedIn: Account | null; readonly newcomer: Newcomer | undefined },
): Promise<{ readonly workspaceId: string; readonly account: Account }> {
  const tokenHash = hashLinkToken(token);
  const offered = await findInvitationByToken(database.knex, tokenHash, clock());
  if (offered === null) throw endedInvitation();
  if (signedIn !== null && signedIn.email !== offered.email) throw forSomebodyElse(offered, signedIn);
  const passwordHash =
    signedIn === null && newcomer !== undefined ? await hashPassword(newcomer.password) : null;
  return database.knex.transaction(async (trx) => {
    await lockWorkspace(trx, offered.workspaceId);
    const at = clock();
    const invitation = await findInvitationByToken(trx, tokenHash, at);
    if (invitation === null || !(await endInvitation(trx, invitation.id, 'accepted', at))) {
      throw endedInvitation();
    }
    const { workspaceId, role } = invitation;
    const account = signedIn ?? (await makeAccount(trx, invitation.email, newcomer, passwordHash));
    if ((await findPlace(trx, workspaceId, account.id)) !== null) {
      throw new Refusal(
        'conflict',
        `You are in ${invitation.workspaceName} already; open it from your list of workspaces.`,
      );
    }
    await insertMembership(trx, workspaceId, account.id, role);
    await recordActivity(trx, {
      workspaceId,
      at,
      action: 'person.joined',
      personId: account.id,
      object: { kind: 'person', id: account.id, name: account.name },
      details: { role },
    });
    await announcePlace(trx, { workspaceId, personId: account.id });
    return { workspaceId, account };
  });
}

async function makeAccount(
  trx: Knex.Transaction,
  email: string,
  newcomer: Newcomer | undefined,
  passwordHash: string | null,
): Promise<Account> {
  if ((await findAccountByEmail(trx, email)) !== null) {
    throw new Refusal(
      'not-signed-in',
      `Somebody signs in as ${email} already; sign in with that address to accept the invitation.`,
    );
  }
  if (newcomer === undefined || passwordHash === null) {
    throw new Refusal(
      'invalid-request',
      `'newcomer' is missing: expected a name and a password for ${email}.`,
      {
        details: [{ path: 'newcomer', value: 'missing', expected: 'expected a name and a password' }],
      },
    );
  }
  const id = await insertPerson(trx, { name: newcomer.name, email, passwordHash });
  return (await findAccount(trx, id))!;
}

function endedInvitation(): Refusal {
  return new Refusal(
    'not-found',
    'This invitation holds no longer: it was used, taken back or sent again, or is older than seven days. Ask whoever invited you for a new one.',
  );
}

function forSomebodyElse({ email }: InvitationRow, { email: own }: Account): Refusal {
  return new Refusal(
    'conflict',
    `The invitation is for ${email}, and you are signed in as ${own}; sign out and open the link again, or have ${own} invited.`,
  );
}
