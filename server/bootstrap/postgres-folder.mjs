import { createHash } from 'node:crypto';
import { existsSync, realpathSync } from 'node:fs';
import { join } from 'node:path';
import { ensureWritableFolder, projectFolder, stateFolder } from './folders.mjs';
import { runAsPostgres } from './postgres-programs.mjs';
import { SetupProblem } from './setup-problem.mjs';

/** @typedef {import('./postgres-programs.mjs').PostgresUser} PostgresUser */

/**
 * The folder of a private cluster: in the checkout, or under /var/lib where PostgreSQL's user cannot reach the checkout
 * (root's home folder, say). A cluster that exists stays where it is.
 * @param {string} name
 * @param {PostgresUser} user
 * @param {(line: string) => void} say
 * @returns {Promise<string>} without symbolic links
 */
export async function clusterFolder(name, user, say) {
  const inside = join(stateFolder, name, 'postgres');
  const outside = outsideFolder(name);
  if (hasCluster(outside) && !hasCluster(inside)) return realpathSync(outside);
  ensureWritableFolder(inside);
  if (await canReach(user, inside)) return realpathSync(inside);
  if (hasCluster(inside)) {
    throw new SetupProblem(
      `PostgreSQL's user can no longer reach the database in '${inside}'; let others pass through its parent folders (chmod o+x) and start again.`,
    );
  }
  ensureWritableFolder(outside);
  say(`PostgreSQL's user cannot reach '${stateFolder}', so the database is kept in '${outside}'.`);
  return realpathSync(outside);
}

/**
 * Where a cluster goes that cannot live in the checkout; every checkout has its own.
 * @param {string} name
 * @returns {string}
 */
export function outsideFolder(name) {
  const checkout = createHash('sha256').update(projectFolder).digest('hex').slice(0, 12);
  return join('/var/lib/longpatch', checkout, name, 'postgres');
}

/** @param {string} folder */
function hasCluster(folder) {
  return existsSync(join(folder, 'data', 'PG_VERSION'));
}

/**
 * @param {PostgresUser} user
 * @param {string} folder
 */
async function canReach(user, folder) {
  return user === null || (await runAsPostgres(user, 'test', ['-x', folder])).ok;
}
