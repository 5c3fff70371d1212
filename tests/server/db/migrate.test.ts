import { afterAll, beforeAll, expect, test } from 'vitest';
import type { Database } from '../../../server/db/open-database.ts';
import { openDatabase } from '../../../server/db/open-database.ts';
import {
  isSchemaCurrent,
  migrateToLatest,
  migrateToNothing,
  migrationNames,
} from '../../../server/db/migrate.ts';
import type { TestDatabase } from '../../support/test-database.ts';
import { createTestDatabase } from '../../support/test-database.ts';

let testDatabase: TestDatabase;
let database: Database;

beforeAll(async () => {
  testDatabase = await createTestDatabase();
  database = openDatabase(testDatabase.url);
});
afterAll(async () => {
  await database.close();
  await testDatabase.drop();
});

/** Every table, column, constraint, index, function and trigger as PostgreSQL describes it. */
async function schema(): Promise<readonly string[]> {
  const { rows } = await database.knex.raw<{ rows: { line: string }[] }>(`
    select concat_ws(' ', table_name, column_name, data_type, is_nullable, column_default) as line
      from information_schema.columns where table_schema = 'public' and table_name not like 'knex%'
    union all select concat_ws(' ', conrelid::regclass, pg_get_constraintdef(oid)) from pg_constraint
      where connamespace = 'public'::regnamespace and conrelid::regclass::text not like 'knex%'
    union all select indexdef from pg_indexes where schemaname = 'public' and tablename not like 'knex%'
    union all select proname from pg_proc where pronamespace = 'public'::regnamespace
    union all select tgname from pg_trigger where not tgisinternal
    order by line`);
  return rows.map(({ line }) => line);
}

test('every migration can be taken back and run again, to the same schema', async () => {
  const before = await schema();
  expect(before.length).toBeGreaterThan(40);
  await migrateToNothing(testDatabase.url);
  expect(await schema()).toEqual([]);
  expect(await migrateToLatest(testDatabase.url)).toEqual(migrationNames());
  expect(await schema()).toEqual(before);
  expect(await migrateToLatest(testDatabase.url)).toEqual([]);
});

test('a schema counts as current only with exactly the migrations of the program', async () => {
  expect(await isSchemaCurrent(database.knex)).toBe(true);
  await database.knex('knex_migrations').insert({ name: '29991231000000_from_later', batch: 9 });
  expect(await isSchemaCurrent(database.knex)).toBe(false);
  await database.knex('knex_migrations').where({ batch: 9 }).delete();
  const last = migrationNames().at(-1)!;
  await database.knex('knex_migrations').where({ name: last }).delete();
  expect(await isSchemaCurrent(database.knex)).toBe(false);
  await database.knex.schema.dropTable('knex_migrations');
  expect(await isSchemaCurrent(database.knex)).toBe(false);
});
