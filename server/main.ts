import { createServer } from 'node:http';
import { pino } from 'pino';
import { createApp } from './app.ts';
import { readConfig } from './config.ts';
import { openDatabase } from './db/open-database.ts';
import type { JobRunner } from './jobs/job-runner.ts';
import { startJobs } from './jobs/start-jobs.ts';
import { createLiveHub } from './live/live-hub.ts';

const log = pino({
  // Nothing of this is written on purpose; errors of libraries may carry it along.
  redact: {
    paths: [
      'password',
      'cookie',
      'authorization',
      'headers',
      'body',
      'detail',
      'parameters',
      'bindings',
    ].flatMap((name) => [name, `*.${name}`, `*.*.${name}`]),
    censor: '[withheld]',
  },
});
const shutdownMs = 8_000;

const result = readConfig(process.env);
if (result.ok) {
  const { config } = result;
  const database = openDatabase(config.databaseUrl, {
    onError: (error) => log.error({ err: error }, 'database'),
  });
  const live = createLiveHub(database);
  const server = createServer(createApp({ database, config, log, live }));

  let jobs: Promise<JobRunner> | undefined;

  const stop = (signal: string): void => {
    log.info({ signal }, 'stopping');
    const jobsEnded = jobs?.then((runner) => runner.stop());
    setTimeout(() => {
      log.error('some requests did not end in time');
      process.exit(1);
    }, shutdownMs).unref();
    server.close(() => {
      void Promise.resolve(jobsEnded)
        .then(() => database.close())
        .then(
          () => log.info('stopped'),
          (error: unknown) => log.error({ err: error }, 'the database did not close'),
        );
    });
    // Streams never end by themselves; their browsers look for another process.
    live.close();
    server.closeIdleConnections();
  };
  process.once('SIGTERM', stop);
  process.once('SIGINT', stop);

  server.once('error', (error) => {
    log.fatal({ err: error }, `cannot listen on ${config.host}, port ${config.port}`);
    process.exitCode = 1;
    void database.close();
  });
  server.listen(config.port, config.host, () => {
    log.info({ host: config.host, port: config.port, publicUrl: config.publicUrl }, 'listening');
    jobs = startJobs({ database, config, log });
    jobs.catch((error: unknown) => log.error({ err: error }, 'jobs do not run, mail among them'));
  });
} else {
  for (const problem of result.problems) log.fatal(problem);
  process.exitCode = 1;
}
