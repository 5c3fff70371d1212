import { accessSync, constants, readdirSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { installDebianPackage, postgresPackage } from './debian-packages.mjs';
import { runCommand } from './run-command.mjs';
import { SetupProblem } from './setup-problem.mjs';

/** Debian keeps every major version's programs in a folder of its own here. */
const debianVersionsFolder = '/usr/lib/postgresql';

/**
 * The folder that holds PostgreSQL's server programs, installing them where they are missing.
 * @param {string | null} version the major version that an existing cluster needs; null takes the newest
 * @param {{ say: (line: string) => void, signal?: AbortSignal }} options
 * @returns {Promise<string>}
 */
export async function ensurePostgresPrograms(version, options) {
  const found = postgresProgramFolders();
  if (found.size === 0) {
    await installDebianPackage(postgresPackage, options);
    for (const [installed, folder] of postgresProgramFolders()) found.set(installed, folder);
  }
  const chosen = version ?? [...found.keys()].sort((a, b) => Number(b) - Number(a))[0];
  const folder = found.get(chosen ?? '');
  if (folder !== undefined) return folder;
  throw new SetupProblem(
    version === null
      ? `The server programs of PostgreSQL are in neither '${debianVersionsFolder}' nor the PATH; install them and start again.`
      : `The database was made by PostgreSQL ${version}, which is not installed; run 'apt-get install -y postgresql-${version}' as root and start again.`,
  );
}

/**
 * Server programs by major version.
 * @returns {Map<string, string>}
 */
export function postgresProgramFolders() {
  /** @type {Map<string, string>} */
  const folders = new Map();
  for (const version of foldersIn(debianVersionsFolder)) {
    const folder = join(debianVersionsFolder, version, 'bin');
    if (isProgram(join(folder, 'initdb')) && isProgram(join(folder, 'postgres')))
      folders.set(version, folder);
  }
  return folders;
}

/**
 * Who runs the server programs: PostgreSQL refuses to run as root.
 * @typedef {{ uid: number, gid: number } | null} PostgresUser null is the user of this process
 */

/**
 * @param {string | null} ownedFolder a cluster's data folder: whoever owns it has to run it
 * @returns {Promise<PostgresUser>}
 */
export async function postgresUser(ownedFolder) {
  if (process.getuid?.() !== 0) return null;
  if (ownedFolder !== null) {
    const { uid, gid } = statSync(ownedFolder);
    if (uid !== 0) return { uid, gid };
  }
  const [uid, gid] = await Promise.all(
    ['-u', '-g'].map(async (flag) =>
      Number((await runCommand('id', [flag, 'postgres'])).output || Number.NaN),
    ),
  );
  if (!uid || !gid) {
    throw new SetupProblem(
      "PostgreSQL does not run as root and the user 'postgres' does not exist; reinstall Debian's package postgresql and start again.",
    );
  }
  return { uid, gid };
}

/**
 * Runs a program as the user of the database.
 * @param {PostgresUser} user
 * @param {string} program
 * @param {readonly string[]} args
 * @param {{ endsWithUs?: boolean }} [options] for programs that must not outlive this process
 */
export function runAsPostgres(user, program, args, { endsWithUs = false } = {}) {
  const options = { cwd: '/', env: withoutPostgresVariables(process.env) };
  if (user === null) return runCommand(program, args, { ...options, endsWithUs });
  const asUser = [`--reuid=${user.uid}`, `--regid=${user.gid}`, '--clear-groups'];
  // prctl(2), PR_SET_PDEATHSIG: changing the user clears the setting, so one call has to do both, in its own order.
  const ending = endsWithUs ? ['--pdeathsig=KILL'] : [];
  return runCommand('setpriv', [...asUser, ...ending, '--', program, ...args], options);
}

/**
 * The environment without PGHOST, PGPORT, PGDATA and their like, which would lead our programs to another server.
 * @param {NodeJS.ProcessEnv} environment
 * @returns {NodeJS.ProcessEnv}
 */
export function withoutPostgresVariables(environment) {
  return Object.fromEntries(Object.entries(environment).filter(([name]) => !/^PG[A-Z]+$/.test(name)));
}

/** @param {string} folder */
function foldersIn(folder) {
  try {
    return readdirSync(folder);
  } catch {
    return [];
  }
}

/** @param {string} file */
function isProgram(file) {
  try {
    accessSync(file, constants.X_OK);
    return true;
  } catch {
    return false;
  }
}
