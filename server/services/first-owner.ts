import { firstOwnerCodeHash } from '../db/first-owner-code.ts';
import { hashPassword } from '../auth/passwords.ts';
import { Refusal } from '../errors.ts';
import {
  isFirstOwnerCode,
  lockFirstOwnerCode,
  deleteFirstOwnerCode,
} from '../repositories/first-owner-code.ts';
import type { Account } from '../repositories/people.ts';
import { findAccount, insertPerson, isAnybodyHere } from '../repositories/people.ts';
import type { Context } from './context.ts';
import { insertOwnedWorkspace } from './workspaces.ts';

/** Whether nobody is here yet: the first person comes with the code that the server printed. */
export async function isFirstOwnerAwaited({ database }: Context): Promise<boolean> {
  return !(await isAnybodyHere(database.knex));
}

/** Makes the first person of all and their workspace; the code ends with it. */
export async function createFirstOwner(
  { database, clock }: Context,
  wanted: {
    readonly code: string;
    readonly name: string;
    readonly email: string;
    readonly password: string;
    readonly workspaceName: string;
  },
): Promise<Account> {
  const { code, name, email, password, workspaceName } = wanted;
  await refuseUnfit(database.knex, code);
  const passwordHash = await hashPassword(password);
  return database.knex.transaction(async (trx) => {
    // Two may hold the code: the second waits, and finds the first one here.
    await lockFirstOwnerCode(trx);
    await refuseUnfit(trx, code);
    const id = await insertPerson(trx, { name, email, passwordHash });
    await insertOwnedWorkspace(trx, id, workspaceName, clock());
    await deleteFirstOwnerCode(trx);
    const account = await findAccount(trx, id);
    if (account === null) throw new Error('the first person went as they were made');
    return account;
  });
}

async function refuseUnfit(knex: Context['database']['knex'], code: string): Promise<void> {
  if (await isAnybodyHere(knex)) {
    throw new Refusal(
      'conflict',
      'The first owner is here already, and the code has ended; sign in, or ask an owner to invite you.',
    );
  }
  if (await isFirstOwnerCode(knex, firstOwnerCodeHash(code))) return;
  throw new Refusal(
    'wrong-credentials',
    'This is not the code that the server printed when it was last started; copy it from there whole.',
    {
      status: 403,
      details: [
        { path: 'code', value: 'what was typed', expected: 'expected the code that the server printed' },
      ],
    },
  );
}
