import type { Knex } from 'knex';
import type { CaughtMail } from '../mail/mail-catcher.ts';

/** Keeps a mail that the local catcher received; false for one that this program did not send. The same mail twice is kept once. */
export async function keepCaughtMail(
  knex: Knex,
  { messageId, from, to, subject, text, html, source }: CaughtMail,
): Promise<boolean> {
  const mail = await knex('mails').where({ message_id: messageId }).first<{ id: string }>('id');
  if (mail === undefined) return false;
  await knex('caught_mails')
    .insert({ mail_id: mail.id, from_address: from, to_address: to, subject, text, html, source })
    .onConflict('mail_id')
    .ignore();
  return true;
}

export interface KeptMailRow {
  readonly id: string;
  readonly to: string;
  readonly subject: string;
  readonly keptAt: Date;
}
export interface OpenedMailRow extends KeptMailRow {
  readonly from: string;
  readonly text: string;
  readonly html: string;
  readonly source: string;
}

/**
 * What concerns the workspace. Mails to a person alone (resets, the mail of the day) are shown only to somebody who owns every
 * workspace that the person is in, so that owning one opens no way into another.
 */
function selectOfWorkspace(knex: Knex, workspaceId: string, ownerId: string): Knex.QueryBuilder {
  return knex('caught_mails')
    .join('mails', 'mails.id', 'caught_mails.mail_id')
    .whereRaw(
      `(mails.workspace_id = :workspaceId or (
         mails.workspace_id is null
         and exists (select from memberships where workspace_id = :workspaceId and person_id = mails.person_id)
         and not exists (
           select from memberships as theirs where theirs.person_id = mails.person_id and not exists (
             select from memberships as own
              where own.workspace_id = theirs.workspace_id and own.person_id = :ownerId and own.role = 'owner'))))`,
      { workspaceId, ownerId },
    )
    .select({ id: 'mail_id', to: 'to_address', subject: 'subject', keptAt: 'caught_at' });
}

/** The mails that an owner of the workspace may see, the newest first. */
export async function listKeptMails(
  knex: Knex,
  workspaceId: string,
  ownerId: string,
  most: number,
): Promise<readonly KeptMailRow[]> {
  return (await selectOfWorkspace(knex, workspaceId, ownerId)
    .orderBy([{ column: 'caught_at', order: 'desc' }, 'mail_id'])
    .limit(most)) as KeptMailRow[];
}

export async function findKeptMail(
  knex: Knex,
  workspaceId: string,
  ownerId: string,
  mailId: string,
): Promise<OpenedMailRow | null> {
  const [row] = (await selectOfWorkspace(knex, workspaceId, ownerId)
    .where({ mail_id: mailId })
    .select({ from: 'from_address', text: 'text', html: 'html', source: 'source' })) as OpenedMailRow[];
  return row ?? null;
}
