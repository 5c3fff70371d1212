import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('second_steps', (table) => {
    table.uuid('person_id').primary().references('people.id').onDelete('cascade');
    table.binary('secret').notNullable().comment('Encrypted with a key that the database does not hold');
    table.timestamp('started_at').notNullable();
    table.timestamp('confirmed_at').comment('Null while it is being set up');
    // RFC 6238 section 5.2: a code is good for one sign-in.
    table.integer('last_time_step').comment('Of the last code that was taken');
  });
  await knex.schema.createTable('recovery_codes', (table) => {
    table.uuid('person_id').notNullable().references('people.id').onDelete('cascade');
    table.binary('code_hash').notNullable();
    table.primary(['person_id', 'code_hash']);
  });
  await knex.schema.alterTable('workspaces', (table) => {
    table.boolean('requires_second_step').notNullable().defaultTo(false);
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.alterTable('workspaces', (table) => table.dropColumn('requires_second_step'));
  await knex.schema.dropTable('recovery_codes');
  await knex.schema.dropTable('second_steps');
}
