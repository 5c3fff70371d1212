import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { startInBackground, waitUntilAnswering } from '../../../server/bootstrap/background-process.mjs';
import { freeLoopbackPort } from '../../../server/bootstrap/free-port.mjs';
import { isRunning } from '../../../server/bootstrap/processes.mjs';
import type { ProcessIdentity } from '../../../server/bootstrap/processes.mjs';

let folder: string;

beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'longpatch-background-'));
});

afterEach(() => rmSync(folder, { recursive: true, force: true }));

function program(name: string, code: string): string {
  const file = join(folder, name);
  writeFileSync(file, code);
  return file;
}

const answering = `
  import { createServer } from 'node:http';
  createServer((request, response) => response.end()).listen(Number(process.env.PORT), '127.0.0.1');
`;

test('a program is started, answers, and is stopped', async () => {
  const port = await freeLoopbackPort();
  const background = startInBackground([program('a.mjs', answering)], {
    env: { ...process.env, PORT: String(port) },
    logFile: join(folder, 'a.log'),
  });
  await waitUntilAnswering(background, 'The program', `http://127.0.0.1:${port}/`);
  await background.stop();
  expect(isRunning(background.identity)).toBe(false);
  expect(await background.ended).toBe('signal SIGTERM');
});

test('a program that ends before it answers is reported with the end of its log', async () => {
  const logFile = join(folder, 'b.log');
  const background = startInBackground([program('b.mjs', "console.log('no tide today'); process.exit(3);")], {
    env: process.env,
    logFile,
  });
  await expect(waitUntilAnswering(background, 'The program', 'http://127.0.0.1:1/')).rejects.toThrow(
    `The program ended at once (exit code 3); its log '${logFile}' ends with:\nno tide today`,
  );
});

test('a program ends when its starter is killed', async () => {
  const modules = new URL('../../../server/bootstrap/', import.meta.url).href;
  const child = program('c.mjs', 'setInterval(() => {}, 1000);');
  const starter = program(
    'starter.mjs',
    `import { startInBackground } from '${modules}background-process.mjs';
     const started = startInBackground(['${child}'], { env: process.env, logFile: null });
     setTimeout(() => console.log(JSON.stringify(started.identity)), 300);
     setInterval(() => {}, 1000);`,
  );
  const running = spawn(process.execPath, [starter], { stdio: ['ignore', 'pipe', 'inherit'] });
  const [line] = (await once(running.stdout, 'data')) as [Buffer];
  const identity = JSON.parse(line.toString()) as ProcessIdentity;
  expect(isRunning(identity)).toBe(true);
  running.kill('SIGKILL');
  await expect.poll(() => isRunning(identity), { timeout: 5_000 }).toBe(false);
});

test('the log of the run before is kept', async () => {
  const logFile = join(folder, 'd.log');
  const print = program('d.mjs', 'console.log(process.env.WORD);');
  for (const word of ['ebb', 'flood']) {
    await startInBackground([print], { env: { ...process.env, WORD: word }, logFile }).ended;
  }
  expect(readFileSync(logFile, 'utf8')).toBe('flood\n');
  expect(readFileSync(join(folder, 'd.previous.log'), 'utf8')).toBe('ebb\n');
});
