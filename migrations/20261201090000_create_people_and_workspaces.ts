import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('people', (table) => {
    table.uuid('id').primary().defaultTo(knex.raw('gen_random_uuid()'));
    table.text('name').notNullable();
    table.text('email').notNullable().unique();
    table.text('password_hash').notNullable();
    // Counts up when the password changes; sessions of an older count are worth nothing.
    table.integer('credential_version').notNullable().defaultTo(1);
    table.timestamp('created_at').notNullable().defaultTo(knex.fn.now());
    table.check('email = lower(email)', [], 'people_email_is_lower_case');
  });
  await knex.schema.createTable('workspaces', (table) => {
    table.uuid('id').primary().defaultTo(knex.raw('gen_random_uuid()'));
    table.text('name').notNullable();
    table.timestamp('created_at').notNullable().defaultTo(knex.fn.now());
  });
  await knex.schema.createTable('memberships', (table) => {
    table.uuid('workspace_id').notNullable().references('workspaces.id').onDelete('cascade');
    table.uuid('person_id').notNullable().references('people.id').onDelete('cascade').index();
    table.text('role').notNullable();
    table.primary(['workspace_id', 'person_id']);
    table.check(
      "role in ('owner', 'architect', 'reviewer', 'presales', 'installer')",
      [],
      'memberships_role_is_known',
    );
  });
  // While somebody stands here the demo is on: each of these people can be signed in as with one click.
  await knex.schema.createTable('demo_people', (table) => {
    table.uuid('person_id').primary().references('people.id').onDelete('cascade');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('demo_people');
  await knex.schema.dropTable('memberships');
  await knex.schema.dropTable('workspaces');
  await knex.schema.dropTable('people');
}
