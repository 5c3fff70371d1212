import { afterAll, beforeAll, beforeEach, expect, test } from 'vitest';
import { sessionSchema } from '#contract/session.ts';
import { allowances } from '../../../server/auth/throttles.ts';
import { prepareFirstOwnerCode } from '../../../server/db/first-owner-code.ts';
import type { TestApplication } from '../../support/test-application.ts';
import { openBrowser, startTestApplication, testConfig } from '../../support/test-application.ts';

let application: TestApplication;
let url: string;

const { sessionSecret } = testConfig;
const wanted = {
  name: 'Mara Tadese',
  email: 'M.Tadese@ternwick.example',
  password: 'low tide at seven',
  workspaceName: 'Ternwick Net',
};

beforeAll(async () => {
  application = await startTestApplication();
  url = (application.database.pool.options as { connectionString: string }).connectionString;
});
afterAll(() => application.close());
beforeEach(async () => {
  await application.database.knex('rate_limits').delete();
});

test('without a code from the server nobody becomes the first owner', async () => {
  const browser = await openBrowser(application);
  expect((await browser.get('/api/first-owner').expect(200)).body).toEqual({ isAwaited: true });
  const refused = await browser.post('/api/first-owner', { ...wanted, code: '0000-0000' }).expect(403);
  expect(refused.body).toMatchObject({ code: 'wrong-credentials', details: [{ path: 'code' }] });
});

test('starters that ask at once or again get one code, of which the database keeps a hash', async () => {
  const codes = await Promise.all(Array.from({ length: 4 }, () => prepareFirstOwnerCode(url, sessionSecret)));
  const [code] = codes;
  expect(code).toMatch(/^([0-9a-f]{4}-){5}[0-9a-f]{4}$/);
  expect(new Set(codes)).toEqual(new Set([code]));
  const kept = await application.database.knex('first_owner_code').select();
  expect(kept).toHaveLength(1);
  expect(JSON.stringify(kept, (_key, value: unknown) => value)).not.toContain(code);
  expect(Buffer.from((kept[0] as { code_hash: Buffer }).code_hash)).toHaveLength(32);
});

test('another secret of the server makes another code, and the earlier one ends', async () => {
  const earlier = await prepareFirstOwnerCode(url, sessionSecret);
  const later = await prepareFirstOwnerCode(url, `${sessionSecret}, changed`);
  expect(later).not.toBe(earlier);
  const browser = await openBrowser(application);
  await browser.post('/api/first-owner', { ...wanted, code: earlier }).expect(403);
});

test('guesses are stopped', async () => {
  const browser = await openBrowser(application);
  for (let guess = 0; guess < allowances.firstOwner.times; guess += 1)
    await browser.post('/api/first-owner', { ...wanted, code: `${guess}` }).expect(403);
  await browser.post('/api/first-owner', { ...wanted, code: 'x' }).expect(429);
});

test.each([
  ['password', { password: 'short' }],
  ['email', { email: 'nobody' }],
  ['name', { name: '' }],
  ['workspaceName', { workspaceName: ' ' }],
])('a bad %s is told and uses nothing up', async (field, wrong) => {
  const code = await prepareFirstOwnerCode(url, sessionSecret);
  const browser = await openBrowser(application);
  const refused = await browser.post('/api/first-owner', { ...wanted, ...wrong, code }).expect(400);
  expect(refused.body).toMatchObject({ details: [{ path: field }] });
});

test('of two who hold the code at once one becomes the owner, is signed in, and the code ends', async () => {
  const code = await prepareFirstOwnerCode(url, sessionSecret);
  const typed = ` ${code!.toUpperCase().replace(/-/g, ' ')}`;
  const browsers = [await openBrowser(application), await openBrowser(await application.another())];
  const answers = await Promise.all(
    browsers.map((browser, at) =>
      browser.post('/api/first-owner', { ...wanted, email: `${at}${wanted.email}`, code: typed }),
    ),
  );
  expect(answers.map(({ status }) => status).sort()).toEqual([201, 409]);
  const first = answers.find(({ status }) => status === 201)!;
  expect(sessionSchema.parse(first.body)).toMatchObject({
    person: { name: 'Mara Tadese' },
    memberships: [{ workspaceName: 'Ternwick Net', role: 'owner' }],
  });
  const { knex } = application.database;
  expect(await knex('people').select()).toHaveLength(1);
  expect(await knex('first_owner_code').select()).toEqual([]);
  expect(await prepareFirstOwnerCode(url, sessionSecret)).toBeNull();
  const late = await openBrowser(application);
  expect((await late.get('/api/first-owner')).body).toEqual({ isAwaited: false });
  await late.post('/api/first-owner', { ...wanted, code }).expect(409);
});
