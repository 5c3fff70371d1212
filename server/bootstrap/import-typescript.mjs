import { pathToFileURL } from 'node:url';
import { join } from 'node:path';
import { projectFolder } from './folders.mjs';

/**
 * Loads one of the server's TypeScript modules into this process, which itself runs without a compiler.
 * @param {string} path relative to the checkout
 * @returns {Promise<any>}
 */
export async function importTypeScript(path) {
  // Loaded here because this module is read before packages are installed.
  const { tsImport } = await import('tsx/esm/api');
  return tsImport(pathToFileURL(join(projectFolder, path)).href, import.meta.url);
}
