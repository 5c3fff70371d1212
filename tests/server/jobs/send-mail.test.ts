import type { ChildProcess } from 'node:child_process';
import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { join } from 'node:path';
import { setTimeout as delay } from 'node:timers/promises';
import { pino } from 'pino';
import { afterAll, afterEach, beforeAll, expect, test, vi } from 'vitest';
import { freeLoopbackPort } from '../../../server/bootstrap/free-port.mjs';
import type { JobRunner } from '../../../server/jobs/job-runner.ts';
import { startJobs } from '../../../server/jobs/start-jobs.ts';
import type { Mail } from '../../../server/mail/mail.ts';
import { queueMail } from '../../../server/mail/queue-mail.ts';
import type { MailServerOptions, TestMailServer } from '../../support/mail-server.ts';
import { SmtpRefusal, startMailServer } from '../../support/mail-server.ts';
import type { TestApplication, TestPerson, TestWorkspace } from '../../support/test-application.ts';
import { addPerson, addWorkspace, startTestApplication, testConfig } from '../../support/test-application.ts';

let application: TestApplication;
let workspace: TestWorkspace;
const ending: (() => Promise<unknown>)[] = [];

beforeAll(async () => {
  application = await startTestApplication();
  workspace = await addWorkspace(application);
});
afterEach(async () => {
  for (const end of ending.splice(0).reverse()) await end();
});
afterAll(() => application.close());

const knex = () => application.database.knex;
let serial = 0;

function invitation(changes: Partial<Extract<Mail, { kind: 'invitation' }>> = {}) {
  serial += 1;
  return {
    kind: 'invitation',
    workspaceId: workspace.id,
    to: `guest-${serial}@ternwick.example`,
    workspaceName: 'Saltmarsh Ferries',
    inviterName: 'Ruth Halloran',
    role: 'reviewer',
    link: `http://127.0.0.1:3000/invitation/secret-${serial}`,
    expiresAt: new Date(Date.now() + 60_000),
    ...changes,
  } as const satisfies Mail;
}

function mention({ id, name, email }: TestPerson): Mail {
  return {
    kind: 'mention',
    workspaceId: workspace.id,
    to: { personId: id, name, email },
    designTitle: 'Ticketing stretch',
    by: 'Ruth Halloran',
    excerpt: 'Is VNI 10120 <right>?\nAsk "Orrin Point".',
    link: 'http://127.0.0.1:3000/designs/x',
  };
}

async function mailServer(options: MailServerOptions = {}): Promise<TestMailServer> {
  const server = await startMailServer(options);
  ending.push(() => server.close());
  return server;
}

async function runner(smtpUrl: string | null): Promise<JobRunner> {
  const jobs = await startJobs({
    database: application.database,
    config: { ...testConfig, databaseUrl: application.url, smtpUrl },
    log: pino({ level: 'silent' }),
  });
  ending.push(() => jobs.stop());
  return jobs;
}

interface Stored {
  readonly state: string;
  readonly problem: string | null;
  readonly content: unknown;
  readonly message_id: string | null;
}
const stored = async (id: string | null): Promise<Stored> =>
  (await knex()('mails').where({ id: id! }).first<Stored>())!;

const untilState = (id: string | null, state: string) =>
  vi.waitFor(async () => expect((await stored(id)).state).toBe(state), { timeout: 25_000, interval: 50 });

/** The server as a process of its own, which can be killed. */
async function startProcess(smtpUrl: string): Promise<ChildProcess> {
  const child = spawn(process.execPath, ['--import', 'tsx', 'server/main.ts'], {
    cwd: join(import.meta.dirname, '..', '..', '..'),
    stdio: 'ignore',
    env: {
      PATH: process.env['PATH'],
      DATABASE_URL: application.url,
      PORT: String(await freeLoopbackPort()),
      SESSION_SECRET: testConfig.sessionSecret,
      SMTP_URL: smtpUrl,
    },
  });
  ending.push(async () => child.kill('SIGKILL'));
  return child;
}

test('a mail arrives as text and as HTML, with what programs need to file it, and is forgotten', async () => {
  const server = await mailServer();
  await runner(server.smtpUrl);
  const mail = invitation();
  const id = await queueMail(knex(), mail);
  const { parsed, source } = await server.mailTo(mail.to);
  expect(parsed.subject).toBe('Ruth Halloran invites you to Saltmarsh Ferries');
  expect(parsed.from?.value).toEqual([{ name: 'Longpatch', address: 'longpatch@mail.example' }]);
  expect(parsed.messageId).toBe(`<${id}@mail.example>`);
  expect(parsed.headers.get('auto-submitted')).toBe('auto-generated');
  expect(Math.abs(parsed.date!.getTime() - Date.now())).toBeLessThan(60_000);
  expect(parsed.text).toContain(mail.link);
  expect(parsed.html).toContain(`href="${mail.link}"`);
  expect(source).not.toMatch(/<img|url\(|<script/i);
  await untilState(id, 'sent');
  expect((await stored(id)).content).toBeNull();
});

test('names and titles put in neither headers nor HTML of their own', async () => {
  const server = await mailServer();
  await runner(server.smtpUrl);
  const evil = 'Eve"\r\nBcc: all@ternwick.example\r\n\r\n<b onclick="x">&\u202e\u2028';
  const mail = invitation({ inviterName: evil, workspaceName: evil });
  await queueMail(knex(), mail);
  await queueMail(knex(), { ...mention(workspace.people.architect), designTitle: evil, by: evil } as Mail);
  for (const address of [mail.to, workspace.people.architect.email]) {
    const { parsed, to } = await server.mailTo(address);
    expect(to).toBe(address);
    expect(parsed.bcc).toBeUndefined();
    expect([...parsed.headers.keys()]).not.toContain('bcc');
    expect(parsed.subject).toMatch(/Eve" Bcc: all@ternwick\.example/);
    expect(parsed.subject).not.toMatch(/[\r\n\u2028\u202e]/);
    expect(parsed.html).not.toContain('<b ');
    expect(parsed.html).toContain('&lt;b onclick=&quot;x&quot;&gt;');
  }
});

test('a comment is quoted as it was written', async () => {
  const server = await mailServer();
  await runner(server.smtpUrl);
  await queueMail(knex(), mention(workspace.people.reviewer));
  const { parsed } = await server.mailTo(workspace.people.reviewer.email);
  expect(parsed.subject).toBe('Ruth Halloran mentioned you on ‘Ticketing stretch’');
  expect(parsed.text).toContain('> Is VNI 10120 <right>?\n> Ask "Orrin Point".');
  expect(parsed.html).toContain('Is VNI 10120 &lt;right&gt;?<br>Ask &quot;Orrin Point&quot;.');
  expect(parsed.text).toContain('http://127.0.0.1:3000/account/mail');
});

test('while no mail server answers mails wait, and say why; then each arrives once', async () => {
  const port = await freeLoopbackPort();
  await runner(`smtp://127.0.0.1:${port}`);
  const mail = invitation();
  const id = await queueMail(knex(), mail);
  await vi.waitFor(async () => expect((await stored(id)).problem).toMatch(/can’t be reached/), 10_000);
  expect((await stored(id)).state).toBe('queued');
  const server = await mailServer({ port });
  await untilState(id, 'sent');
  expect(server.received.map(({ to }) => to)).toEqual([mail.to]);
});

test('what a server can’t take now is tried again, what it never will is not', async () => {
  let busy = 1;
  const server = await mailServer({
    onRecipient: (address) => {
      if (address.startsWith('nobody')) throw new SmtpRefusal(550, 'No such mailbox');
    },
    onEnd: () => {
      if (busy-- > 0) throw new SmtpRefusal(451, 'Try again later');
    },
  });
  await runner(server.smtpUrl);
  const refused = await queueMail(knex(), invitation({ to: 'nobody@ternwick.example' }));
  const mail = invitation();
  const id = await queueMail(knex(), mail);
  await untilState(refused, 'failed');
  expect(await stored(refused)).toMatchObject({
    problem: expect.stringContaining('550 No such mailbox') as string,
    content: null,
  });
  await untilState(id, 'sent');
  const copies = server.received.map(({ parsed }) => parsed.messageId);
  expect(copies).toEqual([`<${id}@mail.example>`, `<${id}@mail.example>`]);
  const left = await knex()('graphile_worker.jobs').where({ key: `mail:${refused}` });
  expect(left).toEqual([]);
});

test('two processes send each of many mails once', async () => {
  const server = await mailServer();
  await Promise.all([runner(server.smtpUrl), runner(server.smtpUrl)]);
  const mails = Array.from({ length: 40 }, () => invitation());
  await knex().transaction(async (trx) => {
    for (const mail of mails) await queueMail(trx, mail);
  });
  await vi.waitFor(() => expect(server.received.length).toBeGreaterThanOrEqual(40), 15_000);
  await delay(300);
  expect(server.received.map(({ to }) => to).sort()).toEqual(mails.map(({ to }) => to).sort());
});

test('an attempt that lost its mail to another never sends its end', async () => {
  let id: string | null = null;
  const server = await mailServer({
    onRecipient: async () => {
      await knex()('mails').where({ id: id! }).update({ attempt: crypto.randomUUID() });
    },
  });
  await runner(server.smtpUrl);
  id = await knex().transaction((trx) => queueMail(trx, invitation()));
  await vi.waitFor(async () => {
    const [job] = await knex()('graphile_worker.jobs').where({ key: `mail:${id}` });
    expect(job).toMatchObject({ last_error: expect.any(String) as string });
  }, 10_000);
  expect(server.received).toEqual([]);
  await knex().raw('select graphile_worker.remove_job(?)', [`mail:${id}`]);
});

test(
  'of a killed process, another sends the mail whose end had not gone out, and doubles none whose end had',
  { timeout: 60_000 },
  async () => {
    const [before, after] = [invitation(), invitation()];
    const reached = new Set<string>();
    const stall = async (address: string) => {
      reached.add(address);
      await delay(60_000, undefined, { ref: false });
    };
    const server = await mailServer({
      onRecipient: async (address) => {
        if (address === before.to && !reached.has(address)) await stall(address);
      },
      onEnd: async ({ to }) => {
        if (to === after.to) await stall(to);
      },
    });
    const child = await startProcess(server.smtpUrl);
    const [unsent, unanswered] = [await queueMail(knex(), before), await queueMail(knex(), after)];
    await vi.waitFor(() => expect(reached.size).toBe(2), { timeout: 30_000, interval: 20 });
    child.kill('SIGKILL');
    await once(child, 'exit');
    expect((await stored(unsent)).state).toBe('sending');
    expect((await stored(unanswered)).state).toBe('handed-over');
    await runner(server.smtpUrl);
    await untilState(unsent, 'sent');
    await untilState(unanswered, 'uncertain');
    expect(server.received.map(({ to }) => to).sort()).toEqual([before.to, after.to].sort());
  },
);

test('a process that is stopped ends a mail at hand first', { timeout: 60_000 }, async () => {
  let taken: () => void = () => undefined;
  const isTaken = new Promise<void>((resolve) => (taken = resolve));
  const server = await mailServer({
    onEnd: async () => {
      taken();
      await delay(500);
    },
  });
  const child = await startProcess(server.smtpUrl);
  const id = await queueMail(knex(), invitation());
  await isTaken;
  child.kill('SIGTERM');
  expect(await once(child, 'exit')).toEqual([0, null]);
  expect((await stored(id)).state).toBe('sent');
});

test('a runner whose connections break begins again', async () => {
  const server = await mailServer();
  await runner(server.smtpUrl);
  await untilState(await queueMail(knex(), invitation()), 'sent');
  await knex().raw(
    "select pg_terminate_backend(pid) from pg_stat_activity where datname = current_database() and application_name = 'longpatch jobs'",
  );
  const id = await queueMail(knex(), invitation());
  await untilState(id, 'sent');
  expect(server.received).toHaveLength(2);
});

test('nobody is written to about a workspace that they left, or with a link that has ended', async () => {
  const server = await mailServer();
  const stranger = await addPerson(application.database, 'Sam Stranger');
  const left = await queueMail(knex(), mention(stranger));
  const late = await queueMail(knex(), invitation({ expiresAt: new Date(Date.now() - 1000) }));
  await runner(server.smtpUrl);
  await untilState(left, 'failed');
  await untilState(late, 'failed');
  expect((await stored(left)).problem).toBe('the person had left the workspace');
  expect((await stored(late)).problem).toBe('its link had ended before a mail server took it');
  expect(server.received).toEqual([]);
});

test('without a mail server mails are kept for the mailbox', async () => {
  await runner(null);
  const mail = invitation();
  const id = await queueMail(knex(), mail);
  await untilState(id, 'sent');
  const kept = await knex()('caught_mails').where({ mail_id: id! }).first<Record<string, string>>();
  expect(kept).toMatchObject({
    to_address: mail.to,
    subject: expect.stringContaining('invites you') as string,
  });
  expect(kept?.['text']).toContain(mail.link);
  expect(kept?.['html']).toContain(mail.link);
  expect(kept?.['source']).toMatch(/^Message-ID: </im);
});
