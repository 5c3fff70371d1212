import { createHash } from 'node:crypto';
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { projectFolder, setupLog } from './folders.mjs';
import { lastLines, runCommand } from './run-command.mjs';
import { SetupProblem } from './setup-problem.mjs';

/**
 * Installs exactly the packages of package-lock.json when `node_modules` holds anything else.
 * @param {{ say: (line: string) => void, signal?: AbortSignal, folder?: string }} options
 * @returns {Promise<boolean>} whether something was installed
 */
export async function ensureDependencies({ say, signal, folder = projectFolder }) {
  const lockText = readIfThere(join(folder, 'package-lock.json'));
  if (lockText === null) {
    throw new SetupProblem(
      `'${join(folder, 'package-lock.json')}' is missing; restore it from the repository.`,
    );
  }
  const stampFile = join(folder, 'node_modules', '.longpatch-stamp');
  const stamp = stampFor(lockText, process.version);
  const present = readIfThere(stampFile);
  if (present === stamp) return false;
  const installedText = readIfThere(join(folder, 'node_modules', '.package-lock.json'));
  if (present === null && installedText !== null && isLockInstalled(lockText, installedText)) {
    writeFileSync(stampFile, stamp);
    return false;
  }

  say('Installing packages (npm ci)');
  // An inherited NODE_ENV=production would leave out the packages that build the client.
  const result = await runCommand(npmProgram()[0], [...npmProgram().slice(1), 'ci', '--include=dev'], {
    cwd: folder,
    logFile: setupLog,
    signal,
    endsWithUs: true,
  });
  if (!result.ok) {
    throw new SetupProblem(
      `npm could not install the packages; see '${setupLog}', put it right and start again. It ended with:\n${lastLines(result.output)}`,
    );
  }
  for (const line of result.output.split('\n').filter((text) => text.startsWith('npm warn'))) say(line);
  writeFileSync(stampFile, stamp);
  return true;
}

/**
 * What `node_modules` was installed from. The major version of Node counts, since packages may hold programs built for it.
 * @param {string} lockText
 * @param {string} nodeVersion
 * @returns {string}
 */
export function stampFor(lockText, nodeVersion) {
  return createHash('sha256')
    .update(`${nodeVersion.split('.')[0]}\n${lockText}`)
    .digest('hex');
}

/**
 * Whether npm's own record of what it installed has every package of the lock; packages for other machines may be absent.
 * @param {string} lockText package-lock.json
 * @param {string} installedText node_modules/.package-lock.json
 * @returns {boolean}
 */
export function isLockInstalled(lockText, installedText) {
  /** @type {Record<string, { version?: string, integrity?: string, optional?: boolean }>} */
  const wanted = JSON.parse(lockText).packages;
  /** @type {typeof wanted} */
  const installed = JSON.parse(installedText).packages;
  return Object.entries(wanted)
    .filter(([path]) => path !== '')
    .every(([path, entry]) => {
      const found = installed[path];
      if (found === undefined) return entry.optional === true;
      return found.version === entry.version && found.integrity === entry.integrity;
    });
}

/** @returns {[string, ...string[]]} */
function npmProgram() {
  const cli = process.env['npm_execpath'];
  return cli?.endsWith('.js') ? [process.execPath, cli] : ['npm'];
}

/**
 * @param {string} file
 * @returns {string | null}
 */
function readIfThere(file) {
  try {
    return readFileSync(file, 'utf8');
  } catch {
    return null;
  }
}
