import { importTypeScript } from './import-typescript.mjs';

/**
 * Brings a database to the newest schema.
 * @param {string} databaseUrl
 * @returns {Promise<string[]>} names of the migrations that ran
 */
export async function migrate(databaseUrl) {
  const { migrateToLatest } = await importTypeScript('server/db/migrate.ts');
  return migrateToLatest(databaseUrl);
}

/**
 * @typedef {{ email: string, password: string, role: string }} SignIn
 */

/**
 * Fills a database with the demo; what is there already stays as it is.
 * @param {string} databaseUrl
 * @returns {Promise<readonly SignIn[]>} who can sign in
 */
export async function seedDemo(databaseUrl) {
  const demo = await importTypeScript('server/db/seed-demo.ts');
  await demo.seedDemo(databaseUrl);
  return demo.demoSignIns;
}
