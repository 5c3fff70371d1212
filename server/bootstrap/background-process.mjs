import { spawn } from 'node:child_process';
import { closeSync, existsSync, openSync, readFileSync, renameSync } from 'node:fs';
import { setTimeout as delay } from 'node:timers/promises';
import { projectFolder } from './folders.mjs';
import { identityOf, isRunning } from './processes.mjs';
import { lastLines } from './run-command.mjs';
import { SetupProblem } from './setup-problem.mjs';

/**
 * @typedef {object} BackgroundProcess
 * @property {import('./processes.mjs').ProcessIdentity} identity
 * @property {Promise<string>} ended how the process ended: by itself, or when stopped
 * @property {string | null} logFile
 * @property {() => Promise<void>} stop
 */

const readyTimeoutMs = 60_000;
const stopTimeoutMs = 10_000;

/**
 * Starts a Node program in a process group of its own, so that Ctrl-C reaches only its starter, who stops things in order.
 * The program ends when its starter does, even when that was killed.
 * @param {readonly string[]} args
 * @param {{ env: NodeJS.ProcessEnv, logFile: string | null }} options without a log file it writes to this process's output
 * @returns {BackgroundProcess}
 */
export function startInBackground(args, { env, logFile }) {
  if (logFile !== null && existsSync(logFile))
    renameSync(logFile, logFile.replace(/\.log$/, '.previous.log'));
  const log = logFile === null ? /** @type {const} */ ('inherit') : openSync(logFile, 'a');
  const guard = ['--import', new URL('./exit-with-starter.mjs', import.meta.url).href];
  const child = spawn(process.execPath, [...guard, ...args], {
    cwd: projectFolder,
    env,
    detached: true,
    stdio: ['ignore', log, log, 'ipc'],
  });
  if (typeof log === 'number') closeSync(log);
  /** @type {Promise<string>} */
  const ended = new Promise((resolve) => {
    child.once('error', (error) => resolve(error.message));
    child.once('exit', (code, signal) => resolve(signal === null ? `exit code ${code}` : `signal ${signal}`));
  });
  const identity = identityOf(child.pid ?? 0);
  return { identity, ended, logFile, stop: () => stopProcessGroup(identity) };
}

/**
 * Waits until a program answers a request with 200.
 * @param {BackgroundProcess} program
 * @param {string} name what to call it in a sentence
 * @param {string} url
 * @param {AbortSignal} [signal]
 */
export async function waitUntilAnswering(program, name, url, signal) {
  /** @type {string | null} */
  let end = null;
  void program.ended.then((how) => (end = how));
  const deadline = Date.now() + readyTimeoutMs;
  while (!(await answers(url))) {
    signal?.throwIfAborted();
    if (end !== null || Date.now() > deadline) {
      const what =
        end === null ? `does not answer after ${readyTimeoutMs / 1000} s` : `ended at once (${end})`;
      throw new SetupProblem(`${name} ${what}; ${whereToLook(program.logFile)}`);
    }
    await delay(50);
  }
}

/**
 * @param {string | null} logFile
 * @returns {string}
 */
export function whereToLook(logFile) {
  if (logFile === null || !existsSync(logFile)) return 'its last lines above say why.';
  return `its log '${logFile}' ends with:\n${lastLines(readFileSync(logFile, 'utf8'))}`;
}

/**
 * Ends a program and all it started, gently at first.
 * @param {import('./processes.mjs').ProcessIdentity} leader the first process of the group
 */
export async function stopProcessGroup(leader) {
  if (!isRunning(leader)) return;
  signalGroup(leader.pid, 'SIGTERM');
  const deadline = Date.now() + stopTimeoutMs;
  while (isRunning(leader) && Date.now() < deadline) await delay(50);
  signalGroup(leader.pid, 'SIGKILL');
  while (isRunning(leader)) await delay(50);
}

/** @param {string} url */
async function answers(url) {
  try {
    const response = await fetch(url, { signal: AbortSignal.timeout(5_000) });
    await response.arrayBuffer();
    return response.status === 200;
  } catch {
    return false;
  }
}

/**
 * @param {number} leaderPid
 * @param {NodeJS.Signals} signal
 */
function signalGroup(leaderPid, signal) {
  try {
    process.kill(-leaderPid, signal);
  } catch {
    // The whole group is gone already.
  }
}
