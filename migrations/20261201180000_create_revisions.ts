import type { Knex } from 'knex';

export async function up(knex: Knex): Promise<void> {
  await knex.schema.createTable('revisions', (table) => {
    table.uuid('id').primary().defaultTo(knex.raw('gen_random_uuid()'));
    table.uuid('design_id').notNullable().references('designs.id').onDelete('cascade');
    table.integer('number').notNullable();
    table.text('label').notNullable();
    table.text('state').notNullable();
    table.integer('sequence').notNullable().comment('Number of the last patch that is in it.');
    table.binary('document').notNullable().comment('JSON, gzip');
    table.text('content_hash').notNullable().comment('SHA-256 of the canonical JSON, hex');
    table.text('engine_version').notNullable();
    table.binary('findings').notNullable().comment('JSON, gzip');
    table.json('waivers').notNullable();
    table.integer('blocking').notNullable();
    table.integer('degrading').notNullable();
    table.integer('advisory').notNullable();
    table.integer('waived').notNullable();
    table.text('message').notNullable();
    // Names as they were: who approved stays readable when that person is gone.
    table.uuid('asked_by').references('people.id').onDelete('set null');
    table.text('asked_by_name').notNullable();
    table.timestamp('asked_at').notNullable();
    table.uuid('decided_by').references('people.id').onDelete('set null');
    table.text('decided_by_name');
    table.timestamp('decided_at');
    table.text('note').notNullable().defaultTo('');
    table.uuid('built_by').references('people.id').onDelete('set null');
    table.text('built_by_name');
    table.date('built_on');
    table.uuid('superseded_by').references('people.id').onDelete('set null');
    table.text('superseded_by_name');
    table.timestamp('superseded_at');
    table.text('superseded_note').notNullable().defaultTo('');
    table.unique(['design_id', 'number']);
    table.unique(['design_id', 'label']);
    table.check(
      "state in ('in-review', 'withdrawn', 'sent-back', 'approved', 'built', 'superseded')",
      [],
      'revisions_state_is_known',
    );
  });
  await knex.raw('alter table revisions alter column document set storage external');
  await knex.raw('alter table revisions alter column findings set storage external');
  await knex.raw(`
    create unique index revisions_one_in_review on revisions (design_id) where state = 'in-review'`);
  await knex.raw(`
    create unique index revisions_one_issued on revisions (design_id) where state in ('approved', 'built')`);
  // What was put to review is that for good; what was decided, too. After that only the state goes on, in one direction.
  await knex.raw(`
    create function refuse_change_of_revision() returns trigger language plpgsql as $$
    begin
      if (new.id, new.design_id, new.number, new.label, new.sequence, new.document, new.content_hash, new.message,
          new.asked_at, new.asked_by_name)
        is distinct from
        (old.id, old.design_id, old.number, old.label, old.sequence, old.document, old.content_hash, old.message,
          old.asked_at, old.asked_by_name) then
        raise exception 'a revision is frozen';
      end if;
      -- Only to nobody, as when that person is removed.
      if new.asked_by is distinct from old.asked_by and new.asked_by is not null then
        raise exception 'a revision is frozen';
      end if;
      if new.state <> old.state and (old.state, new.state) not in
        (('in-review', 'withdrawn'), ('in-review', 'sent-back'), ('in-review', 'approved'),
          ('approved', 'built'), ('approved', 'superseded'), ('built', 'superseded')) then
        raise exception 'a revision that is % does not become %', old.state, new.state;
      end if;
      if old.state = 'in-review' then
        return new;
      end if;
      if (new.engine_version, new.findings, new.waivers::text, new.blocking, new.degrading, new.advisory, new.waived,
          new.decided_at, new.decided_by_name, new.note)
        is distinct from
        (old.engine_version, old.findings, old.waivers::text, old.blocking, old.degrading, old.advisory, old.waived,
          old.decided_at, old.decided_by_name, old.note)
        or (new.decided_by is distinct from old.decided_by and new.decided_by is not null) then
        raise exception 'a decided revision is frozen';
      end if;
      if old.state <> 'approved' and
        ((new.built_on, new.built_by_name) is distinct from (old.built_on, old.built_by_name)
          or (new.built_by is distinct from old.built_by and new.built_by is not null)) then
        raise exception 'what was built stays on record';
      end if;
      if old.state = 'superseded' and
        ((new.superseded_at, new.superseded_by_name, new.superseded_note)
          is distinct from (old.superseded_at, old.superseded_by_name, old.superseded_note)
          or (new.superseded_by is distinct from old.superseded_by and new.superseded_by is not null)) then
        raise exception 'what was superseded stays on record';
      end if;
      return new;
    end $$`);
  await knex.raw(`
    create trigger revisions_frozen before update on revisions
    for each row execute function refuse_change_of_revision()`);
  // It goes with its design alone, which is gone by the time the deletion comes down to here.
  await knex.raw(`
    create function refuse_removal_of_revision() returns trigger language plpgsql as $$
    begin
      if exists (select from designs where id = old.design_id) then
        raise exception 'a revision stays as long as its design';
      end if;
      return old;
    end $$`);
  await knex.raw(`
    create trigger revisions_stay before delete on revisions
    for each row execute function refuse_removal_of_revision()`);

  await knex.schema.alterTable('designs', (table) => {
    table.uuid('created_by').references('people.id').onDelete('set null');
  });
  await knex.schema.alterTable('design_patches', (table) => {
    table
      .boolean('is_issue')
      .notNullable()
      .defaultTo(false)
      .comment('Written into the title block when the state changed: nobody’s drawing.');
  });
  await knex.raw('update designs set created_by = changed_by where sequence = 0');
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.alterTable('design_patches', (table) => table.dropColumn('is_issue'));
  await knex.schema.alterTable('designs', (table) => table.dropColumn('created_by'));
  await knex.schema.dropTable('revisions');
  await knex.raw('drop function refuse_removal_of_revision()');
  await knex.raw('drop function refuse_change_of_revision()');
}
