import type { Knex } from 'knex';

export interface SecondStepRow {
  readonly secret: Buffer;
  /** Null while it is being set up. */
  readonly confirmedAt: Date | null;
}

export async function findSecondStep(knex: Knex, personId: string): Promise<SecondStepRow | null> {
  const row = await knex('second_steps')
    .where({ person_id: personId })
    .first<SecondStepRow | undefined>({ secret: 'secret', confirmedAt: 'confirmed_at' });
  return row ?? null;
}

/** Whether the person's sign-in asks for a code. */
export async function hasSecondStep(knex: Knex, personId: string): Promise<boolean> {
  return ((await findSecondStep(knex, personId))?.confirmedAt ?? null) !== null;
}

/** Keeps the secret of a set-up that is not confirmed; an earlier such one goes, a confirmed one stays (false). */
export async function putOfferedSecret(
  knex: Knex,
  personId: string,
  secret: Buffer,
  at: Date,
): Promise<boolean> {
  const rows = await knex('second_steps')
    .insert({ person_id: personId, secret, started_at: at })
    .onConflict('person_id')
    .merge({ secret, started_at: at })
    .whereNull('second_steps.confirmed_at')
    .returning<{ person_id: string }[]>('person_id');
  return rows.length === 1;
}

export async function putSecret(knex: Knex, personId: string, secret: Buffer): Promise<void> {
  await knex('second_steps').where({ person_id: personId }).update({ secret });
}

/** Switches it on; false where it was on already. */
export async function setConfirmed(knex: Knex, personId: string, at: Date): Promise<boolean> {
  const changed = await knex('second_steps')
    .where({ person_id: personId })
    .whereNull('confirmed_at')
    .update({ confirmed_at: at });
  return changed === 1;
}

/** Notes that the code of a time step was taken; false where that one or a later one was taken before. */
export async function takeTimeStep(knex: Knex, personId: string, timeStep: number): Promise<boolean> {
  const changed = await knex('second_steps')
    .where({ person_id: personId })
    .where((query) => query.whereNull('last_time_step').orWhere('last_time_step', '<', timeStep))
    .update({ last_time_step: timeStep });
  return changed === 1;
}

export async function deleteSecondStep(knex: Knex, personId: string): Promise<void> {
  await knex('recovery_codes').where({ person_id: personId }).delete();
  await knex('second_steps').where({ person_id: personId }).delete();
}

export async function countRecoveryCodes(knex: Knex, personId: string): Promise<number> {
  const row = await knex('recovery_codes')
    .where({ person_id: personId })
    .count<{ count: string }[]>({ count: '*' });
  return Number(row[0]?.count ?? 0);
}

export async function replaceRecoveryCodes(
  trx: Knex.Transaction,
  personId: string,
  hashes: readonly Buffer[],
): Promise<void> {
  await trx('recovery_codes').where({ person_id: personId }).delete();
  await trx('recovery_codes').insert(hashes.map((hash) => ({ person_id: personId, code_hash: hash })));
}

/** Uses a recovery code up; false where there is none such. */
export async function spendRecoveryCode(knex: Knex, personId: string, hash: Buffer): Promise<boolean> {
  return (await knex('recovery_codes').where({ person_id: personId, code_hash: hash }).delete()) === 1;
}
