import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import knexFactory from 'knex';
import { Logger, runMigrations } from 'graphile-worker';
import type { Knex } from 'knex';

// What the queue has to say about its own migrations helps nobody.
const silent = new Logger(() => () => undefined);
const folder = join(import.meta.dirname, '..', '..', 'migrations');

/** Names of all migrations in order, without extension: the record in the database outlives how files are built. */
export function migrationNames(): readonly string[] {
  return readdirSync(folder)
    .filter((name) => name.endsWith('.ts'))
    .map((name) => name.slice(0, -'.ts'.length))
    .sort();
}

export const migrationSource: Knex.MigrationSource<string> = {
  getMigrations: () => Promise.resolve([...migrationNames()]),
  getMigrationName: (name) => name,
  getMigration: (name) => import(pathToFileURL(join(folder, `${name}.ts`)).href) as Promise<Knex.Migration>,
};

/**
 * Brings a database to the newest schema and answers the names of the migrations that ran. The queue of jobs brings its own
 * tables, in a schema of their own.
 */
export async function migrateToLatest(databaseUrl: string): Promise<string[]> {
  const ran = await withMigrator(databaseUrl, async (migrate) => {
    const [, names] = (await migrate.latest()) as [number, string[]];
    return names;
  });
  await runMigrations({ connectionString: databaseUrl, maxPoolSize: 1, logger: silent });
  return ran;
}

/** Takes every migration back, the newest first; the queue's tables stay, they know nothing of ours. */
export async function migrateToNothing(databaseUrl: string): Promise<void> {
  await withMigrator(databaseUrl, async (migrate) => {
    await migrate.rollback(undefined, true);
  });
}

/** True when the database has run exactly the migrations of this program. */
export async function isSchemaCurrent(knex: Knex): Promise<boolean> {
  const found = await knex.raw<{ rows: { present: boolean }[] }>(
    "select to_regclass('knex_migrations') is not null and to_regclass('graphile_worker.migrations') is not null as present",
  );
  if (found.rows[0]?.present !== true) return false;
  const done = await knex('knex_migrations').orderBy('name').pluck<string[]>('name');
  const wanted = migrationNames();
  return done.length === wanted.length && wanted.every((name, index) => done[index] === name);
}

async function withMigrator<T>(
  databaseUrl: string,
  work: (migrate: Knex.Migrator) => Promise<T>,
): Promise<T> {
  const knex = knexFactory({
    client: 'pg',
    connection: databaseUrl,
    pool: { min: 0, max: 2 },
    migrations: { migrationSource },
  });
  try {
    return await work(knex.migrate);
  } finally {
    await knex.destroy();
  }
}
