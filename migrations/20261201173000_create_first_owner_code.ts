import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('first_owner_code', (table) => {
    table.boolean('is_only').primary().defaultTo(true);
    // With the server's secret every process makes the same code of it.
    table.binary('nonce').notNullable();
    table.binary('code_hash').notNullable();
    table.check('is_only', [], 'first_owner_code_is_one');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('first_owner_code');
}
