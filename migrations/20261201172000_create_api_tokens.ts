import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('api_tokens', (table) => {
    table.uuid('id').primary().defaultTo(knex.raw('gen_random_uuid()'));
    table.uuid('person_id').notNullable().references('people.id').onDelete('cascade').index();
    table.text('name').notNullable();
    table.text('prefix').notNullable().comment('Its first characters, to tell it from others by');
    table.binary('token_hash').notNullable().unique();
    table.text('scope').notNullable();
    table.uuid('workspace_id').references('workspaces.id').onDelete('cascade').index();
    table.timestamp('created_at').notNullable();
    table.timestamp('expires_at').notNullable();
    table.timestamp('last_used_at');
    table.timestamp('revoked_at');
    table.check("scope in ('read', 'write')", [], 'api_tokens_scope_is_known');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('api_tokens');
}
