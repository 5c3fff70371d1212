import { existsSync, readFileSync, readdirSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, afterEach, beforeAll, expect, test } from 'vitest';
import { stateFolder } from '../../../server/bootstrap/folders.mjs';
import { withConnection } from '../../../server/bootstrap/postgres-access.mjs';
import { acquireCluster } from '../../../server/bootstrap/postgres-cluster.mjs';
import { outsideFolder } from '../../../server/bootstrap/postgres-folder.mjs';
import { processStartTicks, processesWorkingIn } from '../../../server/bootstrap/processes.mjs';

const name = `trial-${process.pid}`;
const folders = [join(stateFolder, name), join(outsideFolder(name), '..')];
const releases: (() => Promise<void>)[] = [];

async function open(isDurable = true) {
  const cluster = await acquireCluster({ name, isDurable, say: () => {} });
  releases.push(cluster.release);
  return cluster;
}

function dataFolder(): string {
  const data = folders
    .map((folder) => join(folder, 'postgres', 'data'))
    .find((path) => statOf(path) !== undefined);
  if (data === undefined) throw new Error('there is no cluster');
  return data;
}

function statOf(path: string) {
  return statSync(path, { throwIfNoEntry: false });
}

async function ask(url: string, sql: string): Promise<unknown> {
  const result = await withConnection(url, (client) => client.query<{ answer: unknown }>(sql));
  return result.rows[0]?.answer;
}

function killServer(): void {
  const [pid] = readFileSync(join(dataFolder(), 'postmaster.pid'), 'utf8').split('\n');
  process.kill(Number(pid), 'SIGKILL');
}

// A run that was killed in the middle of a test leaves its server at work.
beforeAll(() => {
  const trials = existsSync(stateFolder)
    ? readdirSync(stateFolder).filter((each) => /^trial-\d+$/.test(each))
    : [];
  for (const trial of trials.filter((each) => processStartTicks(Number(each.split('-')[1])) === null)) {
    const data = join(stateFolder, trial, 'postgres', 'data');
    for (const pid of processesWorkingIn(data)) process.kill(pid, 'SIGKILL');
    rmSync(join(stateFolder, trial), { recursive: true, force: true });
  }
});

afterEach(async () => {
  for (const release of releases.splice(0)) await release();
});

afterAll(() => {
  for (const folder of folders) rmSync(folder, { recursive: true, force: true });
});

test('a new cluster keeps its promises: durable, on loopback, its passwords for its owner only', async () => {
  const { url } = await open();
  expect(await ask(url, "select current_setting('fsync') as answer")).toBe('on');
  expect(await ask(url, "select current_setting('listen_addresses') as answer")).toBe('127.0.0.1');
  expect(await ask(url, 'select rolsuper as answer from pg_roles where rolname = current_user')).toBe(false);
  expect(statSync(join(dataFolder(), '..', 'passwords.json')).mode & 0o777).toBe(0o600);
  const withoutPassword = new URL(url);
  withoutPassword.password = 'guess';
  await expect(ask(withoutPassword.href, 'select 1 as answer')).rejects.toThrow(
    'password authentication failed',
  );
});

test('two users share one server, and the last to leave stops it', async () => {
  const first = await open();
  const second = await open();
  expect(second.url).toBe(first.url);
  await first.release();
  expect(second.isRunning()).toBe(true);
  await second.release();
  expect(second.isRunning()).toBe(false);
});

test('what was written survives a stop and a killed server', async () => {
  const first = await open();
  await ask(first.url, 'create table if not exists logbook (answer text)');
  await ask(first.url, "insert into logbook values ('high water 04:12')");
  await first.release();
  const second = await open();
  killServer();
  await expect.poll(() => second.isRunning()).toBe(false);
  const third = await open();
  expect(await ask(third.url, 'select answer from logbook')).toBe('high water 04:12');
});

test('a pid file that names some other process does not keep the server from starting', async () => {
  const first = await open();
  await first.release();
  const now = Math.floor(Date.now() / 1000);
  writeFileSync(join(dataFolder(), 'postmaster.pid'), `${process.pid}\n${dataFolder()}\n${now}\n5432\n`);
  const second = await open();
  expect(await ask(second.url, 'select 1 as answer')).toBe(1);
});

test('a damaged cluster is kept when it was to last, and made anew when it was not', async () => {
  const first = await open();
  await first.release();
  rmSync(join(dataFolder(), 'global', 'pg_control'));
  await expect(open()).rejects.toThrow('PostgreSQL does not start; its log');
  const second = await open(false);
  expect(await ask(second.url, "select to_regclass('logbook')::text as answer")).toBeNull();
  expect(await ask(second.url, "select current_setting('fsync') as answer")).toBe('off');
});

test('a cluster without its passwords is refused with the way out', async () => {
  const passwords = join(dataFolder(), '..', 'passwords.json');
  rmSync(passwords);
  await expect(open()).rejects.toThrow(`The passwords of the database, '${passwords}', cannot be read`);
});
