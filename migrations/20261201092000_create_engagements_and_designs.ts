import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('engagements', (table) => {
    table.uuid('id').primary().defaultTo(knex.raw('gen_random_uuid()'));
    table.uuid('workspace_id').notNullable().references('workspaces.id').onDelete('cascade').index();
    table.text('name').notNullable();
    table.text('summary').notNullable().defaultTo('');
    table.timestamp('created_at').notNullable();
    table.timestamp('archived_at');
  });
  await knex.schema.createTable('designs', (table) => {
    table.uuid('id').primary().defaultTo(knex.raw('gen_random_uuid()'));
    table.uuid('engagement_id').notNullable().references('engagements.id').onDelete('cascade').index();
    table.text('state').notNullable().defaultTo('draft');
    // Number of the last patch; 0 is the document that the design began with.
    table.integer('sequence').notNullable().defaultTo(0);
    // Read from the document at every save, so that a list needs no document.
    table.text('title').notNullable();
    table.text('identification');
    table.text('revision');
    table.integer('blocking').notNullable();
    table.integer('degrading').notNullable();
    table.integer('advisory').notNullable();
    table.timestamp('created_at').notNullable();
    table.timestamp('changed_at').notNullable();
    table.uuid('changed_by').references('people.id').onDelete('set null');
    table.timestamp('archived_at');
    table.check(
      "state in ('draft', 'in-review', 'approved', 'built', 'superseded')",
      [],
      'designs_state_is_known',
    );
  });
  await knex.schema.createTable('design_patches', (table) => {
    table.uuid('design_id').notNullable().references('designs.id').onDelete('cascade');
    table.integer('sequence').notNullable();
    table.uuid('edit_id').notNullable();
    table.uuid('made_by').references('people.id').onDelete('set null');
    table.timestamp('made_at').notNullable();
    table.boolean('is_repair').notNullable();
    // json rather than jsonb keeps the text as it was sent, and takes every character that JSON does.
    table.json('patch').notNullable();
    table.primary(['design_id', 'sequence']);
    table.unique(['design_id', 'edit_id']);
  });
  await knex.schema.createTable('design_snapshots', (table) => {
    table.uuid('design_id').notNullable().references('designs.id').onDelete('cascade');
    table.integer('sequence').notNullable();
    table.binary('document').notNullable().comment('JSON, gzip');
    table.primary(['design_id', 'sequence']);
  });
  // Already compressed; PostgreSQL need not try again.
  await knex.raw('alter table design_snapshots alter column document set storage external');
  // The log only grows: what was acknowledged can be neither changed nor taken out, other than with its design.
  await knex.raw(`
    create function refuse_change_of_patch() returns trigger language plpgsql as $$
    begin
      if new.patch::text is distinct from old.patch::text or new.sequence <> old.sequence
        or new.design_id <> old.design_id or new.edit_id <> old.edit_id then
        raise exception 'patches are append-only';
      end if;
      return new;
    end $$`);
  await knex.raw(`
    create trigger design_patches_append_only before update on design_patches
    for each row execute function refuse_change_of_patch()`);
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('design_snapshots');
  await knex.schema.dropTable('design_patches');
  await knex.raw('drop function refuse_change_of_patch()');
  await knex.schema.dropTable('designs');
  await knex.schema.dropTable('engagements');
}
