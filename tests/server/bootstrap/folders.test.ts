import { mkdtempSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { ensureWritableFolder } from '../../../server/bootstrap/folders.mjs';
import { keptSessionSecret } from '../../../server/bootstrap/session-secret.mjs';

let folder: string;

beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'longpatch-folders-'));
});

afterEach(() => rmSync(folder, { recursive: true, force: true }));

test('a folder is made with its parents', () => {
  const made = ensureWritableFolder(join(folder, 'a', 'b'));
  expect(statSync(made).isDirectory()).toBe(true);
});

test('a folder that cannot be made is reported in one sentence', () => {
  writeFileSync(join(folder, 'file'), '');
  const inside = join(folder, 'file', 'state');
  expect(() => ensureWritableFolder(inside)).toThrow(`The folder '${inside}' cannot be written to (ENOTDIR)`);
});

test('the session secret is made once, long, and for its owner only', () => {
  const file = join(folder, 'session-secret');
  const secret = keptSessionSecret(file);
  expect(secret.length).toBeGreaterThanOrEqual(32);
  expect(keptSessionSecret(file)).toBe(secret);
  expect(statSync(file).mode & 0o777).toBe(0o600);
});

test('a session secret that was cut off is replaced', () => {
  const file = join(folder, 'session-secret');
  writeFileSync(file, 'abc');
  expect(keptSessionSecret(file).length).toBeGreaterThanOrEqual(32);
});
