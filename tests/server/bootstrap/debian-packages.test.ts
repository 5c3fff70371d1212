import { expect, test } from 'vitest';
import {
  chromiumPackage,
  installDebianPackage,
  postgresPackage,
} from '../../../server/bootstrap/debian-packages.mjs';

const say = () => {};

test('whoever is not root is told exactly what to run', async () => {
  await expect(installDebianPackage(postgresPackage, { say, isRoot: false, hasApt: true })).rejects.toThrow(
    "PostgreSQL is not installed; run 'sudo apt-get install -y --no-install-recommends postgresql', or set DATABASE_URL (for tests TEST_DATABASE_URL) to a PostgreSQL server that you have, and start again.",
  );
  await expect(installDebianPackage(chromiumPackage, { say, isRoot: false, hasApt: true })).rejects.toThrow(
    "Chromium is not installed; run 'sudo apt-get install -y --no-install-recommends chromium', and start again.",
  );
});

test('a system without apt-get is told what it lacks', async () => {
  await expect(installDebianPackage(postgresPackage, { say, isRoot: true, hasApt: false })).rejects.toThrow(
    'PostgreSQL is not installed and this system has no apt-get',
  );
});
