import { randomUUID } from 'node:crypto';
import { readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { startInBackground, waitUntilAnswering } from '../../server/bootstrap/background-process.mjs';
import { ensureWritableFolder, stateFolder } from '../../server/bootstrap/folders.mjs';
import { freeLoopbackPort } from '../../server/bootstrap/free-port.mjs';
import { acquireCluster } from '../../server/bootstrap/postgres-cluster.mjs';
import { clusterFolder } from '../../server/bootstrap/postgres-folder.mjs';
import { postgresUser, withoutPostgresVariables } from '../../server/bootstrap/postgres-programs.mjs';
import { migrate, seedDemo } from '../../server/bootstrap/schema.mjs';

const name = `crash-${process.pid}`;
const stops: (() => Promise<void>)[] = [];
afterAll(async () => {
  for (const stop of stops.reverse()) await stop();
  rmSync(join(stateFolder, name), { recursive: true, force: true });
});

const quiet = (): void => undefined;

/** The durable cluster and a server on it, both started as `npm start` does. */
const start = async (port: number) => {
  const cluster = await acquireCluster({ name, isDurable: true, say: quiet });
  await migrate(cluster.url);
  await seedDemo(cluster.url);
  const server = startInBackground(['--import', 'tsx', 'server/main.ts'], {
    env: {
      ...withoutPostgresVariables(process.env),
      NODE_ENV: 'production',
      DATABASE_URL: cluster.url,
      HOST: '127.0.0.1',
      PORT: String(port),
      PUBLIC_URL: `http://127.0.0.1:${port}`,
      SESSION_SECRET: 'a secret that is long enough for a test run',
      SMTP_URL: '',
    },
    logFile: join(ensureWritableFolder(join(stateFolder, 'test')), 'crash-server.log'),
  });
  stops.push(
    () => cluster.release(),
    () => server.stop(),
  );
  await waitUntilAnswering(server, 'The server', `http://127.0.0.1:${port}/api/health`);
  return { cluster, server };
};

/** A signed-in architect without a browser. */
const signIn = async (base: string) => {
  let cookie = '';
  const call = async (path: string, init: RequestInit = {}, token = ''): Promise<Response> => {
    const response = await fetch(base + path, {
      ...init,
      headers: { cookie, 'content-type': 'application/json', 'x-csrf-token': token },
    });
    const set = response.headers.getSetCookie().map((line) => line.split(';')[0]!);
    if (set.length > 0) cookie = set.join('; ');
    return response;
  };
  const first = (await (await call('/api/session')).json()) as { csrfToken: string };
  const session = (await (
    await call(
      '/api/session/demo',
      { method: 'POST', body: JSON.stringify({ role: 'architect' }) },
      first.csrfToken,
    )
  ).json()) as {
    csrfToken: string;
    memberships: { workspaceId: string }[];
  };
  return { call, token: session.csrfToken, workspaceId: session.memberships[0]!.workspaceId };
};

describe('server and database killed amid edits', () => {
  it('keeps every edit that was acknowledged, in order', async () => {
    const port = await freeLoopbackPort();
    const base = `http://127.0.0.1:${port}`;
    const running = await start(port);
    const { call, token, workspaceId } = await signIn(base);
    const list = (await (await call(`/api/workspaces/${workspaceId}/engagements`)).json()) as {
      engagements: { designs: { id: string }[] }[];
    };
    const designId = list.engagements[0]!.designs[0]!.id;
    const opened = (await (await call(`/api/designs/${designId}`)).json()) as { sequence: number };

    // One edit after another until the killing makes a request fail.
    const acknowledged: string[] = [];
    let sequence = opened.sequence;
    let stopped = false;
    const editing = (async () => {
      for (let i = 0; !stopped; i += 1) {
        const editId = randomUUID();
        const body = JSON.stringify({
          baseSequence: sequence,
          edits: [{ editId, patch: { meta: { supplementaryTitle: `Edit ${i}` } } }],
        });
        try {
          const response = await call(`/api/designs/${designId}/patches`, { method: 'POST', body }, token);
          if (response.status !== 200) return;
          sequence = ((await response.json()) as { sequence: number }).sequence;
          acknowledged.push(editId);
        } catch {
          return;
        }
      }
    })();
    await expect.poll(() => acknowledged.length, { timeout: 30_000 }).toBeGreaterThan(25);
    const folder = await clusterFolder(name, await postgresUser(null), quiet);
    process.kill(running.server.identity.pid, 'SIGKILL');
    process.kill(
      Number(readFileSync(join(folder, 'data', 'postmaster.pid'), 'utf8').split('\n')[0]),
      'SIGKILL',
    );
    stopped = true;
    await editing;
    await running.server.ended;

    await start(port);
    const again = await signIn(base);
    const log = (await (
      await again.call(`/api/designs/${designId}/patches?after=${opened.sequence}`)
    ).json()) as {
      patches: { editId: string; sequence: number }[];
    };
    const logged = log.patches.map((patch) => patch.editId);
    // At most one more than was acknowledged: the answer to the last may have been lost.
    expect(logged.slice(0, acknowledged.length)).toEqual(acknowledged);
    expect(logged.length - acknowledged.length).toBeLessThanOrEqual(1);
    const now = (await (await again.call(`/api/designs/${designId}`)).json()) as {
      document: { meta: { supplementaryTitle: string } };
    };
    expect(now.document.meta.supplementaryTitle).toBe(`Edit ${logged.length - 1}`);
  });
});
