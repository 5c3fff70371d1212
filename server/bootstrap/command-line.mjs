import { createLifetime } from './lifetime.mjs';
import { messageOf } from './setup-problem.mjs';

/**
 * Runs a command until it is done or asked to end, stops what it started, and ends this process.
 * @param {(lifetime: import('./lifetime.mjs').Lifetime) => Promise<string | null>} command resolves with what went wrong, or null
 * @param {{ whenInterrupted?: string | null }} [options] what went wrong when somebody ends it; null where that is its normal end
 */
export async function runCommandLine(command, { whenInterrupted = null } = {}) {
  const lifetime = createLifetime();
  for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) {
    process.on(signal, () => lifetime.end(whenInterrupted));
  }
  // With its terminal closed a command can still stop what it started.
  for (const stream of [process.stdout, process.stderr]) stream.on('error', () => {});
  endWithNpm(lifetime, whenInterrupted);

  let problem = await outcomeOf(() => command(lifetime), lifetime);
  lifetime.end(null);
  problem = (await outcomeOf(() => lifetime.stopAll().then(() => null))) ?? problem;
  if (problem !== null && problem !== '') console.error(problem);
  process.exit(problem === null ? 0 : 1);
}

/**
 * What went wrong in `work`, or null.
 * @param {() => Promise<string | null>} work
 * @param {import('./lifetime.mjs').Lifetime} [lifetime]
 * @returns {Promise<string | null>}
 */
async function outcomeOf(work, lifetime) {
  try {
    return await work();
  } catch (error) {
    // Work that was cut short fails in all sorts of ways that mean nothing.
    if (lifetime?.signal.aborted) return lifetime.signal.reason;
    return messageOf(error);
  }
}

/**
 * npm hands on the signals that it can catch; when it was killed there is nobody left to hand them on.
 * @param {import('./lifetime.mjs').Lifetime} lifetime
 * @param {string | null} whenInterrupted
 */
function endWithNpm(lifetime, whenInterrupted) {
  if (process.env['npm_lifecycle_event'] === undefined) return;
  const npm = process.ppid;
  setInterval(() => {
    if (process.ppid !== npm) lifetime.end(whenInterrupted);
  }, 1000).unref();
}
