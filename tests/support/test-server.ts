import { acquireCluster } from '../../server/bootstrap/postgres-cluster.mjs';
import { withConnection } from '../../server/bootstrap/postgres-access.mjs';
import { processStartTicks } from '../../server/bootstrap/processes.mjs';

/** A PostgreSQL server on which a test run may make and drop databases. */
export interface TestServer {
  readonly url: string;
  release(): Promise<void>;
}

/** The server that TEST_DATABASE_URL names, or else this checkout's own for tests; it never touches the demo's. */
export async function openTestServer(): Promise<TestServer> {
  const given = process.env['TEST_DATABASE_URL'];
  if (given) return { url: given, release: async () => {} };
  const cluster = await acquireCluster({ name: 'test', isDurable: false, say: console.log });
  await dropAbandonedDatabases(cluster.url);
  return cluster;
}

/** A name for a database of this run; the process id in it tells a later run whether its maker is still at work. */
export function testDatabaseName(purpose: string): string {
  return `${purpose}_${process.pid}_${crypto.randomUUID().slice(0, 8)}`;
}

/** The address of another database on the same server. */
export function onSameServer(url: string, database: string): string {
  const address = new URL(url);
  address.pathname = `/${database}`;
  return address.href;
}

/** Makes a database: a copy of `template`, or an empty one. Nobody may be connected to the template. */
export async function createDatabase(
  serverUrl: string,
  name: string,
  template = 'template0',
): Promise<string> {
  await withConnection(serverUrl, (client) =>
    client.query(
      `create database ${client.escapeIdentifier(name)} template ${client.escapeIdentifier(template)}`,
    ),
  );
  return onSameServer(serverUrl, name);
}

/** Drops a database, ending whatever is still connected to it. */
export async function dropDatabase(serverUrl: string, name: string): Promise<void> {
  await withConnection(serverUrl, (client) =>
    client.query(`drop database if exists ${client.escapeIdentifier(name)} with (force)`),
  );
}

// A run that was killed drops nothing.
async function dropAbandonedDatabases(serverUrl: string): Promise<void> {
  const names = await withConnection(serverUrl, (client) =>
    client.query<{ name: string }>(
      "select datname as name from pg_database where datname ~ '^(template|test|e2e)_[0-9]+_[0-9a-f]{8}$'",
    ),
  );
  for (const { name } of names.rows) {
    if (processStartTicks(Number(name.split('_')[1])) === null) await dropDatabase(serverUrl, name);
  }
}
