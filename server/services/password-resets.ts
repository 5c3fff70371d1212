import { resetMinutes } from '#contract/password-reset.ts';
import { hashLinkToken, newLinkToken } from '../auth/link-tokens.ts';
import { hashPassword } from '../auth/passwords.ts';
import { Refusal } from '../errors.ts';
import { queueMail } from '../mail/queue-mail.ts';
import { findOpenReset, insertReset, takeReset } from '../repositories/password-resets.ts';
import { findAccountByEmail, setPassword } from '../repositories/people.ts';
import { deleteAllSessions } from '../repositories/sessions.ts';
import type { Context } from './context.ts';

const minuteMs = 60_000;

/**
 * Sends a link for a new password to whoever signs in with this address. It is done after the answer, which is the same and
 * as quick for an address that nobody has, and for one that has had enough of these mails (`mayBeMailed`).
 */
export function askForReset(
  { database, clock, publicUrl }: Context,
  email: string,
  mayBeMailed: () => Promise<boolean>,
): void {
  database.inBackground(async () => {
    const account = await findAccountByEmail(database.knex, email);
    if (!(await mayBeMailed()) || account === null) return;
    const { token, hash } = newLinkToken();
    const expiresAt = new Date(clock().getTime() + resetMinutes * minuteMs);
    await database.knex.transaction(async (trx) => {
      await insertReset(trx, { personId: account.id, tokenHash: hash, expiresAt });
      await queueMail(trx, {
        kind: 'reset',
        to: { personId: account.id, name: account.name, email },
        link: `${publicUrl}/reset/${token}`,
        expiresAt,
      });
    });
  });
}

/** Whose password a link sets, for whoever holds it. */
export async function readReset(
  { database, clock }: Context,
  token: string,
): Promise<{ readonly email: string }> {
  const reset = await findOpenReset(database.knex, hashLinkToken(token), clock());
  if (reset === null) throw endedLink();
  return { email: reset.email };
}

/** Sets a new password by a link, which is used up with it, and ends every session of the person. */
export async function resetPassword(context: Context, token: string, password: string): Promise<void> {
  await readReset(context, token);
  const passwordHash = await hashPassword(password);
  const { database, clock } = context;
  await database.knex.transaction(async (trx) => {
    const personId = await takeReset(trx, hashLinkToken(token), clock());
    if (personId === null) throw endedLink();
    await setPassword(trx, personId, passwordHash);
    await deleteAllSessions(trx, personId);
  });
}

function endedLink(): Refusal {
  return new Refusal(
    'not-found',
    'This link holds no longer: it was used, or is older than an hour. Ask for another one.',
  );
}
