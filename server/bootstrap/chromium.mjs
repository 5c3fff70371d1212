import { existsSync } from 'node:fs';
import { chromiumPackage, installDebianPackage } from './debian-packages.mjs';

/** Where Debian puts Chromium. */
export const chromiumProgram = '/usr/bin/chromium';

/**
 * Installs Chromium where it is missing.
 * @param {{ say: (line: string) => void, signal?: AbortSignal }} options
 */
export async function ensureChromium(options) {
  if (!existsSync(chromiumProgram)) await installDebianPackage(chromiumPackage, options);
}
