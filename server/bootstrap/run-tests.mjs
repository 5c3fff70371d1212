import { spawn } from 'node:child_process';
import { readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { ensureChromium } from './chromium.mjs';
import { ensureDependencies } from './dependencies.mjs';
import { ensureWritableFolder, projectFolder, stateFolder } from './folders.mjs';
import { ensureKernelPrograms } from './kernel-programs.mjs';
import { acquireCluster } from './postgres-cluster.mjs';
import { withoutPostgresVariables } from './postgres-programs.mjs';
import { withSetupLock } from './setup-lock.mjs';
import { messageOf } from './setup-problem.mjs';
import { closingLine, countVitestReport } from './test-count.mjs';
import { chooseSteps, vitestCommand } from './test-steps.mjs';

/**
 * @typedef {import('./lifetime.mjs').Lifetime} Lifetime
 * @typedef {import('./test-count.mjs').TestCount} TestCount
 */

// The slowest step takes a fraction of this; a step that hangs must not hang the run.
const stepTimeoutMs = 600_000;

const say = (/** @type {string} */ line) => console.log(line);

/**
 * Sets up whatever is missing, runs the chosen steps, and prints the count of all of them last.
 * @param {Lifetime} lifetime
 * @param {readonly string[]} args
 * @returns {Promise<string | null>} an empty text when a step failed, null when all passed
 */
export async function runTests(lifetime, args) {
  const chosen = chooseSteps(args);
  if (!chosen.ok) return chosen.problem;
  /** @type {TestCount[]} */
  const counts = [];
  try {
    await withSetupLock(say, () => ensureDependencies({ say, signal: lifetime.signal }));
    // Programs that check the source need one core each and nothing else, so they run side by side.
    const checks = chosen.steps.filter(({ vitest }) => vitest === null);
    counts.push(...(await Promise.all(checks.map((step) => countStep(lifetime, step, [])))));
    for (const step of chosen.steps.filter(({ vitest }) => vitest !== null)) {
      say(`\n── ${step.name}`);
      counts.push(await countStep(lifetime, step, chosen.rest));
    }
  } catch (error) {
    if (lifetime.signal.aborted) throw error;
    say(messageOf(error));
    counts.push({ passed: 0, failed: 1 });
  }
  try {
    await lifetime.stopAll();
  } catch (error) {
    say(messageOf(error));
    counts.push({ passed: 0, failed: 1 });
  }
  say(`\n${closingLine(counts)}`);
  return counts.some((count) => count.failed > 0) ? '' : null;
}

/**
 * Runs a step and says how it went; one that cannot be run counts as failed.
 * @param {Lifetime} lifetime
 * @param {import('./test-steps.mjs').TestStep} step
 * @param {readonly string[]} rest
 * @returns {Promise<TestCount>}
 */
async function countStep(lifetime, step, rest) {
  const startedAt = Date.now();
  const count = await runStep(lifetime, step, rest).catch((error) => {
    if (lifetime.signal.aborted) throw error;
    return { passed: 0, failed: 1, note: messageOf(error) };
  });
  const note = count.note === undefined ? '' : `: ${count.note}`;
  const seconds = ((Date.now() - startedAt) / 1000).toFixed(1);
  say(`── ${step.name}: ${closingLine([count])} in ${seconds} s${note}`);
  return count;
}

/**
 * @param {Lifetime} lifetime
 * @param {import('./test-steps.mjs').TestStep} step
 * @param {readonly string[]} rest
 * @returns {Promise<TestCount>}
 */
async function runStep(lifetime, step, rest) {
  const { signal } = lifetime;
  if (step.needsDatabase) await holdDatabase(lifetime);
  if (step.needsBrowser) await withSetupLock(say, () => ensureChromium({ say, signal }));
  if (step.needsKernel) await withSetupLock(say, () => ensureKernelPrograms({ say, signal }));
  if (step.vitest === null) return runChecks(step.checks, signal);
  const report = join(ensureWritableFolder(join(stateFolder, 'test')), `${step.name}.json`);
  rmSync(report, { force: true });
  const exitCode = await runNode(vitestCommand(report, step.vitest, rest), signal);
  return countVitestReport(readReport(report), exitCode, { maySkip: step.needsKernel });
}

/**
 * @param {readonly (readonly string[])[]} checks
 * @param {AbortSignal} signal
 * @returns {Promise<TestCount>}
 */
async function runChecks(checks, signal) {
  let failures = 0;
  for (const check of checks) if ((await runNode(check, signal)) !== 0) failures += 1;
  return failures === 0 ? { passed: 1, failed: 0 } : { passed: 0, failed: 1 };
}

/** @type {WeakSet<Lifetime>} */
const holdsDatabase = new WeakSet();

/**
 * Keeps the tests' database server running from the first step that needs it to the end of the run.
 * @param {Lifetime} lifetime
 */
async function holdDatabase(lifetime) {
  if (process.env['TEST_DATABASE_URL'] || holdsDatabase.has(lifetime)) return;
  const cluster = await acquireCluster({ name: 'test', isDurable: false, say, signal: lifetime.signal });
  holdsDatabase.add(lifetime);
  lifetime.onEnd(() => cluster.release());
}

/**
 * Runs a Node program to its end. When the run is interrupted the program is ended too, and waited for: it may hold the database.
 * @param {readonly string[]} args
 * @param {AbortSignal} signal
 * @returns {Promise<number | null>} null when it was killed
 */
function runNode(args, signal) {
  return new Promise((resolve, reject) => {
    const child = spawn(process.execPath, args, {
      cwd: projectFolder,
      env: environmentOfTests(process.env),
      stdio: ['ignore', 'inherit', 'inherit'],
    });
    const kill = () => child.kill('SIGKILL');
    const timers = [setTimeout(kill, stepTimeoutMs)];
    const interrupt = () => {
      child.kill('SIGTERM');
      timers.push(setTimeout(kill, 10_000));
    };
    signal.addEventListener('abort', interrupt, { once: true });
    child.once('error', reject);
    child.once('exit', (exitCode) => {
      timers.forEach(clearTimeout);
      signal.removeEventListener('abort', interrupt);
      if (signal.aborted) reject(signal.reason);
      else resolve(exitCode);
    });
  });
}

/**
 * What somebody set for `npm start` must not change what the tests see.
 * @param {NodeJS.ProcessEnv} environment
 * @returns {NodeJS.ProcessEnv}
 */
function environmentOfTests(environment) {
  const ofStart = [
    'DATABASE_URL',
    'HOST',
    'PORT',
    'PUBLIC_URL',
    'SESSION_SECRET',
    'SESSION_SECRET_BEFORE',
    'SMTP_URL',
    'MAIL_FROM',
  ];
  const kept = Object.entries(withoutPostgresVariables(environment)).filter(
    ([name]) => !ofStart.includes(name),
  );
  return { ...Object.fromEntries(kept), NODE_ENV: 'test' };
}

/**
 * @param {string} file
 * @returns {import('./test-count.mjs').VitestReport | null}
 */
function readReport(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8'));
  } catch {
    return null;
  }
}
