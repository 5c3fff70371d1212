import { afterAll, beforeAll, expect, test } from 'vitest';
import type { TestApplication, TestBrowser } from '../../support/test-application.ts';
import {
  addPerson,
  openBrowser,
  signIn,
  startTestApplication,
  testPassword,
} from '../../support/test-application.ts';
import { linkTo } from '../../support/queued-links.ts';

let now = new Date('2026-12-01T10:00:00Z');
let application: TestApplication;
let nobody: TestBrowser;

beforeAll(async () => {
  application = await startTestApplication({ clock: () => now });
  nobody = await openBrowser(application);
});
afterAll(() => application.close());

const nextPassword = 'another password for tests';

async function ask(email: string): Promise<void> {
  const response = await nobody.post('/api/password-reset', { email });
  expect({ status: response.status, text: response.text }).toEqual({ status: 202, text: '' });
  await application.database.settled();
}
const mailsTo = (email: string) =>
  application.database.knex('mails').where({ to_email: email, kind: 'reset' });
const set = (token: string, password = nextPassword) =>
  nobody.post('/api/password-reset/password', { token, password });

test('an address that nobody has is answered like any other, and nothing is sent', async () => {
  await ask('nobody@ternwick.example');
  expect(await mailsTo('nobody@ternwick.example')).toEqual([]);
});

test('a link sets a new password once, and ends every session of the person', async () => {
  const person = await addPerson(application.database, 'Fern Forgetful');
  const before = await signIn(application, person);
  await ask(person.email.toUpperCase());
  const token = await linkTo(application, person.email);
  await nobody.post('/api/password-reset/link', { token }).expect(200, { email: person.email });
  await set(token, 'short').expect(400);
  await set(token).expect(204);
  const session = await before.get('/api/session').expect(200);
  expect(session.body).toMatchObject({ person: null });
  await set(token, 'a third password for tests').expect(404);
  await expect(signIn(application, person, testPassword)).rejects.toThrow();
  await signIn(application, person, nextPassword);
});

test('one link used ends the others, and each is over after an hour', async () => {
  const person = await addPerson(application.database, 'Fern Forgetful');
  await ask(person.email);
  const first = await linkTo(application, person.email);
  await ask(person.email);
  const second = await linkTo(application, person.email);
  expect(second).not.toBe(first);
  await set(second).expect(204);
  await set(first).expect(404);
  await ask(person.email);
  const third = await linkTo(application, person.email);
  now = new Date(now.getTime() + 60 * 60_000);
  await nobody.post('/api/password-reset/link', { token: third }).expect(404);
  await set(third).expect(404);
});

test('what is kept of a link does not open it, and no link is logged', async () => {
  const person = await addPerson(application.database, 'Fern Forgetful');
  await ask(person.email);
  const token = await linkTo(application, person.email);
  const { rows } = await application.database.knex.raw<{ rows: { found: boolean }[] }>(
    'select bool_or(password_resets::text like ?) as found from password_resets',
    [`%${token}%`],
  );
  expect(rows).toEqual([{ found: false }]);
  await nobody.post('/api/password-reset/link', { token }).expect(200);
  expect(application.logged()).not.toContain(token);
});

test('nobody is sent more than five links an hour, and who asks is not told', async () => {
  const person = await addPerson(application.database, 'Fern Flooded');
  for (let time = 0; time < 7; time += 1) await ask(person.email);
  expect(await mailsTo(person.email)).toHaveLength(5);
});

test('an address of the network can ask twenty times an hour', async () => {
  let status = 202;
  for (let time = 0; time < 20 && status === 202; time += 1) {
    status = (await nobody.post('/api/password-reset', { email: `x-${time}@ternwick.example` })).status;
  }
  expect(status).toBe(429);
});
