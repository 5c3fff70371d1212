import type { Knex } from 'knex';
import { migrationSource } from './server/db/migrate.ts';

// For knex's own command, which makes migrations and takes them back:
//   node --import tsx node_modules/knex/bin/cli.js migrate:make create_something -x ts
// `npm start` and the tests run them through server/db/migrate.ts.
const settings: Knex.Config = {
  client: 'pg',
  connection: process.env['DATABASE_URL'] ?? '',
  migrations: { migrationSource },
};

export default settings;
