import { timingSafeEqual } from 'node:crypto';
import type { Knex } from 'knex';

/** Holds up whoever else makes the first person, until the transaction ends. */
export async function lockFirstOwnerCode(trx: Knex.Transaction): Promise<void> {
  await trx.raw('lock table first_owner_code in exclusive mode');
}

export async function isFirstOwnerCode(knex: Knex, hash: Buffer): Promise<boolean> {
  const kept = await knex('first_owner_code').first<{ code_hash: Buffer } | undefined>('code_hash');
  return kept !== undefined && timingSafeEqual(kept.code_hash, hash);
}

export async function deleteFirstOwnerCode(trx: Knex.Transaction): Promise<void> {
  await trx('first_owner_code').delete();
}
