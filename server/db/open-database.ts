import knexFactory from 'knex';
import type { Knex } from 'knex';
import pg from 'pg';

/** The server's way to PostgreSQL: one per process. */
export interface Database {
  readonly knex: Knex;
  /** For libraries that speak to PostgreSQL themselves: sessions and throttles. */
  readonly pool: pg.Pool;
  /** Hears what PostgreSQL notifies on a channel, for as long as the database is open. */
  listen(channel: string, listener: ChannelListener): void;
  /** Starts work that no answer waits for; `settled` and `close` do. */
  inBackground(task: () => Promise<unknown>): void;
  settled(): Promise<void>;
  close(): Promise<void>;
}

export interface ChannelListener {
  onNotification(payload: string): void;
  /** The connection was lost and stands again; what was notified in between is not told. */
  onGap(): void;
}

export interface DatabaseOptions {
  /** Hears of connections that failed or broke while idle, and of background work that failed. */
  readonly onError?: (error: unknown) => void;
}

const listenAgainMs = 500;
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

  const listening = new Set<() => Promise<void>>();
  let isClosed = false;
  const listen = (channel: string, listener: ChannelListener, isFirst = true): void => {
    if (isClosed) return;
    const client = new pg.Client({ ...connection, keepAlive: true });
    const end = () => client.end().catch(onError);
    const again = (error?: unknown): void => {
      if (!listening.delete(end)) return;
      if (error !== undefined) onError(error);
      void end();
      setTimeout(() => listen(channel, listener, false), listenAgainMs).unref();
    };
    listening.add(end);
    client.on('error', again);
    client.on('end', () => again());
    client.on('notification', ({ payload = '' }) => listener.onNotification(payload));
    client
      .connect()
      .then(() => client.query(`listen ${client.escapeIdentifier(channel)}`))
      .then(() => (isFirst ? undefined : listener.onGap()), again);
  };

  const running = new Set<Promise<void>>();
  const settled = async () => {
    while (running.size > 0) await Promise.all(running);
  };
  return {
    knex,
    pool,
    listen,
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
      isClosed = true;
      const ends = [...listening];
      listening.clear();
      await Promise.all([knex.destroy(), pool.end(), ...ends.map((end) => end())]);
    },
  };
}
