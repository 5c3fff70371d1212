import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('waivers', (table) => {
    table.uuid('id').primary().defaultTo(knex.raw('gen_random_uuid()'));
    table.uuid('design_id').notNullable().references('designs.id').onDelete('cascade');
    table.text('finding_key').notNullable();
    table.text('fingerprint').notNullable();
    // What the finding said when it was waived; it may say something else today, or be gone.
    table.text('rule').notNullable();
    table.text('severity').notNullable();
    table.text('sentence').notNullable();
    table.text('reason').notNullable();
    table.date('expires_on').notNullable();
    table.uuid('made_by').references('people.id').onDelete('set null');
    table.timestamp('made_at').notNullable();
    table.uuid('withdrawn_by').references('people.id').onDelete('set null');
    table.timestamp('withdrawn_at');
    table.index(['design_id', 'made_at']);
  });
  // A finding is waived once at a time: waiving it again takes the earlier waiver's place.
  await knex.raw(`
    create unique index waivers_one_standing on waivers (design_id, md5(finding_key))
    where withdrawn_at is null`);
  await knex.schema.alterTable('designs', (table) => {
    table.date('counts_until').comment('Last day on which the counts hold: a waiver ends. Null: no end.');
  });
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.alterTable('designs', (table) => table.dropColumn('counts_until'));
  await knex.schema.dropTable('waivers');
}
