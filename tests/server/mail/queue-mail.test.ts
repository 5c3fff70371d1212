import { afterAll, beforeAll, expect, test } from 'vitest';
import { defaultMailSettings } from '#contract/mail-settings.ts';
import type { Mail } from '../../../server/mail/mail.ts';
import { writeMailSettings } from '../../../server/mail/mail-wishes.ts';
import { queueMail } from '../../../server/mail/queue-mail.ts';
import type { TestApplication, TestPerson, TestWorkspace } from '../../support/test-application.ts';
import { addWorkspace, startTestApplication } from '../../support/test-application.ts';

let application: TestApplication;
let workspace: TestWorkspace;

beforeAll(async () => {
  application = await startTestApplication();
  workspace = await addWorkspace(application);
});
afterAll(() => application.close());

const knex = () => application.database.knex;
const mention = ({ id, name, email }: TestPerson): Mail => ({
  kind: 'mention',
  workspaceId: workspace.id,
  to: { personId: id, name, email },
  designTitle: 'Ticketing stretch',
  by: 'Somebody Else',
  excerpt: 'Is this VNI right?',
  link: 'http://127.0.0.1:3000/designs/x',
});

async function queued(personId: string): Promise<{ states: string[]; jobs: number }> {
  const rows = await knex()('mails').where({ person_id: personId }).select<{ id: string; state: string }[]>();
  const jobs = await knex()('graphile_worker.jobs').whereIn(
    'key',
    rows.map(({ id }) => `mail:${id}`),
  );
  return { states: rows.map(({ state }) => state), jobs: jobs.length };
}

test('a mail is queued with the transaction that asks for it, and gone with one that is taken back', async () => {
  const { architect } = workspace.people;
  await expect(
    knex().transaction(async (trx) => {
      await queueMail(trx, mention(architect));
      throw new Error('changed my mind');
    }),
  ).rejects.toThrow('changed my mind');
  expect(await queued(architect.id)).toEqual({ states: [], jobs: 0 });
  await knex().transaction((trx) => queueMail(trx, mention(architect)));
  expect(await queued(architect.id)).toEqual({ states: ['queued'], jobs: 1 });
});

test('the same event makes one mail', async () => {
  const { reviewer } = workspace.people;
  const options = { dedupeKey: 'mention:1:reviewer' };
  const first = await queueMail(knex(), mention(reviewer), options);
  expect(first).not.toBeNull();
  expect(await queueMail(knex(), mention(reviewer), options)).toBeNull();
  expect(await queued(reviewer.id)).toEqual({ states: ['queued'], jobs: 1 });
});

test('who wants one mail a day, or none, is not written to at once', async () => {
  const { presales, installer } = workspace.people;
  await writeMailSettings(knex(), presales.id, { ...defaultMailSettings, mention: 'daily' });
  await writeMailSettings(knex(), installer.id, { ...defaultMailSettings, mention: 'none' });
  await queueMail(knex(), mention(presales));
  expect(await queueMail(knex(), mention(installer))).toBeNull();
  expect(await queued(presales.id)).toEqual({ states: ['for-digest'], jobs: 0 });
  expect(await queued(installer.id)).toEqual({ states: [], jobs: 0 });
});

test('what comes of settings that were given before is read back', async () => {
  const { owner } = workspace.people;
  await writeMailSettings(knex(), owner.id, { ...defaultMailSettings, shareOpened: 'daily' });
  await writeMailSettings(knex(), owner.id, { ...defaultMailSettings, shareOpened: 'at-once' });
  const { to, link, designTitle } = mention(owner) as Extract<Mail, { kind: 'mention' }>;
  await queueMail(knex(), {
    kind: 'share-opened',
    workspaceId: workspace.id,
    to,
    designTitle,
    label: 'x',
    link,
  });
  expect(await queued(owner.id)).toEqual({ states: ['queued'], jobs: 1 });
});
