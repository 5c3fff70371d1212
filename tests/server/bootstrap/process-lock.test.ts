import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { takeProcessLock, withProcessLock } from '../../../server/bootstrap/process-lock.mjs';
import { identityOf } from '../../../server/bootstrap/processes.mjs';

let folder: string;
let file: string;

beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'longpatch-lock-'));
  file = join(folder, 'lock');
});

afterEach(() => rmSync(folder, { recursive: true, force: true }));

test('a lock that is held names its holder and what the holder said', () => {
  const first = takeProcessLock(file);
  if (!first.ok) throw new Error('the lock was free');
  first.lock.update({ url: 'http://127.0.0.1:3000' });
  expect(takeProcessLock(file)).toEqual({
    ok: false,
    holder: { ...identityOf(process.pid), url: 'http://127.0.0.1:3000' },
  });
});

test('a released lock is free and leaves no file', () => {
  const first = takeProcessLock(file);
  if (first.ok) first.lock.release();
  expect(readdirSync(folder)).toEqual([]);
  expect(takeProcessLock(file).ok).toBe(true);
});

test('the lock of a killed process is taken over with what it said', async () => {
  const child = spawn('sleep', ['30']);
  const identity = identityOf(child.pid ?? 0);
  writeFileSync(file, JSON.stringify({ ...identity, url: 'http://127.0.0.1:3000' }));
  expect(takeProcessLock(file).ok).toBe(false);
  child.kill('SIGKILL');
  await once(child, 'exit');
  expect(takeProcessLock(file)).toMatchObject({ ok: true, previous: { url: 'http://127.0.0.1:3000' } });
});

test('a process that only got the same id does not hold the lock', () => {
  const { pid, startTicks } = identityOf(process.pid);
  writeFileSync(file, JSON.stringify({ pid, startTicks: startTicks - 1 }));
  expect(takeProcessLock(file).ok).toBe(true);
});

test.each(['', '{', '{"pid":"x"}'])('a lock file that holds %j is taken over', (content) => {
  writeFileSync(file, content);
  expect(takeProcessLock(file).ok).toBe(true);
});

test('work under one lock never overlaps', async () => {
  let isBusy = false;
  let overlaps = 0;
  await Promise.all(
    [1, 2, 3].map(() =>
      withProcessLock(file, { timeoutMs: 10_000 }, async () => {
        if (isBusy) overlaps += 1;
        isBusy = true;
        await new Promise((resolve) => setTimeout(resolve, 20));
        isBusy = false;
      }),
    ),
  );
  expect(overlaps).toBe(0);
  expect(existsSync(file)).toBe(false);
});

test('waiting too long names the process that holds the lock', async () => {
  takeProcessLock(file);
  await expect(withProcessLock(file, { timeoutMs: 50 }, async () => {})).rejects.toThrow(
    `Process ${process.pid} has held '${file}'`,
  );
});
