import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  // Worth nothing after a crash, so it need not survive one.
  await knex.raw(`
    create unlogged table design_presence (
      connection_id uuid primary key,
      design_id uuid not null references designs (id) on delete cascade,
      person_id uuid not null references people (id) on delete cascade,
      place jsonb not null,
      seen_at timestamptz not null
    )`);
  await knex.raw('create index design_presence_design on design_presence (design_id)');
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('design_presence');
}
