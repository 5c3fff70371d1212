import { accessSync, constants, mkdirSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { SetupProblem } from './setup-problem.mjs';

/** The checkout. */
export const projectFolder = dirname(dirname(dirname(fileURLToPath(import.meta.url))));

/** Everything that a start or a test run keeps on disk; ignored by git. */
export const stateFolder = join(projectFolder, '.longpatch');

/** Output of installers and builds, kept for when one of them fails. */
export const setupLog = join(stateFolder, 'setup.log');

/**
 * Makes a folder that this process may write to.
 * @param {string} folder
 * @returns {string} the same folder
 */
export function ensureWritableFolder(folder) {
  try {
    mkdirSync(folder, { recursive: true });
    accessSync(folder, constants.W_OK | constants.X_OK);
  } catch (error) {
    const code = /** @type {NodeJS.ErrnoException} */ (error).code;
    throw new SetupProblem(
      `The folder '${folder}' cannot be written to (${code}); give it to the user who runs this command, or run the command as its owner.`,
    );
  }
  return folder;
}
