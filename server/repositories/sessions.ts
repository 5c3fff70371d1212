import type { Knex } from 'knex';

/** Ends every session of a person but one. */
export async function deleteOtherSessions(knex: Knex, personId: string, keptId: string): Promise<void> {
  await knex('sessions')
    .whereRaw("sess #>> '{passport,user,id}' = ?", [personId])
    .whereNot({ sid: keptId })
    .delete();
}
