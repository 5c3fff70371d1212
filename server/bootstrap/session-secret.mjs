import { randomBytes } from 'node:crypto';
import { existsSync, readFileSync, writeFileSync } from 'node:fs';

/**
 * The secret that signs this checkout's sessions, made once, so that a restart signs nobody out.
 * @param {string} file
 * @returns {string}
 */
export function keptSessionSecret(file) {
  const kept = existsSync(file) ? readFileSync(file, 'utf8').trim() : '';
  if (kept.length >= 32) return kept;
  const secret = randomBytes(32).toString('hex');
  writeFileSync(file, secret, { mode: 0o600 });
  return secret;
}
