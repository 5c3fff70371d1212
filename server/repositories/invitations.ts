import type { Knex } from 'knex';
import type { Role } from '#contract/session.ts';
import type { MailState } from './mails.ts';

export interface InvitationRow {
  readonly id: string;
  readonly workspaceId: string;
  readonly workspaceName: string;
  readonly email: string;
  readonly role: Role;
  readonly invitedBy: string | null;
  readonly invitedAt: Date;
  readonly expiresAt: Date;
  readonly mailId: string | null;
  readonly mailState: MailState | null;
  readonly mailChangedAt: Date | null;
  readonly mailProblem: string | null;
}

function selectOpen(knex: Knex): Knex.QueryBuilder {
  return knex('invitations')
    .join('workspaces', 'workspaces.id', 'invitations.workspace_id')
    .leftJoin('people', 'people.id', 'invitations.invited_by')
    .leftJoin('mails', 'mails.id', 'invitations.mail_id')
    .where({ accepted_at: null, revoked_at: null })
    .select({
      id: 'invitations.id',
      workspaceId: 'invitations.workspace_id',
      workspaceName: 'workspaces.name',
      email: 'invitations.email',
      role: 'invitations.role',
      invitedBy: 'people.name',
      invitedAt: 'invited_at',
      expiresAt: 'expires_at',
      mailId: 'mail_id',
      mailState: 'mails.state',
      mailChangedAt: 'mails.changed_at',
      mailProblem: 'mails.problem',
    });
}

/** A workspace's invitations that were neither accepted nor taken back, the newest first. */
export async function listOpenInvitations(
  knex: Knex,
  workspaceId: string,
): Promise<readonly InvitationRow[]> {
  return (await selectOpen(knex)
    .where({ 'invitations.workspace_id': workspaceId })
    .orderBy([{ column: 'invited_at', order: 'desc' }, 'invitations.id'])) as InvitationRow[];
}

export async function findOpenInvitation(knex: Knex, id: string): Promise<InvitationRow | null> {
  const [row] = (await selectOpen(knex).where({ 'invitations.id': id })) as InvitationRow[];
  return row ?? null;
}

/** The invitation that a link leads to, while it holds. */
export async function findInvitationByToken(
  knex: Knex,
  tokenHash: Buffer,
  now: Date,
): Promise<InvitationRow | null> {
  const [row] = (await selectOpen(knex)
    .where({ token_hash: tokenHash })
    .where('expires_at', '>', now)) as InvitationRow[];
  return row ?? null;
}

export async function insertInvitation(
  knex: Knex,
  invitation: {
    readonly workspaceId: string;
    readonly email: string;
    readonly role: Role;
    readonly invitedBy: string;
    readonly invitedAt: Date;
    readonly expiresAt: Date;
    readonly tokenHash: Buffer;
  },
): Promise<string> {
  const rows = await knex('invitations')
    .insert({
      workspace_id: invitation.workspaceId,
      email: invitation.email,
      role: invitation.role,
      invited_by: invitation.invitedBy,
      invited_at: invitation.invitedAt,
      expires_at: invitation.expiresAt,
      token_hash: invitation.tokenHash,
    })
    .returning<{ id: string }[]>('id');
  return rows[0]!.id;
}

export async function setMailOfInvitation(knex: Knex, id: string, mailId: string | null): Promise<void> {
  await knex('invitations').where({ id }).update({ mail_id: mailId });
}

/** Gives an invitation another link; the old one leads nowhere from then on. */
export async function renewInvitation(
  knex: Knex,
  id: string,
  renewal: { readonly tokenHash: Buffer; readonly expiresAt: Date },
): Promise<void> {
  await knex('invitations')
    .where({ id })
    .update({ token_hash: renewal.tokenHash, expires_at: renewal.expiresAt });
}

/** Ends an invitation one way or the other; false when it had ended before. */
export async function endInvitation(
  knex: Knex,
  id: string,
  how: 'accepted' | 'revoked',
  at: Date,
): Promise<boolean> {
  const count = await knex('invitations')
    .where({ id, accepted_at: null, revoked_at: null })
    .update(how === 'accepted' ? { accepted_at: at } : { revoked_at: at });
  return count === 1;
}
