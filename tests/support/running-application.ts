import { randomBytes } from 'node:crypto';
import { join } from 'node:path';
import type { TestProject } from 'vitest/node';
import { startInBackground, waitUntilAnswering } from '../../server/bootstrap/background-process.mjs';
import { ensureClientBuild } from '../../server/bootstrap/client-build.mjs';
import { ensureWritableFolder, stateFolder } from '../../server/bootstrap/folders.mjs';
import { freeLoopbackPort } from '../../server/bootstrap/free-port.mjs';
import { createLifetime } from '../../server/bootstrap/lifetime.mjs';
import { withoutPostgresVariables } from '../../server/bootstrap/postgres-programs.mjs';
import { migrate, seedDemo } from '../../server/bootstrap/schema.mjs';
import { withSetupLock } from '../../server/bootstrap/setup-lock.mjs';
import { createDatabase, dropDatabase, openTestServer, testDatabaseName } from './test-server.ts';

declare module 'vitest' {
  interface ProvidedContext {
    /** Where the running application answers, without a slash at the end. */
    baseUrl: string;
  }
}

/** Runs the whole application for the browser tests: the built client and a server on a database with the demo in it. */
export default async function runApplication(project: TestProject): Promise<() => Promise<void>> {
  const lifetime = createLifetime();
  try {
    project.provide('baseUrl', await start(lifetime));
  } catch (error) {
    await lifetime.stopAll();
    throw error;
  }
  return () => lifetime.stopAll();
}

async function start(lifetime: ReturnType<typeof createLifetime>): Promise<string> {
  await withSetupLock(console.log, () => ensureClientBuild({ say: console.log }));
  const postgres = await openTestServer();
  lifetime.onEnd(() => postgres.release());
  const name = testDatabaseName('e2e');
  lifetime.onEnd(() => dropDatabase(postgres.url, name));
  const databaseUrl = await createDatabase(postgres.url, name);
  await migrate(databaseUrl);
  await seedDemo(databaseUrl);

  const port = await freeLoopbackPort();
  const baseUrl = `http://127.0.0.1:${port}`;
  const server = startInBackground(['--import', 'tsx', 'server/main.ts'], {
    env: {
      ...withoutPostgresVariables(process.env),
      NODE_ENV: 'production',
      DATABASE_URL: databaseUrl,
      HOST: '127.0.0.1',
      PORT: String(port),
      PUBLIC_URL: baseUrl,
      SESSION_SECRET: randomBytes(32).toString('hex'),
      SMTP_URL: '',
    },
    logFile: join(ensureWritableFolder(join(stateFolder, 'test')), 'e2e-server.log'),
  });
  lifetime.onEnd(() => server.stop());
  await waitUntilAnswering(server, 'The server', `${baseUrl}/api/health`);
  return baseUrl;
}
