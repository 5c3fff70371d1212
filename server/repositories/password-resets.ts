import type { Knex } from 'knex';

export async function insertReset(
  knex: Knex,
  reset: { readonly personId: string; readonly tokenHash: Buffer; readonly expiresAt: Date },
): Promise<void> {
  await knex('password_resets').insert({
    person_id: reset.personId,
    token_hash: reset.tokenHash,
    expires_at: reset.expiresAt,
  });
}

/** Whose reset this is, while its link holds. */
export async function findOpenReset(
  knex: Knex,
  tokenHash: Buffer,
  now: Date,
): Promise<{ readonly personId: string; readonly email: string } | null> {
  const row = await knex('password_resets')
    .join('people', 'people.id', 'password_resets.person_id')
    .where({ token_hash: tokenHash, used_at: null })
    .where('expires_at', '>', now)
    .first<{ personId: string; email: string }>({ personId: 'people.id', email: 'people.email' });
  return row ?? null;
}

/** Uses up a reset; null when its link holds no longer, or somebody was faster. Every other link of the person ends with it. */
export async function takeReset(trx: Knex.Transaction, tokenHash: Buffer, now: Date): Promise<string | null> {
  const rows = await trx('password_resets')
    .where({ token_hash: tokenHash, used_at: null })
    .where('expires_at', '>', now)
    .update({ used_at: now })
    .returning<{ person_id: string }[]>('person_id');
  const personId = rows[0]?.person_id;
  if (personId === undefined) return null;
  await trx('password_resets').where({ person_id: personId, used_at: null }).update({ used_at: now });
  return personId;
}

export async function deleteOldResets(knex: Knex, before: Date): Promise<void> {
  await knex('password_resets').where('expires_at', '<', before).delete();
}
