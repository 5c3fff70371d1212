import type { Knex } from 'knex';
import type { Invitation, MailState } from '#contract/invitations.ts';
import { invitationDays } from '#contract/invitations.ts';
import type { Role } from '#contract/session.ts';
import { authorise } from '../auth/authorise.ts';
import { newLinkToken } from '../auth/link-tokens.ts';
import { Refusal, notFound } from '../errors.ts';
import { queueMail } from '../mail/queue-mail.ts';
import { recordActivity } from '../repositories/activity.ts';
import type { InvitationRow } from '../repositories/invitations.ts';
import {
  endInvitation,
  findOpenInvitation,
  insertInvitation,
  listOpenInvitations,
  renewInvitation,
  setMailOfInvitation,
} from '../repositories/invitations.ts';
import type { MailState as StoredMailState } from '../repositories/mails.ts';
import { takeBackMail } from '../repositories/mails.ts';
import { findPlace } from '../repositories/memberships.ts';
import type { Account } from '../repositories/people.ts';
import { findAccountByEmail } from '../repositories/people.ts';
import { lockWorkspace } from '../repositories/workspaces.ts';
import type { Context } from './context.ts';

const dayMs = 24 * 60 * 60_000;

/** Who is invited and has not come yet, the newest first. */
export async function readInvitations(
  { database: { knex } }: Context,
  personId: string,
  workspaceId: string,
): Promise<Invitation[]> {
  await authorise(knex, personId, 'people.manage', workspaceId, 'workspace');
  return (await listOpenInvitations(knex, workspaceId)).map(invitationOf);
}

/** Invites an address into the workspace. One whose invitation ran out is invited anew. */
export async function invite(
  context: Context,
  inviter: Account,
  workspaceId: string,
  { email, role }: { readonly email: string; readonly role: Role },
): Promise<Invitation> {
  const { database, clock } = context;
  return database.knex.transaction(async (trx) => {
    // Held up, so that nobody is invited twice at once.
    await lockWorkspace(trx, workspaceId);
    await authorise(trx, inviter.id, 'people.manage', workspaceId, 'workspace');
    await refuseMember(trx, workspaceId, email);
    const at = clock();
    const open = (await listOpenInvitations(trx, workspaceId)).find((each) => each.email === email);
    if (open !== undefined) {
      if (open.expiresAt > at) throw invitedAlready(open);
      await endInvitation(trx, open.id, 'revoked', at);
    }
    const { token, hash } = newLinkToken();
    const expiresAt = new Date(at.getTime() + invitationDays * dayMs);
    const invitation = { workspaceId, email, role, invitedBy: inviter.id, invitedAt: at, expiresAt };
    const id = await insertInvitation(trx, { ...invitation, tokenHash: hash });
    await recordActivity(trx, {
      workspaceId,
      at,
      action: 'person.invited',
      personId: inviter.id,
      object: { kind: 'person', id: null, name: email },
      details: { role },
    });
    return sendInvitation(context, trx, inviter, id, token);
  });
}

/** Sends the invitation again, with a new link for another seven days; the old link leads nowhere from then on. */
export async function resendInvitation(
  context: Context,
  sender: Account,
  workspaceId: string,
  invitationId: string,
): Promise<Invitation> {
  return onInvitation(context, sender.id, workspaceId, invitationId, async (trx, invitation) => {
    await refuseMember(trx, workspaceId, invitation.email);
    const { token, hash } = newLinkToken();
    const expiresAt = new Date(context.clock().getTime() + invitationDays * dayMs);
    await renewInvitation(trx, invitationId, { tokenHash: hash, expiresAt });
    if (invitation.mailId !== null) await takeBackMail(trx, invitation.mailId, 'it was sent again');
    return sendInvitation(context, trx, sender, invitationId, token);
  });
}

/** Takes an invitation back: its link leads nowhere from then on. */
export async function revokeInvitation(
  context: Context,
  personId: string,
  workspaceId: string,
  invitationId: string,
): Promise<void> {
  await onInvitation(context, personId, workspaceId, invitationId, async (trx, invitation) => {
    const at = context.clock();
    await endInvitation(trx, invitationId, 'revoked', at);
    if (invitation.mailId !== null)
      await takeBackMail(trx, invitation.mailId, 'the invitation was taken back');
    await recordActivity(trx, {
      workspaceId,
      at,
      action: 'invitation.revoked',
      personId,
      object: { kind: 'person', id: null, name: invitation.email },
      details: { role: invitation.role },
    });
  });
}

async function onInvitation<T>(
  { database }: Context,
  personId: string,
  workspaceId: string,
  invitationId: string,
  work: (trx: Knex.Transaction, invitation: InvitationRow) => Promise<T>,
): Promise<T> {
  return database.knex.transaction(async (trx) => {
    await lockWorkspace(trx, workspaceId);
    await authorise(trx, personId, 'people.manage', workspaceId, 'invitation');
    const invitation = await findOpenInvitation(trx, invitationId);
    if (invitation?.workspaceId !== workspaceId) throw notFound('invitation');
    return work(trx, invitation);
  });
}

async function sendInvitation(
  { publicUrl }: Context,
  trx: Knex.Transaction,
  sender: Account,
  invitationId: string,
  token: string,
): Promise<Invitation> {
  const { workspaceId, workspaceName, email, role, expiresAt } = (await findOpenInvitation(
    trx,
    invitationId,
  ))!;
  const mailId = await queueMail(trx, {
    kind: 'invitation',
    workspaceId,
    to: email,
    workspaceName,
    inviterName: sender.name,
    role,
    link: `${publicUrl}/invitation/${token}`,
    expiresAt,
  });
  await setMailOfInvitation(trx, invitationId, mailId);
  return invitationOf((await findOpenInvitation(trx, invitationId))!);
}

async function refuseMember(trx: Knex, workspaceId: string, email: string): Promise<void> {
  const person = await findAccountByEmail(trx, email);
  const place = person === null ? null : await findPlace(trx, workspaceId, person.id);
  if (person === null || place === null) return;
  throw new Refusal(
    'conflict',
    `${person.name} (${email}) is in this workspace already, as ${place.role}; change their role in the list of people.`,
    { details: [{ path: 'email', value: email, expected: 'expected somebody who is not in the workspace' }] },
  );
}

function invitedAlready({ email, role, invitedAt }: InvitationRow): Refusal {
  const day = new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'long', timeZone: 'UTC' });
  return new Refusal(
    'conflict',
    `${email} was invited as ${role} on ${day.format(invitedAt)} and has not come yet; send that invitation again, or take it back first.`,
    { details: [{ path: 'email', value: email, expected: 'expected somebody without an invitation' }] },
  );
}

const stateWords: { readonly [state in StoredMailState]: MailState['state'] } = {
  queued: 'waiting',
  sending: 'waiting',
  'handed-over': 'waiting',
  'for-digest': 'waiting',
  'in-digest': 'waiting',
  sent: 'sent',
  failed: 'failed',
  uncertain: 'uncertain',
};

function invitationOf(row: InvitationRow): Invitation {
  const { id, email, role, invitedBy, invitedAt, expiresAt, mailState, mailChangedAt, mailProblem } = row;
  return {
    id,
    email,
    role,
    invitedBy,
    invitedAt: invitedAt.toISOString(),
    expiresAt: expiresAt.toISOString(),
    mail:
      mailState === null || mailChangedAt === null
        ? null
        : { state: stateWords[mailState], at: mailChangedAt.toISOString(), problem: mailProblem },
  };
}
