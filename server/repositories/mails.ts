import type { Knex } from 'knex';
import type { Digest, Mail, Notification } from '../mail/mail.ts';
import { queuedMailSchema } from '../mail/mail.ts';

export type MailState =
  | 'queued'
  /** An attempt has it, and has not sent its end. */
  | 'sending'
  /** Its end is being sent: the server takes it at any moment, or just has. */
  | 'handed-over'
  | 'sent'
  | 'failed'
  /** The process that sent its end was gone before the server's answer was noted. */
  | 'uncertain'
  | 'for-digest'
  | 'in-digest';

export interface MailRow {
  readonly id: string;
  readonly state: MailState;
  readonly messageId: string | null;
  readonly content: Mail | Digest | null;
}

/** A mail, locked until the transaction ends. */
export async function lockMail(trx: Knex.Transaction, id: string): Promise<MailRow | null> {
  const row = await trx('mails')
    .where({ id })
    .forUpdate()
    .first<{ id: string; state: MailState; message_id: string | null; content: unknown }>();
  if (row === undefined) return null;
  const content = row.content === null ? null : queuedMailSchema.parse(row.content);
  return { id: row.id, state: row.state, messageId: row.message_id, content };
}

/** Gives a mail to one attempt: whoever had it before can't hand it over any more. */
export async function beginAttempt(
  trx: Knex.Transaction,
  id: string,
  attempt: string,
  messageId: string,
): Promise<void> {
  await trx('mails')
    .where({ id })
    .update({ state: 'sending', attempt, message_id: messageId, changed_at: trx.fn.now() });
}

/** Notes that the end of the mail goes out now; false when the mail is another attempt's. */
export async function noteHandedOver(knex: Knex, id: string, attempt: string): Promise<boolean> {
  const count = await knex('mails')
    .where({ id, attempt, state: 'sending' })
    .update({ state: 'handed-over', changed_at: knex.fn.now() });
  return count === 1;
}

/** Puts a mail back into the queue after an attempt that the server did not take. */
export async function noteRetry(knex: Knex, id: string, attempt: string, problem: string): Promise<void> {
  await knex('mails').where({ id, attempt }).update({ state: 'queued', problem, changed_at: knex.fn.now() });
}

/** Notes how an attempt ended for good. What the mail said is forgotten: its links are keys. */
export async function noteEnd(
  knex: Knex,
  id: string,
  end: {
    readonly state: 'sent' | 'failed' | 'uncertain';
    readonly problem?: string;
    readonly attempt?: string;
  },
): Promise<void> {
  const { state, problem = null, attempt } = end;
  await knex('mails')
    .where(attempt === undefined ? { id } : { id, attempt })
    .update({ state, problem, content: null, changed_at: knex.fn.now() });
}

/** Takes back a mail that waits in the queue. One that is on its way arrives. */
export async function takeBackMail(trx: Knex, id: string, problem: string): Promise<void> {
  await trx('mails')
    .where({ id, state: 'queued' })
    .update({ state: 'failed', problem, content: null, changed_at: trx.fn.now() });
}

/** Who waits for a mail of the day. */
export function listPeopleWithDigest(knex: Knex): Promise<string[]> {
  return knex('mails').where({ state: 'for-digest' }).distinct('person_id').pluck<string[]>('person_id');
}

/** What a person's next mail of the day tells, the oldest first; locked, so that one process makes it. */
export async function lockDigestItems(
  trx: Knex.Transaction,
  personId: string,
  before: Date,
): Promise<readonly { readonly id: string; readonly content: Notification }[]> {
  const rows = await trx('mails')
    .where({ state: 'for-digest', person_id: personId })
    .where('queued_at', '<', before)
    .orderBy(['queued_at', 'id'])
    .forUpdate()
    .skipLocked()
    .select<{ id: string; content: Notification }[]>('id', 'content');
  return rows;
}

export async function moveIntoDigest(
  trx: Knex.Transaction,
  ids: readonly string[],
  digestId: string | null,
): Promise<void> {
  await trx('mails')
    .whereIn('id', ids)
    .update({ state: 'in-digest', digest_id: digestId, content: null, changed_at: trx.fn.now() });
}

/** Deletes what nobody will ask for again: mails that ended before `before`, and with them what the catcher kept. */
export async function deleteOldMails(knex: Knex, before: Date): Promise<void> {
  await knex('mails')
    .whereIn('state', ['sent', 'failed', 'uncertain', 'in-digest'])
    .where('changed_at', '<', before)
    .delete();
}
