import { inject } from 'vitest';
import { createDatabase, dropDatabase, testDatabaseName } from './test-server.ts';

export interface TestDatabase {
  readonly url: string;
  drop(): Promise<void>;
}

/** A migrated, otherwise empty database of one's own; once per test file, dropped when it is done. */
export async function createTestDatabase(): Promise<TestDatabase> {
  const serverUrl = inject('testServerUrl');
  const name = testDatabaseName('test');
  const url = await createDatabase(serverUrl, name, inject('templateDatabase'));
  return { url, drop: () => dropDatabase(serverUrl, name) };
}
