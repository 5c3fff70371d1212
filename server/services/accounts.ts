import type { Role } from '#contract/session.ts';
import { hashPassword, isPasswordRight } from '../auth/passwords.ts';
import { Refusal, notFound } from '../errors.ts';
import { listDemoPeople } from '../repositories/demo-people.ts';
import type { Account } from '../repositories/people.ts';
import { findAccount, findPasswordHash, setPassword } from '../repositories/people.ts';
import { hasSecondStep } from '../repositories/second-steps.ts';
import { deleteOtherSessions } from '../repositories/sessions.ts';
import { announcePlacesOf } from './announce-places.ts';
import type { Context } from './context.ts';

/** The demo's person of a role; not found while the demo is off. */
export async function findDemoAccount({ database }: Context, role: Role): Promise<Account> {
  const person = (await listDemoPeople(database.knex)).find((each) => each.role === role);
  const account = person === undefined ? null : await findAccount(database.knex, person.id);
  if (account === null) throw notFound('page');
  return account;
}

/** Whether a password alone does not sign this person in. */
export function isSecondStepNeeded({ database }: Context, personId: string): Promise<boolean> {
  return hasSecondStep(database.knex, personId);
}

/** Whose sign-in waits for a code; null where they are gone or their password changed meanwhile. */
export async function findSigningIn(
  { database }: Context,
  pending: { readonly personId: string; readonly credentialVersion: number },
): Promise<Account | null> {
  const account = await findAccount(database.knex, pending.personId);
  return account?.credentialVersion === pending.credentialVersion ? account : null;
}

/** Refuses where this is not the person's password; `path` names the field that it was typed in. */
export async function requirePassword(
  { database }: Context,
  personId: string,
  password: string,
  path: string,
): Promise<void> {
  if (await isPasswordRight(await findPasswordHash(database.knex, personId), password)) return;
  throw new Refusal('wrong-credentials', 'That is not your current password; type it again.', {
    // 401 would tell the browser that the session had ended.
    status: 403,
    details: [{ path, value: 'what was typed', expected: 'expected your current password' }],
  });
}

/** Sets a new password and ends the person's other sessions. Answers the account as the kept session must name it. */
export async function changePassword(
  context: Context,
  account: Account,
  passwords: { readonly current: string; readonly next: string },
  keptSessionId: string,
): Promise<Account> {
  await requirePassword(context, account.id, passwords.current, 'current');
  const nextHash = await hashPassword(passwords.next);
  return context.database.knex.transaction(async (trx) => {
    const credentialVersion = await setPassword(trx, account.id, nextHash);
    await deleteOtherSessions(trx, account.id, keptSessionId);
    await announcePlacesOf(trx, account.id);
    return { ...account, credentialVersion };
  });
}
