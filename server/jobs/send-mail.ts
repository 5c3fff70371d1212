import { randomUUID } from 'node:crypto';
import { setTimeout as delay } from 'node:timers/promises';
import type { Knex } from 'knex';
import type { Logger } from 'pino';
import { z } from 'zod';
import type { Digest, Mail } from '../mail/mail.ts';
import type { MailSender } from '../mail/mail-sender.ts';
import { MailProblem } from '../mail/mail-sender.ts';
import { wordsOf } from '../mail/mail-words.ts';
import { beginAttempt, lockMail, noteEnd, noteHandedOver, noteRetry } from '../repositories/mails.ts';
import { findPlace } from '../repositories/memberships.ts';

export interface SendMailContext {
  readonly knex: Knex;
  readonly sender: MailSender;
  readonly publicUrl: string;
  /** What follows the @ in the names of mails. */
  readonly domain: string;
  readonly clock: () => Date;
  readonly log: Logger;
}

const payloadSchema = z.object({ mailId: z.guid() });

interface Attempt {
  readonly token: string;
  readonly messageId: string;
  readonly content: Mail | Digest;
}

/**
 * Sends one queued mail. Sending is split by one committed note, 'handed over', made after everything but the mail's end has
 * gone out and before the end does:
 * - A process that dies before the note has given the server no mail; another attempt sends it.
 * - A process that dies after the note has, in all but the rarest case, given it one; the mail becomes 'uncertain', is told of,
 *   and is not sent again by itself, since that would nearly always be a second copy.
 * - While the process lives it hears what the server says, and tries again later where that was no.
 * The note is made for the attempt that holds the mail's token alone, so two attempts never send the end both.
 */
export async function sendMail(
  context: SendMailContext,
  payload: unknown,
  { isLast, signal }: { readonly isLast: boolean; readonly signal?: AbortSignal },
): Promise<void> {
  const { knex, sender, publicUrl, clock, log } = context;
  const { mailId } = payloadSchema.parse(payload);
  const attempt = await takeMail(context, mailId);
  if (attempt === null) return;
  const { token, messageId, content } = attempt;
  // Once the end is out only the server's answer tells what became of the mail: no cutting off then.
  const cut = new AbortController();
  const onAbort = () => cut.abort();
  signal?.addEventListener('abort', onAbort, { once: true });
  try {
    await sender.send(
      {
        messageId,
        to: typeof content.to === 'string' ? content.to : content.to.email,
        words: wordsOf(content, publicUrl),
        date: clock(),
      },
      {
        signal: cut.signal,
        beforeEnd: async () => {
          if (!(await noteHandedOver(knex, mailId, token))) throw new Error('another attempt has the mail');
          signal?.removeEventListener('abort', onAbort);
        },
      },
    );
  } catch (error) {
    const problem = error instanceof MailProblem ? error.message : 'it could not be sent';
    if (error instanceof MailProblem && error.isFinal) {
      log.warn({ mailId, problem }, 'mail refused');
      await noteEnd(knex, mailId, { state: 'failed', problem, attempt: token });
      return;
    }
    if (isLast) await noteEnd(knex, mailId, { state: 'failed', problem, attempt: token });
    else await noteRetry(knex, mailId, token, problem);
    throw error;
  } finally {
    signal?.removeEventListener('abort', onAbort);
  }
  // The server has it: a database that is away for a moment must not make that unknown.
  await untilDone(() => noteEnd(knex, mailId, { state: 'sent', attempt: token }));
  log.info({ mailId }, 'mail sent');
}

/** Takes a mail for an attempt; null when there is nothing to send (any more). */
async function takeMail(
  { knex, domain, clock, log }: SendMailContext,
  mailId: string,
): Promise<Attempt | null> {
  return knex.transaction(async (trx) => {
    const mail = await lockMail(trx, mailId);
    if (mail === null || mail.content === null) return null;
    if (mail.state === 'handed-over') {
      log.warn({ mailId }, 'mail may or may not have arrived');
      const problem = 'the server stopped while the mail was handed over; it has probably arrived';
      await noteEnd(trx, mailId, { state: 'uncertain', problem });
      return null;
    }
    const content = await stillWanted(trx, mail.content, clock());
    if (typeof content === 'string') {
      await noteEnd(trx, mailId, { state: 'failed', problem: content });
      return null;
    }
    const attempt = { token: randomUUID(), messageId: mail.messageId ?? `<${mailId}@${domain}>`, content };
    await beginAttempt(trx, mailId, attempt.token, attempt.messageId);
    return attempt;
  });
}

/** What of a mail may be sent now; or, as words, why nothing. */
async function stillWanted(trx: Knex, mail: Mail | Digest, now: Date): Promise<Mail | Digest | string> {
  if (mail.kind === 'invitation' || mail.kind === 'reset') {
    return mail.expiresAt > now ? mail : 'its link had ended before a mail server took it';
  }
  const isMember = async ({ workspaceId }: { readonly workspaceId: string }) =>
    (await findPlace(trx, workspaceId, mail.to.personId)) !== null;
  const left = 'the person had left the workspace';
  if (mail.kind !== 'digest') return (await isMember(mail)) ? mail : left;
  const items = [];
  for (const item of mail.items) if (await isMember(item)) items.push(item);
  return items.length > 0 ? { ...mail, items } : left;
}

const noteRetryMs = 1_000;
const noteTries = 30;

async function untilDone(work: () => Promise<void>): Promise<void> {
  for (let tries = 1; ; tries += 1) {
    try {
      return await work();
    } catch (error) {
      if (tries === noteTries) throw error;
      await delay(noteRetryMs);
    }
  }
}
