import type { ChildProcess } from 'node:child_process';
import { spawn } from 'node:child_process';
import { join } from 'node:path';
import { setTimeout as delay } from 'node:timers/promises';
import { freeLoopbackPort } from '../../server/bootstrap/free-port.mjs';

const projectFolder = join(import.meta.dirname, '..', '..');

/** The server as it runs in production: a process of its own. */
export interface ServerProcess {
  readonly child: ChildProcess;
  /** What it has written so far. */
  readonly output: () => string;
  readonly url: string;
}

/** Starts a server on a database; whoever starts it ends it. */
export async function startServerProcess(
  databaseUrl: string,
  environment: Readonly<Record<string, string>> = {},
): Promise<ServerProcess> {
  const port = await freeLoopbackPort();
  const child = spawn(process.execPath, ['--import', 'tsx', 'server/main.ts'], {
    cwd: projectFolder,
    env: {
      PATH: process.env['PATH'],
      DATABASE_URL: databaseUrl,
      PORT: String(port),
      SESSION_SECRET: 'a secret of more than thirty-two characters',
      ...environment,
    },
  });
  let output = '';
  for (const stream of [child.stdout, child.stderr]) stream.on('data', (chunk) => (output += String(chunk)));
  return { child, output: () => output, url: `http://127.0.0.1:${port}` };
}

export async function untilHealthy({ url, child, output }: ServerProcess): Promise<void> {
  for (;;) {
    if (child.exitCode !== null) throw new Error(output());
    const status = await fetch(`${url}/api/health`).then(
      (response) => response.status,
      () => 0,
    );
    if (status === 200) return;
    await delay(50);
  }
}
