import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('mails', (table) => {
    table.uuid('id').primary();
    table.text('kind').notNullable();
    table.text('to_email').notNullable();
    table.uuid('person_id').references('people.id').onDelete('cascade').index();
    table.uuid('workspace_id').references('workspaces.id').onDelete('cascade');
    // What its words are made from. Emptied once the mail has left or never will: its links are keys.
    table.jsonb('content');
    // The same event queued twice makes one mail.
    table.text('dedupe_key').unique();
    // Noted at the first attempt, so that every later one carries the same.
    table.text('message_id').unique();
    table.text('state').notNullable();
    // Names the one attempt that may hand the mail over.
    table.uuid('attempt');
    table.text('problem');
    table.uuid('digest_id').references('mails.id').onDelete('set null').index();
    table.timestamp('queued_at').notNullable().defaultTo(knex.fn.now());
    table.timestamp('changed_at').notNullable().defaultTo(knex.fn.now()).index();
    table.check(
      "state in ('queued', 'sending', 'handed-over', 'sent', 'failed', 'uncertain', 'for-digest', 'in-digest')",
      [],
      'mails_state_is_known',
    );
  });
  await knex.raw("create index mails_for_digest on mails (person_id, queued_at) where state = 'for-digest'");
  await knex.schema.createTable('mail_settings', (table) => {
    table.uuid('person_id').primary().references('people.id').onDelete('cascade');
    for (const kind of ['mention', 'review_asked', 'decision', 'share_opened']) {
      table.text(kind).notNullable();
      table.check(`?? in ('at-once', 'daily', 'none')`, [kind], `mail_settings_${kind}_is_known`);
    }
    table.text('time_zone').notNullable();
  });
  // What the local catcher received.
  await knex.schema.createTable('caught_mails', (table) => {
    table.uuid('mail_id').primary().references('mails.id').onDelete('cascade');
    table.timestamp('caught_at').notNullable().defaultTo(knex.fn.now());
    table.text('from_address').notNullable();
    table.text('to_address').notNullable();
    table.text('subject').notNullable();
    table.text('text').notNullable();
    table.text('html').notNullable();
    table.text('source').notNullable();
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('caught_mails');
  await knex.schema.dropTable('mail_settings');
  await knex.schema.dropTable('mails');
}
