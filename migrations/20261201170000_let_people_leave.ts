import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.alterTable('people', (table) => {
    // Whoever left stays as a name on what they did.
    table.setNullable('email');
    table.setNullable('password_hash');
    table.timestamp('left_at');
    table.timestamp('last_seen_at').comment('To within some minutes');
    table.check(
      'left_at is not null or (email is not null and password_hash is not null)',
      [],
      'people_have_credentials',
    );
  });
  // Of which workspace a person of the demo is: they may be in others, too.
  await knex.schema.alterTable('demo_people', (table) => {
    table.uuid('workspace_id').references('workspaces.id').onDelete('cascade');
  });
  await knex.raw(`
    update demo_people set workspace_id =
      (select workspace_id from memberships where memberships.person_id = demo_people.person_id limit 1)`);
  await knex('demo_people').whereNull('workspace_id').delete();
  await knex.schema.alterTable('demo_people', (table) => table.dropNullable('workspace_id'));
  await knex.schema.alterTable('sessions', (table) => {
    // Names a session to the person whose it is; its own id opens it.
    table.uuid('id').notNullable().unique().defaultTo(knex.raw('gen_random_uuid()'));
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.alterTable('sessions', (table) => table.dropColumn('id'));
  await knex.schema.alterTable('demo_people', (table) => table.dropColumn('workspace_id'));
  await knex('people').whereNotNull('left_at').delete();
  await knex.schema.alterTable('people', (table) => {
    table.dropChecks('people_have_credentials');
    table.dropColumns('last_seen_at', 'left_at');
    table.dropNullable('password_hash');
    table.dropNullable('email');
  });
}
