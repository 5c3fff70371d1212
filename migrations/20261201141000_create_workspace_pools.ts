import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('workspace_pools', (table) => {
    table.uuid('workspace_id').primary().references('workspaces.id').onDelete('cascade');
    table.jsonb('pools').notNullable();
    table.timestamp('changed_at').notNullable();
    table.uuid('changed_by').references('people.id').onDelete('set null');
  });
  await knex.schema.alterTable('designs', (table) => {
    // Read from the document at every save, as the counts are; null until the first save with this version.
    table.jsonb('numbers').comment('Every number that the design holds, for its neighbours');
    table.text('numbers_digest');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.alterTable('designs', (table) => table.dropColumns('numbers', 'numbers_digest'));
  await knex.schema.dropTable('workspace_pools');
}
