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

/**
 * The one-time code with which an empty database gets its first owner; null where somebody is there.
 * @param {string} databaseUrl
 * @param {string} sessionSecret
 * @returns {Promise<string | null>}
 */
export async function firstOwnerCode(databaseUrl, sessionSecret) {
  const { prepareFirstOwnerCode } = await importTypeScript('server/db/first-owner-code.ts');
  return prepareFirstOwnerCode(databaseUrl, sessionSecret);
}
