import { randomUUID } from 'node:crypto';
import { once } from 'node:events';
import supertest from 'supertest';
import { afterAll, beforeAll, expect, test, vi } from 'vitest';
import { livePresenceSchema } from '#contract/live.ts';
import { allowances } from '../../server/auth/throttles.ts';
import type { Database } from '../../server/db/open-database.ts';
import { openDatabase } from '../../server/db/open-database.ts';
import type { Balancer } from '../support/balancer.ts';
import { startBalancer } from '../support/balancer.ts';
import { openEventStream } from '../support/event-stream.ts';
import type { ServerProcess } from '../support/server-process.ts';
import { startServerProcess, untilHealthy } from '../support/server-process.ts';
import type { TestBrowser, TestWorkspace } from '../support/test-application.ts';
import {
  addDesign,
  addEngagement,
  addWorkspace,
  browserOf,
  cookieOf,
  testPassword,
  tokenOf,
} from '../support/test-application.ts';
import type { TestDatabase } from '../support/test-database.ts';
import { createTestDatabase } from '../support/test-database.ts';

let testDatabase: TestDatabase;
let database: Database;
let processes: ServerProcess[] = [];
let balancer: Balancer;
let workspace: TestWorkspace;
let designId: string;

beforeAll(async () => {
  testDatabase = await createTestDatabase();
  database = openDatabase(testDatabase.url);
  workspace = await addWorkspace({ database });
  designId = await addDesign({ database }, await addEngagement({ database }, workspace.id));
  processes = await Promise.all([startServerProcess(testDatabase.url), startServerProcess(testDatabase.url)]);
  await Promise.all(processes.map(untilHealthy));
  balancer = await startBalancer(processes.map(({ url }) => url));
});
afterAll(async () => {
  await balancer.close();
  for (const { child } of processes) {
    if (child.exitCode !== null || child.signalCode !== null) continue;
    child.kill('SIGKILL');
    await once(child, 'exit');
  }
  await database.close();
  await testDatabase.drop();
});

async function signIn(email: string): Promise<TestBrowser> {
  const browser = await browserOf(supertest.agent(balancer.url));
  browser.csrfToken = tokenOf(
    await browser.post('/api/session', { email, password: testPassword }).expect(200),
  );
  return browser;
}

const edit = (browser: TestBrowser, revision: string, baseSequence: number) =>
  browser.post(`/api/designs/${designId}/patches`, {
    baseSequence,
    edits: [{ editId: randomUUID(), patch: { meta: { revision } } }],
  });
const follow = (browser: TestBrowser) =>
  openEventStream(
    `${balancer.url}/api/designs/${designId}/live?connectionId=${randomUUID()}`,
    cookieOf(browser),
  );
const numbered = (sequence: number) => (each: { readonly event: string; readonly data: unknown }) =>
  each.event === 'patches' && (each.data as { sequence: number }).sequence === sequence;

test('two processes behind one address serve one workspace, and go on when one of them is killed', async () => {
  const architect = await signIn(workspace.people.architect.email);
  const owner = await signIn(workspace.people.owner.email);
  // Two streams in a row land on different processes.
  const streams = [await follow(owner), await follow(owner)];
  await edit(architect, 'B', 0).expect(200);
  for (const stream of streams) await stream.next(numbered(1));
  expect([...balancer.taken.values()].every((count) => count > 2)).toBe(true);

  const [killed] = processes;
  const exit = once(killed!.child, 'exit');
  killed!.child.kill('SIGKILL');
  await exit;
  await vi.waitFor(() => expect(streams.filter((stream) => stream.isEnded())).toHaveLength(1));

  // A new process would be found by the same session; the one that is left is.
  await edit(architect, 'C', 1).expect(200);
  const left = streams.find((stream) => !stream.isEnded())!;
  await left.next(numbered(2));
  const again = await follow(owner);
  await again.next(numbered(2));
  const connectionId = randomUUID();
  const place = { page: 'sheet', selection: [], view: null };
  await architect.put(`/api/designs/${designId}/presence`, { connectionId, place }).expect(204);
  await again.next(
    ({ event, data }) =>
      event === 'presence' &&
      livePresenceSchema.parse(data).people.some((person) => person.connectionId === connectionId),
  );
  left.close();
  again.close();
});

test('both count the same attempts to sign in', async () => {
  const [, second] = processes;
  const third = await startServerProcess(testDatabase.url);
  processes.push(third);
  await untilHealthy(third);
  const browsers = await Promise.all([second!, third].map(({ url }) => browserOf(supertest.agent(url))));
  const { email } = workspace.people.installer;
  const statuses: number[] = [];
  for (let attempt = 0; attempt <= allowances.signInOfPersonFromAddress.times; attempt += 1) {
    const browser = browsers[attempt % 2]!;
    statuses.push((await browser.post('/api/session', { email, password: 'wrong' })).status);
  }
  expect(statuses.slice(0, -1).every((status) => status === 401)).toBe(true);
  expect(statuses.at(-1)).toBe(429);
});
