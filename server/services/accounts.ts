import type { Role } from '#contract/session.ts';
import { hashPassword, isPasswordRight } from '../auth/passwords.ts';
import { Refusal, notFound } from '../errors.ts';
import { listDemoPeople } from '../repositories/demo-people.ts';
import type { Account } from '../repositories/people.ts';
import { findAccount, findPasswordHash, setPassword } from '../repositories/people.ts';
import { deleteOtherSessions } from '../repositories/sessions.ts';
import type { Context } from './context.ts';

/** The demo's person of a role; not found while the demo is off. */
export async function findDemoAccount({ database }: Context, role: Role): Promise<Account> {
  const person = (await listDemoPeople(database.knex)).find((each) => each.role === role);
  const account = person === undefined ? null : await findAccount(database.knex, person.id);
  if (account === null) throw notFound('page');
  return account;
}

/** Sets a new password and ends the person's other sessions. Answers the account as the kept session must name it. */
export async function changePassword(
  { database }: Context,
  account: Account,
  passwords: { readonly current: string; readonly next: string },
  keptSessionId: string,
): Promise<Account> {
  const currentHash = await findPasswordHash(database.knex, account.id);
  if (!(await isPasswordRight(currentHash, passwords.current))) {
    throw new Refusal('wrong-credentials', 'That is not your current password; type it again.', {
      // 401 would tell the browser that the session had ended.
      status: 403,
      details: [{ path: 'current', value: 'what was typed', expected: 'expected your current password' }],
    });
  }
  const nextHash = await hashPassword(passwords.next);
  return database.knex.transaction(async (trx) => {
    const credentialVersion = await setPassword(trx, account.id, nextHash);
    await deleteOtherSessions(trx, account.id, keptSessionId);
    return { ...account, credentialVersion };
  });
}
