import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('activity', (table) => {
    table.bigIncrements('id');
    table.uuid('workspace_id').notNullable().references('workspaces.id').onDelete('cascade');
    table.timestamp('at').notNullable();
    table.text('action').notNullable();
    // Ids without references and names as they were: what happened stays readable when its object or its person is gone.
    table.uuid('person_id');
    table.text('person_name');
    table.text('object_kind').notNullable();
    table.uuid('object_id');
    table.text('object_name').notNullable();
    table.uuid('design_id');
    table.jsonb('details').notNullable().defaultTo('{}');
    table.index(['workspace_id', 'id']);
  });
  await knex.raw(`
    create function refuse_change_of_activity() returns trigger language plpgsql as $$
    begin
      raise exception 'activity is append-only';
    end $$`);
  await knex.raw(`
    create trigger activity_append_only before update on activity
    for each row execute function refuse_change_of_activity()`);
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('activity');
  await knex.raw('drop function refuse_change_of_activity()');
}
