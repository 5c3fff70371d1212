import type { TestProject } from 'vitest/node';
import { migrate } from '../../server/bootstrap/schema.mjs';
import { createDatabase, dropDatabase, openTestServer, testDatabaseName } from './test-server.ts';

declare module 'vitest' {
  interface ProvidedContext {
    /** Where test databases are made, and the migrated database that each is a copy of. */
    testServerUrl: string;
    templateDatabase: string;
  }
}

/** Migrates one template database per run; every test file works on its own copy. */
export default async function setUpTemplate(project: TestProject): Promise<() => Promise<void>> {
  const server = await openTestServer();
  const template = testDatabaseName('template');
  try {
    await migrate(await createDatabase(server.url, template));
  } catch (error) {
    await dropDatabase(server.url, template);
    await server.release();
    throw error;
  }
  project.provide('testServerUrl', server.url);
  project.provide('templateDatabase', template);
  return async () => {
    await dropDatabase(server.url, template);
    await server.release();
  };
}
