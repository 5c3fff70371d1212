import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('invitations', (table) => {
    table.uuid('id').primary().defaultTo(knex.raw('gen_random_uuid()'));
    table.uuid('workspace_id').notNullable().references('workspaces.id').onDelete('cascade');
    table.text('email').notNullable();
    table.text('role').notNullable();
    // SHA-256 of what stands in the link: who reads this table can't accept for others.
    table.binary('token_hash').notNullable().unique();
    table.uuid('invited_by').references('people.id').onDelete('set null');
    table.timestamp('invited_at').notNullable();
    table.timestamp('expires_at').notNullable();
    table.timestamp('accepted_at');
    table.timestamp('revoked_at');
    table.uuid('mail_id').references('mails.id').onDelete('set null');
    table.check('email = lower(email)', [], 'invitations_email_is_lower_case');
    table.check(
      "role in ('owner', 'architect', 'reviewer', 'presales', 'installer')",
      [],
      'invitations_role_is_known',
    );
  });
  await knex.raw(
    `create unique index invitations_one_open on invitations (workspace_id, email)
     where accepted_at is null and revoked_at is null`,
  );
  await knex.schema.createTable('password_resets', (table) => {
    table.uuid('id').primary().defaultTo(knex.raw('gen_random_uuid()'));
    table.uuid('person_id').notNullable().references('people.id').onDelete('cascade').index();
    table.binary('token_hash').notNullable().unique();
    table.timestamp('expires_at').notNullable();
    table.timestamp('used_at');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('password_resets');
  await knex.schema.dropTable('invitations');
}
