import knexFactory from 'knex';
import type { Knex } from 'knex';
import pg from 'pg';

/** The server's way to PostgreSQL: one per process. */
export interface Database {
  readonly knex: Knex;
  /** For libraries that speak to PostgreSQL themselves: sessions and throttles. */
  readonly pool: pg.Pool;
  /** Starts work that no answer waits for; `settled` and `close` do. */
  inBackground(task: () => Promise<unknown>): void;
  settled(): Promise<void>;
  close(): Promise<void>;
}

export interface DatabaseOptions {
  /** Hears of connections that failed or broke while idle, and of background work that failed. */
  readonly onError?: (error: unknown) => void;
}

const statementTimeoutMs = 30_000;
const connectTimeoutMs = 5_000;

export function openDatabase(url: string, { onError = () => {} }: DatabaseOptions = {}): Database {
  const connection = {
    connectionString: url,
    application_name: 'longpatch',
    statement_timeout: statementTimeoutMs,
    connectionTimeoutMillis: connectTimeoutMs,
  };
  const knex = knexFactory({
    client: 'pg',
    connection,
    pool: { min: 0, max: 10 },
    acquireConnectionTimeout: 10_000,
    // Values of a failed statement would end up in logs.
    compileSqlOnError: false,
    // Its own way to the terminal; each failure also reaches whoever asked.
    log: { warn: onError, error: onError, deprecate: onError, debug: onError },
  });
  const pool = new pg.Pool({ ...connection, max: 5 });
  // Without a listener a connection that breaks while idle would end the process.
  pool.on('error', onError);

  const running = new Set<Promise<void>>();
  const settled = async () => {
    while (running.size > 0) await Promise.all(running);
  };
  return {
    knex,
    pool,
    inBackground(task) {
      const run: Promise<void> = Promise.resolve()
        .then(task)
        .then(() => undefined, onError)
        .finally(() => running.delete(run));
      running.add(run);
    },
    settled,
    async close() {
      await settled();
      await Promise.all([knex.destroy(), pool.end()]);
    },
  };
}
