import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  // The columns that connect-pg-simple reads and writes.
  await knex.schema.createTable('sessions', (table) => {
    table.text('sid').primary();
    table.json('sess').notNullable();
    table.timestamp('expire').notNullable().index();
  });
  await knex.raw("create index sessions_person_index on sessions ((sess #>> '{passport,user,id}'))");
  // The columns that rate-limiter-flexible reads and writes.
  await knex.schema.createTable('rate_limits', (table) => {
    table.text('key').primary();
    table.integer('points').notNullable().defaultTo(0);
    table.bigInteger('expire').index();
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('rate_limits');
  await knex.schema.dropTable('sessions');
}
