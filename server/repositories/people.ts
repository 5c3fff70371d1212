import type { Knex } from 'knex';

/** A person as the session knows them. */
export interface Account {
  readonly id: string;
  readonly name: string;
  readonly email: string;
  readonly credentialVersion: number;
}
export interface AccountWithPassword extends Account {
  readonly passwordHash: string;
}

const columns = { id: 'id', name: 'name', email: 'email', credentialVersion: 'credential_version' };

/** Nobody is found who left. */
export async function findAccount(knex: Knex, id: string): Promise<Account | null> {
  return (await knex('people').where({ id }).whereNull('left_at').first<Account>(columns)) ?? null;
}

export async function findAccountByEmail(knex: Knex, email: string): Promise<AccountWithPassword | null> {
  const found = knex('people').where({ email });
  return (await found.first<AccountWithPassword>({ ...columns, passwordHash: 'password_hash' })) ?? null;
}

export async function findPasswordHash(knex: Knex, id: string): Promise<string | null> {
  const row = await knex('people').where({ id }).first<{ hash: string | null }>({ hash: 'password_hash' });
  return row?.hash ?? null;
}

/** Sets a password and answers the new count of credentials; sessions of older counts end. */
export async function setPassword(knex: Knex, id: string, passwordHash: string): Promise<number> {
  const rows = await knex('people')
    .where({ id })
    .update({ password_hash: passwordHash, credential_version: knex.raw('credential_version + 1') })
    .returning<{ credential_version: number }[]>('credential_version');
  const version = rows[0]?.credential_version;
  if (version === undefined) throw new Error('a password was set for nobody');
  return version;
}

export async function insertPerson(
  knex: Knex,
  person: { readonly name: string; readonly email: string; readonly passwordHash: string },
): Promise<string> {
  const { name, email, passwordHash } = person;
  const rows = await knex('people')
    .insert({ name, email, password_hash: passwordHash })
    .returning<{ id: string }[]>('id');
  return rows[0]!.id;
}

/** Notes that somebody was here. */
export async function setLastSeen(knex: Knex, id: string, at: Date): Promise<void> {
  await knex('people').where({ id }).update({ last_seen_at: at });
}

/** Empties an account of all but its name, which stays readable on what the person did; mails to them go as well. */
export async function emptyAccount(trx: Knex.Transaction, id: string, at: Date): Promise<void> {
  for (const table of ['mails', 'mail_settings', 'password_resets'])
    await trx(table).where({ person_id: id }).delete();
  await trx('people')
    .where({ id })
    .update({
      name: trx.raw("name || ' (left)'"),
      email: null,
      password_hash: null,
      credential_version: trx.raw('credential_version + 1'),
      last_seen_at: null,
      left_at: at,
    });
}

/** Whether anybody at all could sign in. */
export async function isAnybodyHere(knex: Knex): Promise<boolean> {
  return (await knex('people').whereNull('left_at').first('id')) !== undefined;
}
