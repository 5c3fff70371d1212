import { once } from 'node:events';
import { connect } from 'node:net';
import { setTimeout as delay } from 'node:timers/promises';
import supertest from 'supertest';
import { afterAll, afterEach, beforeAll, describe, expect, test } from 'vitest';
import { patchListSchema, savedPatchesSchema } from '#contract/designs.ts';
import { openDatabase } from '../../server/db/open-database.ts';
import {
  addDesign,
  addEngagement,
  addWorkspace,
  testPassword,
  tokenOf,
} from '../support/test-application.ts';
import type { ServerProcess } from '../support/server-process.ts';
import { startServerProcess, untilHealthy } from '../support/server-process.ts';
import { createTestDatabase } from '../support/test-database.ts';
import type { TestDatabase } from '../support/test-database.ts';

let database: TestDatabase;
const started: ServerProcess[] = [];

beforeAll(async () => {
  database = await createTestDatabase();
});
afterAll(() => database.drop());
afterEach(() => {
  for (const { child } of started.splice(0)) child.kill('SIGKILL');
});

const start = async (environment: Record<string, string> = {}): Promise<ServerProcess> => {
  const server = await startServerProcess(database.url, environment);
  started.push(server);
  return server;
};

const lines = (output: string): readonly { msg: string }[] =>
  output
    .trim()
    .split('\n')
    .map((line) => JSON.parse(line) as { msg: string });

describe('the server as a process', () => {
  test.each(['SIGTERM', 'SIGINT'] as const)(
    'ends at %s after what it is doing, and closes its connections',
    async (signal) => {
      const server = await start();
      await untilHealthy(server);
      const { port } = new URL(server.url);
      // A request on its way: its body is not there yet.
      const body = '{"stack":{},"innerPacketBytes":1500}';
      const socket = connect(Number(port), '127.0.0.1');
      await once(socket, 'connect');
      socket.write(
        `POST /api/engine/wire HTTP/1.1\r\nHost: x\r\nContent-Type: application/json\r\nContent-Length: ${body.length}\r\n\r\n`,
      );
      let answer = '';
      socket.on('data', (chunk) => (answer += String(chunk)));
      await delay(100);
      server.child.kill(signal);
      await delay(100);
      await expect(fetch(`${server.url}/api/health`)).rejects.toThrow();
      socket.write(body);
      const [code] = (await once(server.child, 'exit')) as [number | null];
      expect(answer).toMatch(/^HTTP\/1\.1 200 /);
      expect(code).toBe(0);
      expect(lines(server.output()).map(({ msg }) => msg)).toEqual(
        expect.arrayContaining(['listening', 'stopping', 'stopped']),
      );
    },
  );

  test('has kept every edit that it acknowledged when it is killed and started again', async () => {
    const own = openDatabase(database.url);
    const workspace = await addWorkspace({ database: own });
    const engagementId = await addEngagement({ database: own }, workspace.id);
    const designId = await addDesign({ database: own }, engagementId);
    await own.close();
    const { email } = workspace.people.architect;
    let acknowledged = 0;
    for (let life = 0; life < 2; life += 1) {
      const server = await start();
      await untilHealthy(server);
      const agent = supertest.agent(server.url);
      const visitor = tokenOf(await agent.get('/api/session'));
      const session = await agent
        .post('/api/session')
        .set('X-CSRF-Token', visitor)
        .send({ email, password: testPassword })
        .expect(200);
      const kept = await agent.get(`/api/designs/${designId}/patches?after=0`).expect(200);
      const { sequence } = patchListSchema.parse(kept.body);
      // The one that was on its way may have arrived too.
      expect([acknowledged, acknowledged + 1]).toContain(sequence);
      acknowledged = sequence;
      const exit = once(server.child, 'exit');
      setTimeout(() => server.child.kill('SIGKILL'), 400);
      for (;;) {
        const saved = await agent
          .post(`/api/designs/${designId}/patches`)
          .set('X-CSRF-Token', tokenOf(session))
          .send({
            baseSequence: acknowledged,
            edits: [{ editId: crypto.randomUUID(), patch: { meta: { revision: `${acknowledged}` } } }],
          })
          .catch(() => undefined);
        if (saved === undefined) break;
        expect(saved.status).toBe(200);
        acknowledged = savedPatchesSchema.parse(saved.body).sequence;
      }
      await exit;
    }
    expect(acknowledged).toBeGreaterThan(2);
  });

  test('says in its log what is wrong with its configuration', async () => {
    const server = await start({ SESSION_SECRET: 'short' });
    const [code] = (await once(server.child, 'exit')) as [number | null];
    expect(code).toBe(1);
    expect(lines(server.output())).toMatchObject([
      { level: 60, msg: expect.stringContaining('SESSION_SECRET') as string },
    ]);
  });

  test('says that its port is taken', async () => {
    const first = await start();
    await untilHealthy(first);
    const second = await start({ PORT: new URL(first.url).port });
    const [code] = (await once(second.child, 'exit')) as [number | null];
    expect(code).toBe(1);
    expect(lines(second.output()).at(-1)?.msg).toContain(`port ${new URL(first.url).port}`);
  });

  test('answers health with 503, and stays, while its database is away', async () => {
    const server = await start({ DATABASE_URL: 'postgresql://nobody@127.0.0.1:9/nothing' });
    for (let answered = false; !answered; await delay(50)) {
      const response = await fetch(`${server.url}/api/health`).catch(() => undefined);
      answered = response !== undefined;
      if (response !== undefined) expect(response.status).toBe(503);
    }
    expect(server.child.exitCode).toBeNull();
    expect(() => lines(server.output())).not.toThrow();
  });
});
