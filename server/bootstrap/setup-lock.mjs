import { join } from 'node:path';
import { ensureWritableFolder, stateFolder } from './folders.mjs';
import { withProcessLock } from './process-lock.mjs';

/**
 * Lets one command at a time install or build in this checkout; `npm start` and `npm test` may run side by side.
 * @template T
 * @param {(line: string) => void} say
 * @param {() => Promise<T>} work
 * @returns {Promise<T>}
 */
export function withSetupLock(say, work) {
  const file = join(ensureWritableFolder(stateFolder), 'setup.lock');
  return withProcessLock(
    file,
    {
      timeoutMs: 900_000,
      onWait: (holder) => say(`Waiting for process ${holder.pid}, which is setting up this folder`),
    },
    work,
  );
}
