import { mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { ensureDependencies, isLockInstalled, stampFor } from '../../../server/bootstrap/dependencies.mjs';

const lock = JSON.stringify({
  packages: {
    '': { name: 'longpatch' },
    'node_modules/tide': { version: '1.0.0', integrity: 'sha512-a' },
    'node_modules/tide-for-another-machine': { version: '1.0.0', integrity: 'sha512-b', optional: true },
  },
});

function installed(version: string): string {
  return JSON.stringify({ packages: { 'node_modules/tide': { version, integrity: 'sha512-a' } } });
}

describe('what npm says it installed', () => {
  test('satisfies the lock when only packages for other machines are absent', () => {
    expect(isLockInstalled(lock, installed('1.0.0'))).toBe(true);
  });

  test('does not satisfy the lock with another version or without a package', () => {
    expect(isLockInstalled(lock, installed('1.0.1'))).toBe(false);
    expect(isLockInstalled(lock, JSON.stringify({ packages: {} }))).toBe(false);
  });
});

describe('the stamp of the installed packages', () => {
  test('changes with the lock and with the major version of Node only', () => {
    expect(stampFor(lock, 'v20.19.0')).toBe(stampFor(lock, 'v20.20.2'));
    expect(stampFor(lock, 'v22.12.0')).not.toBe(stampFor(lock, 'v20.20.2'));
    expect(stampFor(`${lock} `, 'v20.20.2')).not.toBe(stampFor(lock, 'v20.20.2'));
  });
});

describe('installing packages', () => {
  let folder: string;

  beforeEach(() => {
    folder = mkdtempSync(join(tmpdir(), 'longpatch-packages-'));
    mkdirSync(join(folder, 'node_modules'));
  });

  afterEach(() => rmSync(folder, { recursive: true, force: true }));

  test('is left out when they are there, stamped or installed by hand', async () => {
    writeFileSync(join(folder, 'package-lock.json'), lock);
    writeFileSync(join(folder, 'node_modules', '.package-lock.json'), installed('1.0.0'));
    const said: string[] = [];
    const options = { folder, say: (line: string) => said.push(line) };
    expect(await ensureDependencies(options)).toBe(false);
    expect(readFileSync(join(folder, 'node_modules', '.longpatch-stamp'), 'utf8')).toBe(
      stampFor(lock, process.version),
    );
    expect(await ensureDependencies(options)).toBe(false);
    expect(said).toEqual([]);
  });

  test('without a lock file says what is missing', async () => {
    await expect(ensureDependencies({ folder, say: () => {} })).rejects.toThrow(
      `'${join(folder, 'package-lock.json')}' is missing`,
    );
  });
});
