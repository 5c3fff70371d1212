import type { Role } from '#contract/session.ts';
import { seedSaltmarsh } from '../../seeds/saltmarsh-ferries.ts';
import { demoPeople } from '../../seeds/demo-people.ts';
import { openDatabase } from './open-database.ts';

/** Who can sign in to the demo, for the starter to print. */
export const demoSignIns: readonly {
  readonly email: string;
  readonly password: string;
  readonly role: Role;
}[] = demoPeople.map(({ email, password, role }) => ({ email, password, role }));

/** Fills a database with the demo; one that has it stays as it is. */
export async function seedDemo(databaseUrl: string): Promise<void> {
  const database = openDatabase(databaseUrl);
  try {
    await seedSaltmarsh(database);
  } finally {
    await database.close();
  }
}
