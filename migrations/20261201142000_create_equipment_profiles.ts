import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('equipment_profiles', (table) => {
    table.uuid('id').primary().defaultTo(knex.raw('gen_random_uuid()'));
    table.uuid('workspace_id').notNullable().references('workspaces.id').onDelete('cascade');
    table.text('name').notNullable();
    table.jsonb('profile').notNullable();
    table.timestamp('created_at').notNullable();
    table.timestamp('changed_at').notNullable();
    table.uuid('changed_by').references('people.id').onDelete('set null');
    table.timestamp('archived_at');
  });
  // Two profiles of one name could not be told apart where one is chosen.
  await knex.raw(`
    create unique index equipment_profiles_one_name on equipment_profiles (workspace_id, lower(name))
    where archived_at is null`);
  await knex.schema.alterTable('designs', (table) => {
    // Read from the document at every save: which of the workspace's profiles the design holds copies of.
    table.jsonb('profile_copies').notNullable().defaultTo('{}');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.alterTable('designs', (table) => table.dropColumn('profile_copies'));
  await knex.schema.dropTable('equipment_profiles');
}
