import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('shares', (table) => {
    table.uuid('id').primary().defaultTo(knex.raw('gen_random_uuid()'));
    table.uuid('revision_id').notNullable().references('revisions.id').onDelete('cascade').index();
    table.text('label').notNullable();
    table.binary('token_hash').notNullable().unique();
    table.text('passphrase_hash').comment('Null: the link alone opens it');
    table.boolean('shows_addresses').notNullable();
    table.boolean('shows_findings').notNullable();
    table.boolean('tells_maker').notNullable().comment('A mail to who made it when it is opened');
    table.date('expires_on').notNullable();
    table.uuid('made_by').references('people.id').onDelete('set null');
    table.timestamp('made_at').notNullable();
    table.uuid('revoked_by').references('people.id').onDelete('set null');
    table.timestamp('revoked_at');
    table.integer('views').notNullable().defaultTo(0);
    table.timestamp('viewed_at');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('shares');
}
