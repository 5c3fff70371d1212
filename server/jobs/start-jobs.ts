import type { TaskList } from 'graphile-worker';
import type { Logger } from 'pino';
import type { Config } from '../config.ts';
import type { Database } from '../db/open-database.ts';
import { startMailCatcher } from '../mail/mail-catcher.ts';
import { createMailSender } from '../mail/mail-sender.ts';
import { sendMailTask } from '../mail/queue-mail.ts';
import { keepCaughtMail } from '../repositories/caught-mails.ts';
import { deleteOldMails } from '../repositories/mails.ts';
import { deleteOldResets } from '../repositories/password-resets.ts';
import type { JobRunner } from './job-runner.ts';
import { startJobRunner } from './job-runner.ts';
import { makeDigests } from './make-digests.ts';
import { sendMail } from './send-mail.ts';

export interface JobsOptions {
  readonly database: Database;
  readonly config: Config;
  readonly log: Logger;
  readonly clock?: () => Date;
}

const keptForMs = 30 * 24 * 60 * 60_000;

// Zones differ from UTC by whole quarters of an hour, so the mail of the day is looked for in each. Old mails go at night.
const crontab = '*/15 * * * * make-digests\n17 3 * * * forget-old-mails';

/** Starts working on this database's jobs; where no mail server is configured, one on loopback that keeps mails for the mailbox. */
export async function startJobs({
  database,
  config,
  log,
  clock = () => new Date(),
}: JobsOptions): Promise<JobRunner> {
  const { knex } = database;
  const catcher =
    config.smtpUrl === null
      ? await startMailCatcher({
          keep: (mail) => keepCaughtMail(knex, mail),
          onError: (error) => log.warn({ err: error }, 'mail catcher'),
        })
      : null;
  const sender = createMailSender({
    smtpUrl: config.smtpUrl ?? catcher!.smtpUrl,
    from: config.mailFrom,
  });
  const context = {
    knex,
    sender,
    publicUrl: config.publicUrl,
    domain: config.mailFrom.address.slice(config.mailFrom.address.lastIndexOf('@') + 1),
    clock,
    log,
  };
  const tasks: TaskList = {
    [sendMailTask]: (payload, { job, abortSignal }) =>
      sendMail(context, payload, {
        isLast: job.attempts >= job.max_attempts,
        ...(abortSignal === undefined ? {} : { signal: abortSignal }),
      }),
    'make-digests': () => makeDigests(knex, clock()),
    'forget-old-mails': async () => {
      const before = new Date(clock().getTime() - keptForMs);
      await deleteOldMails(knex, before);
      await deleteOldResets(knex, before);
    },
  };
  const runner = startJobRunner({ databaseUrl: config.databaseUrl, tasks, crontab, log });
  return {
    async stop() {
      await runner.stop();
      await catcher?.close();
    },
  };
}
