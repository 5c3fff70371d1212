import { pino } from 'pino';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { MailSettings } from '#contract/mail-settings.ts';
import { defaultMailSettings } from '#contract/mail-settings.ts';
import { lastHour, makeDigests } from '../../../server/jobs/make-digests.ts';
import { startJobs } from '../../../server/jobs/start-jobs.ts';
import { writeMailSettings } from '../../../server/mail/mail-wishes.ts';
import { queueMail } from '../../../server/mail/queue-mail.ts';
import { insertMembership } from '../../../server/repositories/memberships.ts';
import { startMailServer } from '../../support/mail-server.ts';
import type { TestApplication, TestPerson, TestWorkspace } from '../../support/test-application.ts';
import { addPerson, addWorkspace, startTestApplication, testConfig } from '../../support/test-application.ts';

describe('the last seven o’clock', () => {
  test.each([
    ['2026-12-01T07:00:00Z', 'UTC', '2026-12-01T07:00:00Z'],
    ['2026-12-01T06:59:59Z', 'UTC', '2026-11-30T07:00:00Z'],
    ['2026-12-01T12:00:00Z', 'Asia/Kathmandu', '2026-12-01T01:15:00Z'],
    ['2026-12-01T12:00:00Z', 'Pacific/Auckland', '2026-11-30T18:00:00Z'],
    // The clocks of Lisbon went forward at 01:00 UTC on this day.
    ['2026-03-29T12:00:00Z', 'Europe/Lisbon', '2026-03-29T06:00:00Z'],
    ['2026-03-29T05:59:00Z', 'Europe/Lisbon', '2026-03-28T07:00:00Z'],
  ])('before %s in %s was at %s', (now, zone, expected) => {
    expect(lastHour(new Date(now), zone, 7)).toEqual(new Date(expected));
  });
});

describe('the mail of the day', () => {
  let application: TestApplication;
  let workspace: TestWorkspace;

  beforeAll(async () => {
    application = await startTestApplication();
    workspace = await addWorkspace(application);
  });
  afterAll(() => application.close());

  const knex = () => application.database.knex;

  async function reader(settings: Partial<MailSettings>): Promise<TestPerson> {
    const person = await addPerson(application.database, 'Daily Reader');
    await insertMembership(knex(), workspace.id, person.id, 'reviewer');
    await writeMailSettings(knex(), person.id, { ...defaultMailSettings, ...settings });
    return person;
  }

  /** Something that happened at a moment. */
  async function event(
    { id, name, email }: TestPerson,
    at: string,
    designTitle: string,
    workspaceId = workspace.id,
  ): Promise<void> {
    const mailId = await queueMail(knex(), {
      kind: 'review-asked',
      workspaceId,
      to: { personId: id, name, email },
      designTitle,
      by: 'Ruth Halloran',
      message: 'Mind the MTU',
      link: `http://127.0.0.1:3000/designs/${designTitle}`,
    });
    await knex()('mails')
      .where({ id: mailId! })
      .update({ queued_at: new Date(at) });
  }
  const digests = (person: TestPerson) =>
    knex()('mails').where({ person_id: person.id, kind: 'digest' }).orderBy('queued_at');

  test('holds everything since the last one, and comes once', async () => {
    const person = await reader({ reviewAsked: 'daily' });
    await event(person, '2026-12-01T09:00:00Z', 'first');
    await event(person, '2026-12-02T06:59:00Z', 'second');
    await event(person, '2026-12-02T07:30:00Z', 'third');
    await makeDigests(knex(), new Date('2026-12-02T06:45:00Z'));
    // At a quarter to seven the first has waited since after yesterday's seven o'clock, so nothing is due.
    expect(await digests(person)).toEqual([]);
    const seven = new Date('2026-12-02T08:15:00Z');
    await Promise.all([makeDigests(knex(), seven), makeDigests(knex(), seven)]);
    await makeDigests(knex(), seven);
    const [digest, ...more] = await digests(person);
    expect(more).toEqual([]);
    const titles = (digest.content as { items: { designTitle: string }[] }).items.map(
      (item) => item.designTitle,
    );
    expect(titles).toEqual(['first', 'second']);
    await makeDigests(knex(), new Date('2026-12-03T07:00:00Z'));
    expect(await digests(person)).toHaveLength(2);
  });

  test('arrives as one mail that links to each, without what the reader left or no longer wants', async () => {
    const left = await addWorkspace(application);
    const person = await reader({ reviewAsked: 'daily' });
    await event(person, '2026-12-01T09:00:00Z', 'kept');
    await event(person, '2026-12-01T10:00:00Z', 'left', left.id);
    const server = await startMailServer();
    const jobs = await startJobs({
      database: application.database,
      config: { ...testConfig, databaseUrl: application.url, smtpUrl: server.smtpUrl },
      log: pino({ level: 'silent' }),
    });
    try {
      await makeDigests(knex(), new Date('2026-12-02T07:00:00Z'));
      const { parsed } = await server.mailTo(person.email);
      expect(parsed.subject).toBe('Your day on Longpatch: 1 event');
      expect(parsed.text).toContain('Ruth Halloran asks you to review ‘kept’.\n> Mind the MTU\nhttp://');
      expect(parsed.html).toContain('href="http://127.0.0.1:3000/designs/kept"');
      expect(parsed.text).not.toContain('designs/left');
    } finally {
      await jobs.stop();
      await server.close();
    }
  });

  test('tells nothing of a kind that the reader switched off meanwhile', async () => {
    const person = await reader({ reviewAsked: 'daily' });
    await event(person, '2026-12-01T09:00:00Z', 'unwanted');
    await writeMailSettings(knex(), person.id, { ...defaultMailSettings, reviewAsked: 'none' });
    await makeDigests(knex(), new Date('2026-12-02T07:00:00Z'));
    expect(await digests(person)).toEqual([]);
    expect(await knex()('mails').where({ person_id: person.id, state: 'for-digest' })).toEqual([]);
  });
});
