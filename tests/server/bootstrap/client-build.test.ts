import { mkdirSync, mkdtempSync, renameSync, rmSync, utimesSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { hashOfFiles } from '../../../server/bootstrap/client-build.mjs';

let folder: string;
const hash = () => hashOfFiles(folder, ['src', 'index.html', 'absent']);

beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'longpatch-sources-'));
  mkdirSync(join(folder, 'src', 'lib'), { recursive: true });
  writeFileSync(join(folder, 'src', 'lib', 'a.ts'), 'one');
  writeFileSync(join(folder, 'index.html'), 'page');
});

afterEach(() => rmSync(folder, { recursive: true, force: true }));

test('touching a file or adding one elsewhere leaves the hash of the sources as it is', () => {
  const before = hash();
  utimesSync(join(folder, 'index.html'), 1, 1);
  writeFileSync(join(folder, 'README.md'), '');
  expect(hash()).toBe(before);
});

test('changing, adding or renaming a source changes the hash', () => {
  const hashes = new Set([hash()]);
  writeFileSync(join(folder, 'src', 'lib', 'a.ts'), 'two');
  hashes.add(hash());
  writeFileSync(join(folder, 'src', 'b.ts'), '');
  hashes.add(hash());
  renameSync(join(folder, 'src', 'b.ts'), join(folder, 'src', 'c.ts'));
  hashes.add(hash());
  expect(hashes.size).toBe(4);
});
