import { spawn } from 'node:child_process';
import { appendFileSync } from 'node:fs';
import { stripVTControlCharacters } from 'node:util';

/**
 * @typedef {object} CommandOptions
 * @property {string} [cwd]
 * @property {NodeJS.ProcessEnv} [env]
 * @property {string} [logFile] receives all output
 * @property {AbortSignal} [signal] ends the program early
 * @property {boolean} [endsWithUs] the program is killed when this process is, so that the next run never meets it at work
 *
 * @typedef {{ ok: boolean, exitCode: number | null, output: string }} CommandResult
 */

/**
 * Runs a program to its end and collects what it prints. A program that cannot be started counts as failed.
 * @param {string} program
 * @param {readonly string[]} args
 * @param {CommandOptions} [options]
 * @returns {Promise<CommandResult>}
 */
export function runCommand(program, args, { cwd, env, logFile, signal, endsWithUs = false } = {}) {
  return new Promise((resolve, reject) => {
    const [first, ...rest] = endsWithUs
      ? ['setpriv', '--pdeathsig=KILL', '--', program, ...args]
      : [program, ...args];
    const child = spawn(first ?? program, rest, { cwd, env, signal, stdio: ['ignore', 'pipe', 'pipe'] });
    let output = '';
    /** @param {Buffer | string} chunk */
    const collect = (chunk) => {
      output += chunk;
      if (logFile) appendFileSync(logFile, chunk);
    };
    if (logFile) appendFileSync(logFile, `\n$ ${program} ${args.join(' ')}\n`);
    child.stdout.on('data', collect);
    child.stderr.on('data', collect);
    child.on('error', (error) => {
      if (signal?.aborted) return reject(error);
      collect(`${error.message}\n`);
      resolve({ ok: false, exitCode: null, output });
    });
    child.on('close', (exitCode) => resolve({ ok: exitCode === 0, exitCode, output }));
  });
}

/**
 * The end of a program's output, without its colours, for the sentence that reports its failure.
 * @param {string} output
 * @param {number} [lines]
 * @returns {string}
 */
export function lastLines(output, lines = 12) {
  return stripVTControlCharacters(output).trimEnd().split('\n').slice(-lines).join('\n');
}
