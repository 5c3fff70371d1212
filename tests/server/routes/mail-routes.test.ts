import { pino } from 'pino';
import { afterAll, beforeAll, expect, test, vi } from 'vitest';
import { defaultMailSettings } from '#contract/mail-settings.ts';
import type { OpenedMail } from '#contract/mailbox.ts';
import { mailboxSchema, openedMailSchema } from '#contract/mailbox.ts';
import type { JobRunner } from '../../../server/jobs/job-runner.ts';
import { startJobs } from '../../../server/jobs/start-jobs.ts';
import { insertMembership } from '../../../server/repositories/memberships.ts';
import type {
  TestApplication,
  TestBrowser,
  TestPerson,
  TestWorkspace,
} from '../../support/test-application.ts';
import {
  addPerson,
  addWorkspace,
  openBrowser,
  signIn,
  startTestApplication,
  testConfig,
} from '../../support/test-application.ts';

let application: TestApplication;
let workspace: TestWorkspace;
let other: TestWorkspace;
let owner: TestBrowser;
let otherOwner: TestBrowser;
let jobs: JobRunner;

beforeAll(async () => {
  application = await startTestApplication();
  workspace = await addWorkspace(application);
  other = await addWorkspace(application);
  owner = await signIn(application, workspace.people.owner);
  otherOwner = await signIn(application, other.people.owner);
  jobs = await startJobs({
    database: application.database,
    config: { ...testConfig, databaseUrl: application.url },
    log: pino({ level: 'silent' }),
  });
});
afterAll(async () => {
  await jobs.stop();
  await application.close();
});

const mailbox = (id = workspace.id) => `/api/workspaces/${id}/mailbox`;

async function inMailbox(browser: TestBrowser, id = workspace.id): Promise<readonly string[]> {
  const { mails } = mailboxSchema.parse((await browser.get(mailbox(id)).expect(200)).body);
  return mails.map(({ to }) => to);
}
async function askForReset(person: TestPerson): Promise<void> {
  const nobody = await openBrowser(application);
  await nobody.post('/api/password-reset', { email: person.email }).expect(202);
  await application.database.settled();
  await vi.waitFor(async () => {
    const [mail] = await application.database.knex('mails').where({ to_email: person.email });
    expect(mail).toMatchObject({ state: 'sent' });
  }, 10_000);
}

test('an invitation is in the mailbox of its workspace: text, HTML and source, and in nobody else’s', async () => {
  const email = 'guest@ternwick.example';
  await owner.post(`/api/workspaces/${workspace.id}/invitations`, { email, role: 'installer' }).expect(201);
  await vi.waitFor(async () => expect(await inMailbox(owner)).toContain(email), 10_000);
  const list = mailboxSchema.parse((await owner.get(mailbox()).expect(200)).body);
  expect(list.isKeeping).toBe(true);
  const { id } = list.mails.find(({ to }) => to === email)!;
  const opened: OpenedMail = openedMailSchema.parse((await owner.get(`${mailbox()}/${id}`).expect(200)).body);
  expect(opened.text).toMatch(/http:\/\/127\.0\.0\.1:3000\/invitation\/[\w-]{43}/);
  expect(opened.source).toContain('Auto-Submitted: auto-generated');
  const page = await owner.get(`${mailbox()}/${id}/page`).expect(200);
  expect(page.headers['content-type']).toMatch(/^text\/html/);
  expect(page.headers['content-security-policy']).toMatch(/default-src 'none'.*sandbox allow-popups/);
  expect(page.headers['x-frame-options']).toBe('SAMEORIGIN');
  expect(page.text).toContain('<base target="_blank">');
  expect(await inMailbox(otherOwner, other.id)).toEqual([]);
  await otherOwner.get(`${mailbox(other.id)}/${id}`).expect(404);
  await otherOwner.get(`${mailbox(other.id)}/${id}/page`).expect(404);
});

test('a reset is shown to who owns every workspace that the person is in, and to nobody else', async () => {
  const inOne = await addPerson(application.database, 'One Place');
  const inTwo = await addPerson(application.database, 'Two Places');
  const { knex } = application.database;
  await insertMembership(knex, workspace.id, inOne.id, 'reviewer');
  await insertMembership(knex, workspace.id, inTwo.id, 'reviewer');
  await insertMembership(knex, other.id, inTwo.id, 'reviewer');
  await askForReset(inOne);
  await askForReset(inTwo);
  expect(await inMailbox(owner)).toContain(inOne.email);
  expect(await inMailbox(owner)).not.toContain(inTwo.email);
  expect(await inMailbox(otherOwner, other.id)).toEqual([]);
  await insertMembership(knex, other.id, workspace.people.owner.id, 'owner');
  expect(await inMailbox(owner)).toContain(inTwo.email);
  expect(await inMailbox(owner, other.id)).toContain(inTwo.email);
});

test('with a mail server the mailbox says that it keeps nothing', async () => {
  const another = await application.another({
    config: { ...testConfig, smtpUrl: 'smtp://mail.example' },
  });
  const browser = await signIn(another, workspace.people.owner);
  expect((await browser.get(mailbox()).expect(200)).body).toMatchObject({ isKeeping: false });
});

test('what a person wants by mail is theirs to say', async () => {
  const path = '/api/account/mail';
  expect((await owner.get(path).expect(200)).body).toEqual(defaultMailSettings);
  const settings = { ...defaultMailSettings, mention: 'daily', timeZone: 'Europe/Lisbon' };
  await owner.put(path, settings).expect(200, settings);
  expect((await owner.get(path).expect(200)).body).toEqual(settings);
  expect((await otherOwner.get(path).expect(200)).body).toEqual(defaultMailSettings);
  const response = await owner.put(path, { ...settings, timeZone: 'Saltmarsh/Skerry' }).expect(400);
  expect(response.body).toMatchObject({
    message: '\'timeZone\' is "Saltmarsh/Skerry": expected a time zone such as UTC or Europe/Lisbon.',
  });
  await owner.put(path, { ...settings, decision: 'hourly' }).expect(400);
});
