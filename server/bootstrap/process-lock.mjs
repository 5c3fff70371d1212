import { linkSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import { setTimeout as delay } from 'node:timers/promises';
import { identityOf, isRunning } from './processes.mjs';
import { SetupProblem } from './setup-problem.mjs';

/**
 * @typedef {import('./processes.mjs').ProcessIdentity & Record<string, unknown>} LockHolder
 * @typedef {{ update(details: Record<string, unknown>): void, release(): void }} HeldLock
 * @typedef {{ ok: true, lock: HeldLock, previous: LockHolder | null } | { ok: false, holder: LockHolder }} LockResult
 */

/**
 * Takes `file` as a lock for this process. A lock whose process is gone is taken over, and what it said comes back as `previous`.
 * @param {string} file
 * @param {Record<string, unknown>} [details] kept in the file beside the holder's process id
 * @returns {LockResult}
 */
export function takeProcessLock(file, details = {}) {
  /** @type {LockHolder | null} */
  let previous = null;
  for (;;) {
    const own = `${file}.${process.pid}.${Math.random().toString(36).slice(2)}`;
    const self = identityOf(process.pid);
    writeFileSync(own, JSON.stringify({ ...details, ...self }), { mode: 0o600 });
    try {
      // A link appears complete or not at all, so nobody ever reads half a lock.
      linkSync(own, file);
      return { ok: true, lock: heldLock(file, self), previous };
    } catch (error) {
      if (/** @type {NodeJS.ErrnoException} */ (error).code !== 'EEXIST') throw error;
    } finally {
      rmSync(own, { force: true });
    }
    const holder = readLock(file);
    if (holder !== null && isRunning(holder)) return { ok: false, holder };
    previous = setAside(file) ?? previous;
  }
}

/**
 * Runs `work` while holding `file`, waiting for whoever holds it now.
 * @template T
 * @param {string} file
 * @param {{ timeoutMs: number, onWait?: (holder: LockHolder) => void }} options
 * @param {() => Promise<T>} work
 * @returns {Promise<T>}
 */
export async function withProcessLock(file, { timeoutMs, onWait }, work) {
  const deadline = Date.now() + timeoutMs;
  let hasWaited = false;
  for (;;) {
    const taken = takeProcessLock(file);
    if (taken.ok) {
      try {
        return await work();
      } finally {
        taken.lock.release();
      }
    }
    if (!hasWaited) onWait?.(taken.holder);
    hasWaited = true;
    if (Date.now() > deadline) {
      throw new SetupProblem(
        `Process ${taken.holder.pid} has held '${file}' for more than ${timeoutMs / 1000} s; end it and start again.`,
      );
    }
    await delay(100);
  }
}

/**
 * @param {string} file
 * @param {import('./processes.mjs').ProcessIdentity} self
 * @returns {HeldLock}
 */
function heldLock(file, self) {
  return {
    update(details) {
      const next = `${file}.${process.pid}.next`;
      writeFileSync(next, JSON.stringify({ ...details, ...self }), { mode: 0o600 });
      renameSync(next, file);
    },
    release() {
      if (readLock(file)?.pid === process.pid) rmSync(file, { force: true });
    },
  };
}

/**
 * Removes a lock that nobody holds any more. Between reading and removing it somebody else may have taken it over: then it is put back.
 * @param {string} file
 * @returns {LockHolder | null}
 */
function setAside(file) {
  const aside = `${file}.${process.pid}.stale`;
  try {
    renameSync(file, aside);
  } catch {
    return null;
  }
  const holder = readLock(aside);
  if (holder !== null && isRunning(holder)) {
    try {
      linkSync(aside, file);
    } catch {
      // Taken a third time meanwhile; the next round sees by whom.
    }
  }
  rmSync(aside, { force: true });
  return holder;
}

/**
 * @param {string} file
 * @returns {LockHolder | null}
 */
function readLock(file) {
  try {
    const content = JSON.parse(readFileSync(file, 'utf8'));
    return typeof content?.pid === 'number' ? content : null;
  } catch {
    return null;
  }
}
