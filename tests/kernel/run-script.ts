import { spawn } from 'node:child_process';

/**
 * Runs a shell script and answers what it wrote; throws with what it complained of when it fails.
 * A script that hangs is ended after the time it may take.
 */
export const runScript = (script: string, atMostMs = 30_000): Promise<string> =>
  new Promise((resolve, reject) => {
    const child = spawn('sh', ['-e'], { stdio: ['pipe', 'pipe', 'pipe'], timeout: atMostMs });
    let written = '';
    let complaint = '';
    child.stdout.on('data', (chunk: Buffer) => (written += chunk.toString()));
    child.stderr.on('data', (chunk: Buffer) => (complaint += chunk.toString()));
    child.once('error', reject);
    child.once('close', (exitCode) => {
      if (exitCode === 0) resolve(written);
      else reject(new Error(`the script ended with ${exitCode}: ${complaint}\n${script}`));
    });
    child.stdin.end(script);
  });
