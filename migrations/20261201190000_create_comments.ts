import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('comments', (table) => {
    table.uuid('id').primary().defaultTo(knex.raw('gen_random_uuid()'));
    // Grows with every comment: the order in which they were written, also within one moment.
    table.bigIncrements('number', { primaryKey: false });
    table.uuid('design_id').notNullable().references('designs.id').onDelete('cascade');
    // The first comment of its thread; null for that one itself.
    table.uuid('thread_id').references('comments.id').onDelete('cascade').index();
    table.uuid('written_by').references('people.id').onDelete('set null');
    table.timestamp('written_at').notNullable();
    table.timestamp('edited_at');
    table.timestamp('deleted_at');
    table.text('body').notNullable();
    table.uuid('revision_id').references('revisions.id').onDelete('set null');
    // Of the first comment alone: what the thread is about, and what became of it. Null: the whole design.
    table.json('pin');
    table.uuid('resolved_by').references('people.id').onDelete('set null');
    table.timestamp('resolved_at');
    table.index(['design_id', 'number']);
    table.check(
      'thread_id is null or (pin is null and resolved_at is null)',
      [],
      'comments_replies_are_plain',
    );
  });
  await knex.schema.createTable('comment_mentions', (table) => {
    table.uuid('comment_id').notNullable().references('comments.id').onDelete('cascade');
    table.uuid('person_id').notNullable().references('people.id').onDelete('cascade').index();
    table.primary(['comment_id', 'person_id']);
  });
  await knex.schema.createTable('suggestions', (table) => {
    table.uuid('comment_id').primary().references('comments.id').onDelete('cascade');
    // json rather than jsonb keeps the text as it was sent, as with the patches of a design.
    table.json('patch').notNullable();
    table.json('before').notNullable();
    table.integer('base_sequence').notNullable();
    table.uuid('applied_by').references('people.id').onDelete('set null');
    table.timestamp('applied_at');
    table.integer('applied_sequence');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('suggestions');
  await knex.schema.dropTable('comment_mentions');
  await knex.schema.dropTable('comments');
}
