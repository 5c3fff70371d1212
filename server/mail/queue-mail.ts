import { randomUUID } from 'node:crypto';
import type { Knex } from 'knex';
import type { Digest, Mail } from './mail.ts';
import { readMailSettings, settingOfKind } from './mail-wishes.ts';

export type { Mail } from './mail.ts';

/** The name under which the queue knows the sending of one mail. */
export const sendMailTask = 'send-mail';

// With the queue's growing pauses these last for 4 days: RFC 5321 section 4.5.4.1 wants a give-up time of at least 4-5 days.
const attempts = 25;

/**
 * Has a mail sent once the caller's transaction is committed, and never if it is not. Answers the mail's id; null when the
 * person wants no mail of this kind, or when one was queued before under the same `dedupeKey`.
 */
export async function queueMail(
  trx: Knex,
  mail: Mail,
  { dedupeKey = null }: { readonly dedupeKey?: string | null } = {},
): Promise<string | null> {
  const timing = await timingOf(trx, mail);
  if (timing === 'none') return null;
  const id = randomUUID();
  const inserted = await trx('mails')
    .insert({
      id,
      kind: mail.kind,
      to_email: typeof mail.to === 'string' ? mail.to : mail.to.email,
      person_id: typeof mail.to === 'string' ? null : mail.to.personId,
      workspace_id: mail.kind === 'reset' ? null : mail.workspaceId,
      content: JSON.stringify(mail),
      dedupe_key: dedupeKey,
      state: timing === 'daily' ? 'for-digest' : 'queued',
    })
    .onConflict('dedupe_key')
    .ignore()
    .returning<{ id: string }[]>('id');
  if (inserted.length === 0) return null;
  if (timing === 'at-once') await queueSending(trx, id);
  return id;
}

/** Has a mail of the day sent once the caller's transaction is committed. */
export async function queueDigest(trx: Knex, id: string, digest: Digest): Promise<void> {
  await trx('mails').insert({
    id,
    kind: digest.kind,
    to_email: digest.to.email,
    person_id: digest.to.personId,
    content: JSON.stringify(digest),
    state: 'queued',
  });
  await queueSending(trx, id);
}

/** Puts the sending of a mail into the queue, once whatever happens. */
async function queueSending(trx: Knex, mailId: string): Promise<void> {
  await trx.raw(
    'select graphile_worker.add_job(?, payload := json_build_object(?::text, ?::text), job_key := ?, max_attempts := ?)',
    [sendMailTask, 'mailId', mailId, `mail:${mailId}`, attempts],
  );
}

async function timingOf(trx: Knex, mail: Mail) {
  if (mail.kind === 'invitation' || mail.kind === 'reset') return 'at-once';
  const settings = await readMailSettings(trx, mail.to.personId);
  return settings[settingOfKind[mail.kind]];
}
