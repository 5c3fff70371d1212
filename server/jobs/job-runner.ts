import { Logger as WorkerLogger, run } from 'graphile-worker';
import type { Runner, TaskList, WorkerEvents } from 'graphile-worker';
import { EventEmitter } from 'node:events';
import { setTimeout as delay } from 'node:timers/promises';
import pg from 'pg';
import type { Logger } from 'pino';

/** Works on queued jobs until it is stopped. Any number of processes may run one on the same database. */
export interface JobRunner {
  /** Takes no more jobs; resolves when those at hand have ended. */
  stop(): Promise<void>;
}

export interface JobRunnerOptions {
  readonly databaseUrl: string;
  readonly tasks: TaskList;
  /** Lines as of cron: when which task is to run by itself. */
  readonly crontab: string;
  readonly log: Logger;
}

// Any number that nobody else uses in this database.
const lockSpace = 0x6c70;
const concurrency = 4;
const sweepMs = 2_000;
const graceSeconds = 2;
const restartMs = 2_000;

/**
 * The queue itself would keep a job of a killed process locked for four hours. Here each worker's name is held as an advisory
 * lock while its process lives, so that any other process sees within seconds whose jobs are free again.
 */
export function startJobRunner(options: JobRunnerOptions): JobRunner {
  const ended = new AbortController();
  const life = keepRunning(options, ended.signal);
  return {
    async stop() {
      ended.abort();
      await life;
    },
  };
}

/** Starts again whatever ends before it should: a database that was away comes back. */
async function keepRunning(options: JobRunnerOptions, ended: AbortSignal): Promise<void> {
  // Said once, not every other second.
  let isTold = false;
  while (!ended.aborted) {
    try {
      await runOnce(options, ended, () => (isTold = false));
    } catch (error) {
      if (!isTold) options.log.warn({ err: error }, 'jobs wait until the database answers');
      isTold = true;
    }
    await delay(restartMs, undefined, { signal: ended }).catch(() => undefined);
  }
}

async function runOnce(
  { databaseUrl, tasks, crontab, log }: JobRunnerOptions,
  ended: AbortSignal,
  onRunning: () => void,
): Promise<void> {
  const connection = {
    connectionString: databaseUrl,
    application_name: 'longpatch jobs',
    connectionTimeoutMillis: 5_000,
  };
  const pool = new pg.Pool({ ...connection, max: concurrency + 2 });
  const onError = (error: unknown) => log.warn({ err: error }, 'connection of the job runner');
  pool.on('error', onError);
  pool.on('connect', (client) => client.on('error', onError));
  const alive = new pg.Client(connection);
  let runner: Runner | undefined;
  try {
    await alive.connect();
    const lost = new Promise<never>((_resolve, reject) => {
      alive.once('error', reject);
      alive.once('end', () => reject(new Error('the connection that holds the locks ended')));
    });
    lost.catch(() => undefined);
    const events: WorkerEvents = new EventEmitter();
    let locked: Promise<unknown> = Promise.resolve();
    events.on('worker:create', ({ worker }) => {
      locked = locked
        .then(() => alive.query('select pg_advisory_lock($1, hashtext($2))', [lockSpace, worker.workerId]))
        .catch(onError);
    });
    runner = await run({
      pgPool: pool,
      taskList: tasks,
      crontab,
      concurrency,
      noHandleSignals: true,
      logger: loggerOf(log),
      events,
    });
    onRunning();
    await Promise.race([runner.promise, lost, sweeping(pool, ended)]);
  } finally {
    await runner?.stop().catch(() => undefined);
    alive.removeAllListeners('end');
    await alive.end().catch(() => undefined);
    await pool.end();
  }
}

/** Frees the jobs of workers that nobody holds the lock of, until the end. */
async function sweeping(pool: pg.Pool, ended: AbortSignal): Promise<void> {
  while (!ended.aborted) {
    await pool.query(
      `with held as (
         select distinct locked_by from graphile_worker.jobs
          where locked_at < now() - make_interval(secs => $2)
       ), gone as (
         select locked_by from held where pg_try_advisory_xact_lock($1, hashtext(locked_by))
       )
       select graphile_worker.force_unlock_workers(array_agg(locked_by)) from gone having count(*) > 0`,
      [lockSpace, graceSeconds],
    );
    await delay(sweepMs, undefined, { signal: ended }).catch(() => undefined);
  }
}

/** What the queue says, in the server's log. Payloads never are in it: they name ids alone. */
function loggerOf(log: Logger): WorkerLogger {
  return new WorkerLogger(() => (level, message) => {
    if (level === 'error') log.error({ from: 'jobs' }, message);
    else if (level === 'warning') log.warn({ from: 'jobs' }, message);
    else log.debug({ from: 'jobs' }, message);
  });
}
