import { readFileSync, readdirSync, readlinkSync } from 'node:fs';

/**
 * When a process started, in clock ticks since boot; with its id it names a process for good, since ids are reused.
 * Null when there is no such process.
 * @param {number} pid
 * @returns {number | null}
 */
export function processStartTicks(pid) {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8');
    // proc(5): the name, field 2, may hold spaces and brackets; field 3 is the state, field 22 the start time.
    const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ');
    const isZombie = fields[0] === 'Z';
    return isZombie ? null : Number(fields[19]);
  } catch {
    return null;
  }
}

/**
 * @typedef {{ pid: number, startTicks: number }} ProcessIdentity
 */

/**
 * @param {number} pid
 * @returns {ProcessIdentity}
 */
export function identityOf(pid) {
  return { pid, startTicks: processStartTicks(pid) ?? 0 };
}

/**
 * @param {ProcessIdentity} identity
 * @returns {boolean}
 */
export function isRunning(identity) {
  return identity.startTicks !== 0 && processStartTicks(identity.pid) === identity.startTicks;
}

/**
 * Ids of the processes whose working directory is `folder`; a database server's processes all work in its data folder.
 * @param {string} folder an absolute path without symbolic links
 * @returns {number[]}
 */
export function processesWorkingIn(folder) {
  return readdirSync('/proc')
    .filter((name) => /^\d+$/.test(name))
    .map(Number)
    .filter((pid) => worksIn(pid, folder));
}

/**
 * @param {number} pid
 * @param {string} folder
 * @returns {boolean}
 */
export function worksIn(pid, folder) {
  try {
    return readlinkSync(`/proc/${pid}/cwd`) === folder && processStartTicks(pid) !== null;
  } catch {
    return false;
  }
}
