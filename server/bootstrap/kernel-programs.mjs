import { existsSync } from 'node:fs';
import { installDebianPackage, ipsecPackages, namespacePackages } from './debian-packages.mjs';
import { messageOf } from './setup-problem.mjs';

/**
 * @typedef {{ wanted: import('./debian-packages.mjs').DebianPackage, programs: readonly (readonly string[])[] }} Need each
 *   program with the places where it may be
 */

/** @type {readonly Need[]} */
const needs = [
  {
    wanted: namespacePackages,
    programs: [
      ['/sbin/ip', '/usr/sbin/ip', '/bin/ip', '/usr/bin/ip'],
      ['/usr/bin/python3', '/usr/local/bin/python3'],
    ],
  },
  { wanted: ipsecPackages, programs: [['/usr/sbin/charon-systemd'], ['/usr/sbin/swanctl']] },
];

/**
 * Installs what the comparison with the kernel needs, as root; where that can't be, the tests skip themselves and say why.
 * @param {{ say: (line: string) => void, signal?: AbortSignal, isRoot?: boolean }} options
 */
export async function ensureKernelPrograms({ say, signal, isRoot = process.getuid?.() === 0 }) {
  if (!isRoot) return;
  for (const { wanted, programs } of needs) {
    if (programs.every((places) => places.some((place) => existsSync(place)))) continue;
    try {
      await installDebianPackage(wanted, { say, signal });
    } catch (error) {
      if (signal?.aborted) throw error;
      say(messageOf(error));
    }
  }
}
