import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.alterTable('designs', (table) => {
    table.timestamp('deleted_at').comment('Gone for good some time after; restored until then');
    table.check('deleted_at is null or archived_at is not null', [], 'designs_deleted_is_put_away');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.alterTable('designs', (table) => {
    table.dropChecks('designs_deleted_is_put_away');
    table.dropColumn('deleted_at');
  });
}
