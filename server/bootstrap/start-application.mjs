import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as delay } from 'node:timers/promises';
import {
  startInBackground,
  stopProcessGroup,
  waitUntilAnswering,
  whereToLook,
} from './background-process.mjs';
import { ensureClientBuild } from './client-build.mjs';
import { checkedConfiguration } from './configuration.mjs';
import { ensureDependencies } from './dependencies.mjs';
import { ensureWritableFolder, projectFolder, stateFolder } from './folders.mjs';
import { freeLoopbackPort, requireFreeAddress } from './free-port.mjs';
import { requireDatabase } from './postgres-access.mjs';
import { acquireCluster } from './postgres-cluster.mjs';
import { withoutPostgresVariables } from './postgres-programs.mjs';
import { takeProcessLock } from './process-lock.mjs';
import { firstOwnerCode, migrate, seedDemo } from './schema.mjs';
import { keptSessionSecret } from './session-secret.mjs';
import { withSetupLock } from './setup-lock.mjs';
import { SetupProblem } from './setup-problem.mjs';

/** @typedef {import('./lifetime.mjs').Lifetime} Lifetime */

/**
 * Sets up whatever is missing, serves Longpatch, and stays until the run is to end.
 * @param {Lifetime} lifetime
 * @param {{ isDevelopment: boolean }} options
 * @returns {Promise<string | null>} what went wrong, or null
 */
export async function startApplication(lifetime, { isDevelopment }) {
  const { signal } = lifetime;
  const say = (/** @type {string} */ line) => console.log(line);
  const startedAt = Date.now();
  readDotEnv();
  const folder = ensureWritableFolder(join(stateFolder, 'start'));
  const lock = await takeStartLock(join(folder, 'running.json'), signal);
  lifetime.onEnd(() => lock.release());

  await withSetupLock(say, () => ensureDependencies({ say, signal }));
  const given = withoutPostgresVariables(process.env);
  const sessionSecret = given['SESSION_SECRET'] || keptSessionSecret(join(folder, 'session-secret'));
  const environment = {
    ...given,
    SESSION_SECRET: sessionSecret,
    NODE_ENV: isDevelopment ? 'development' : 'production',
  };
  const isOwnDatabase = !given['DATABASE_URL'];
  const checked = await checkedConfiguration({
    ...environment,
    DATABASE_URL: given['DATABASE_URL'] || 'postgresql://127.0.0.1/longpatch',
  });
  await requireFreeAddress(checked.host, checked.port);
  signal.throwIfAborted();

  const databaseUrl = isOwnDatabase ? await openOwnDatabase(lifetime, say) : checked.databaseUrl;
  if (!isOwnDatabase) await requireDatabase(databaseUrl);
  signal.throwIfAborted();
  const migrations = await migrate(databaseUrl);
  if (migrations.length > 0) say(`Brought the database up to date (${migrations.length} migrations)`);
  const signIns = isOwnDatabase ? await seedDemo(databaseUrl) : [];
  const code = isOwnDatabase ? null : await firstOwnerCode(databaseUrl, sessionSecret);
  const firstOwner = code === null ? null : { url: `${checked.publicUrl}/first-owner`, code };
  signal.throwIfAborted();
  if (!isDevelopment) await withSetupLock(say, () => ensureClientBuild({ say, signal }));

  say('Starting the server');
  const logFile = isOwnDatabase && !isDevelopment ? join(folder, 'server.log') : null;
  const serverPort = isDevelopment ? await freeLoopbackPort() : checked.port;
  const serverHost = isDevelopment ? '127.0.0.1' : checked.host;
  const server = startInBackground(serverProgram(isDevelopment), {
    env: {
      ...environment,
      DATABASE_URL: databaseUrl,
      HOST: serverHost,
      PORT: String(serverPort),
      PUBLIC_URL: checked.publicUrl,
    },
    logFile,
  });
  lifetime.onEnd(() => server.stop());
  lock.update({ url: checked.localUrl, groups: [server.identity] });
  const serverUrl = isDevelopment ? `http://127.0.0.1:${serverPort}` : checked.localUrl;
  await waitUntilAnswering(server, 'The server', `${serverUrl}/api/health`, signal);
  void server.ended.then((how) =>
    lifetime.end(`The server ended unexpectedly (${how}); ${whereToLook(logFile)}`),
  );

  if (isDevelopment) {
    const vite = startVite(checked, { ...environment, LONGPATCH_API_URL: serverUrl });
    lifetime.onEnd(() => vite.stop());
    lock.update({ url: checked.localUrl, groups: [server.identity, vite.identity] });
    await waitUntilAnswering(vite, 'The client', `${checked.localUrl}/api/health`, signal);
    void vite.ended.then((how) => lifetime.end(`The client's server ended unexpectedly (${how}).`));
  }

  const durationMs = Date.now() - startedAt;
  say(announcement({ url: checked.localUrl, signIns, firstOwner, logFile, durationMs }));
  return lifetime.untilEnd();
}

/**
 * What is printed once people can sign in.
 * @param {object} facts
 * @param {string} facts.url
 * @param {readonly import('./schema.mjs').SignIn[]} facts.signIns
 * @param {{ readonly url: string, readonly code: string } | null} facts.firstOwner
 * @param {string | null} facts.logFile
 * @param {number} facts.durationMs
 * @returns {string}
 */
export function announcement({ url, signIns, firstOwner, logFile, durationMs }) {
  const widths = ['email', 'password'].map((field) =>
    Math.max(0, ...signIns.map((signIn) => signIn[/** @type {'email' | 'password'} */ (field)].length)),
  );
  return [
    '',
    `Longpatch is ready at ${url} after ${(durationMs / 1000).toFixed(1)} s.`,
    ...(signIns.length > 0 ? ['', 'Sign in to the demo with one of these (address, password, role):'] : []),
    ...signIns.map(
      ({ email, password, role }) =>
        `  ${email.padEnd(widths[0] ?? 0)}  ${password.padEnd(widths[1] ?? 0)}  ${role}`,
    ),
    ...(firstOwner === null
      ? []
      : [
          '',
          `Nobody has an account yet. Become the first owner at ${firstOwner.url} with this code, which works once:`,
          `  ${firstOwner.code}`,
        ]),
    '',
    ...(logFile === null ? [] : [`The server's log is '${logFile}'.`]),
    'Ctrl-C stops it.',
  ].join('\n');
}

function readDotEnv() {
  const file = join(projectFolder, '.env');
  // Variables that are set already win over the file.
  if (existsSync(file)) process.loadEnvFile(file);
}

/**
 * One start per checkout; a start that is just stopping is given the time to. What a killed start left running is ended.
 * @param {string} file
 * @param {AbortSignal} signal
 */
async function takeStartLock(file, signal) {
  const deadline = Date.now() + 5_000;
  for (;;) {
    const taken = takeProcessLock(file);
    if (taken.ok) {
      const groups = /** @type {import('./processes.mjs').ProcessIdentity[]} */ (
        taken.previous?.['groups'] ?? []
      );
      await Promise.all(groups.map(stopProcessGroup));
      return taken.lock;
    }
    const { pid, url } = taken.holder;
    if (Date.now() > deadline) {
      throw new SetupProblem(
        url === undefined
          ? `Longpatch is already being started here by process ${pid}; wait for it, or end it with 'kill ${pid}'.`
          : `Longpatch already runs at ${url} (process ${pid}); use it, or end it with 'kill ${pid}' and start again.`,
      );
    }
    await delay(200, undefined, { signal });
  }
}

/**
 * @param {Lifetime} lifetime
 * @param {(line: string) => void} say
 */
async function openOwnDatabase(lifetime, say) {
  const cluster = await acquireCluster({ name: 'start', isDurable: true, say, signal: lifetime.signal });
  const watch = setInterval(() => {
    if (!cluster.isRunning())
      lifetime.end("The database server ended unexpectedly; run 'npm start' again to recover.");
  }, 1000);
  lifetime.onEnd(() => {
    clearInterval(watch);
    return cluster.release();
  });
  return cluster.url;
}

/**
 * @param {boolean} isReloading
 * @returns {string[]}
 */
function serverProgram(isReloading) {
  const tsx = join(projectFolder, 'node_modules', 'tsx', 'dist', 'cli.mjs');
  return [...(isReloading ? [tsx, 'watch', '--clear-screen=false'] : ['--import', 'tsx']), 'server/main.ts'];
}

/**
 * The client with hot reload, passing requests for the API on to the server.
 * @param {{ host: string, port: number }} address
 * @param {NodeJS.ProcessEnv} env
 */
function startVite({ host, port }, env) {
  const vite = join(projectFolder, 'node_modules', 'vite', 'bin', 'vite.js');
  return startInBackground([vite, '--host', host, '--port', String(port), '--strictPort'], {
    env,
    logFile: null,
  });
}
