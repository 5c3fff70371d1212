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
