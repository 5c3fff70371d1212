import type supertest from 'supertest';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { recoveryCodesSchema, secondStepOfferSchema, secondStepStateSchema } from '#contract/account.ts';
import { sessionSchema } from '#contract/session.ts';
import { allowances } from '../../../server/auth/throttles.ts';
import { insertDemoPerson } from '../../../server/repositories/demo-people.ts';
import { codeAt } from '../../support/authenticator.ts';
import type { TestApplication, TestBrowser, TestPerson } from '../../support/test-application.ts';
import {
  addPerson,
  addWorkspace,
  openBrowser,
  signIn,
  startTestApplication,
  testConfig,
  testPassword,
  tokenOf,
} from '../../support/test-application.ts';

let application: TestApplication;
/** The server's time: an authenticator shows a new code every half minute. */
let now = new Date();
const clock = (): Date => now;
const nextCode = (): void => {
  now = new Date(now.getTime() + 30_000);
};

beforeAll(async () => {
  application = await startTestApplication({ clock });
});
afterAll(() => application.close());
beforeEach(async () => {
  await application.database.knex('rate_limits').delete();
});

interface Secured {
  readonly person: TestPerson;
  /** The browser that it was set up in. */
  readonly browser: TestBrowser;
  readonly secret: string;
  readonly recoveryCodes: readonly string[];
}

async function offer(browser: TestBrowser): Promise<string> {
  return secondStepOfferSchema.parse((await browser.post('/api/account/second-step').expect(200)).body)
    .secret;
}

/** Somebody who has set two-step sign-in up. */
async function secure(name = 'Careful Person'): Promise<Secured> {
  const person = await addPerson(application.database, name);
  const browser = await signIn(application, person);
  const secret = await offer(browser);
  const answer = await browser
    .put('/api/account/second-step', { code: codeAt(secret, now), password: testPassword })
    .expect(200);
  nextCode();
  return { person, browser, secret, recoveryCodes: recoveryCodesSchema.parse(answer.body).recoveryCodes };
}

/** A browser in which the password was typed, and that is asked for a code. */
async function halfSignedIn(person: TestPerson, at: TestApplication = application): Promise<TestBrowser> {
  const browser = await openBrowser(at);
  const { email } = person;
  const answer = await browser.post('/api/session', { email, password: testPassword }).expect(200);
  expect(sessionSchema.parse(answer.body)).toMatchObject({
    person: null,
    secondStepAsked: true,
    memberships: [],
  });
  browser.csrfToken = tokenOf(answer);
  return browser;
}

const sendCode = (browser: TestBrowser, code: string) => browser.post('/api/session/second-step', { code });
const sessionCookie = (response: supertest.Response): string =>
  ((response.headers['set-cookie'] ?? []) as unknown as string[])[0]?.split(';')[0] ?? '';

describe('setting it up', () => {
  test('takes a code of the new secret and the password, and answers ten recovery codes', async () => {
    const person = await addPerson(application.database, 'Careful Person');
    const browser = await signIn(application, person);
    const elsewhere = await signIn(application, person);
    const secret = await offer(browser);
    const code = codeAt(secret, now);
    const wrongPassword = await browser
      .put('/api/account/second-step', { code, password: 'wrong' })
      .expect(403);
    expect(wrongPassword.body).toMatchObject({ code: 'wrong-credentials', details: [{ path: 'password' }] });
    const wrongCode = await browser
      .put('/api/account/second-step', { code: '000000', password: testPassword })
      .expect(403);
    expect(wrongCode.body).toMatchObject({ details: [{ path: 'code' }] });
    expect(JSON.stringify(wrongCode.body)).not.toContain('000000');

    const { recoveryCodes } = recoveryCodesSchema.parse(
      (await browser.put('/api/account/second-step', { code, password: testPassword }).expect(200)).body,
    );
    expect(recoveryCodes).toHaveLength(10);
    const state = secondStepStateSchema.parse((await browser.get('/api/account/second-step')).body);
    expect(state).toMatchObject({ isOn: true, since: now.toISOString(), recoveryCodesLeft: 10 });
    // What was signed in with a password alone is signed in no more.
    expect((await elsewhere.get('/api/account/second-step')).status).toBe(401);
  });

  test('keeps neither the secret nor the recovery codes readable in the database', async () => {
    const { person, secret, recoveryCodes } = await secure();
    const { knex } = application.database;
    const kept = JSON.stringify([
      await knex('second_steps').where({ person_id: person.id }).select(knex.raw("encode(secret, 'escape')")),
      await knex('recovery_codes').select(knex.raw("encode(code_hash, 'escape')")),
    ]);
    for (const value of [secret, ...recoveryCodes]) expect(kept).not.toContain(value);
    expect(application.logged()).not.toContain(secret);
  });

  test('a picture of the secret comes along, as data that the page may show', async () => {
    const browser = await signIn(application, await addPerson(application.database, 'Looking Person'));
    const answer = secondStepOfferSchema.parse((await browser.post('/api/account/second-step')).body);
    expect(answer.picture).toMatch(/^data:image\/svg\+xml;base64,/);
    expect(answer.uri).toContain(answer.secret);
  });

  test('a second offer takes the first one’s place until one is confirmed; then there is none', async () => {
    const browser = await signIn(application, await addPerson(application.database, 'Undecided Person'));
    const first = await offer(browser);
    const second = await offer(browser);
    const confirm = (secret: string) =>
      browser.put('/api/account/second-step', { code: codeAt(secret, now), password: testPassword });
    await confirm(first).expect(403);
    await confirm(second).expect(200);
    await confirm(second).expect(409);
    expect((await browser.post('/api/account/second-step').expect(409)).body).toMatchObject({
      code: 'conflict',
    });
  });

  test('is not offered to the people of the demo', async () => {
    const workspace = await addWorkspace(application);
    const { presales } = workspace.people;
    await insertDemoPerson(application.database.knex, presales.id, workspace.id);
    const browser = await openBrowser(application);
    browser.csrfToken = tokenOf(await browser.post('/api/session/demo', { role: 'presales' }).expect(200));
    expect((await browser.get('/api/account/second-step')).body).toMatchObject({ isOffered: false });
    await browser.post('/api/account/second-step').expect(409);
    await application.database.knex('demo_people').delete();
  });
});

describe('signing in with two steps', () => {
  test('a password alone opens nothing; a code after it does', async () => {
    const { person, secret } = await secure();
    const browser = await halfSignedIn(person);
    await browser.get('/api/account/second-step').expect(401);
    await browser.get('/api/workspaces').expect(401);
    const answer = await sendCode(browser, codeAt(secret, now)).expect(200);
    expect(sessionSchema.parse(answer.body)).toMatchObject({
      person: { id: person.id },
      secondStepAsked: false,
    });
    browser.csrfToken = tokenOf(answer);
    await browser.get('/api/account/second-step').expect(200);
    nextCode();
  });

  test('each step puts the session under a new id, so that one planted before or between is worth nothing', async () => {
    const { person, secret } = await secure();
    const browser = await openBrowser(application);
    const planted = sessionCookie(await (await openBrowser(application)).agent.get('/api/session'));
    const asked = await browser
      .post('/api/session', { email: person.email, password: testPassword })
      .expect(200);
    const between = sessionCookie(asked);
    browser.csrfToken = tokenOf(asked);
    const done = await sendCode(browser, codeAt(secret, now)).expect(200);
    nextCode();
    const after = sessionCookie(done);
    expect(new Set([planted, between, after]).size).toBe(3);
    expect(tokenOf(done)).not.toBe(tokenOf(asked));
    for (const cookie of [planted, between]) {
      const stranger = await openBrowser(application);
      const answer = await stranger.agent.get('/api/session').set('Cookie', cookie);
      expect(sessionSchema.parse(answer.body)).toMatchObject({ person: null, secondStepAsked: false });
    }
  });

  test('a code is taken once, however soon and wherever it comes again', async () => {
    const { person, secret } = await secure();
    const other = await application.another({ clock });
    const browsers = [
      await halfSignedIn(person),
      await halfSignedIn(person, other),
      await halfSignedIn(person),
      await halfSignedIn(person, other),
    ];
    const code = codeAt(secret, now);
    const answers = await Promise.all(browsers.map((browser) => sendCode(browser, code)));
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 403, 403, 403]);
    await application.database.knex('rate_limits').delete();
    await sendCode(await halfSignedIn(person), code).expect(403);
    // Nor one that an authenticator showed before it.
    nextCode();
    nextCode();
    await sendCode(await halfSignedIn(person), codeAt(secret, now)).expect(200);
    const earlier = codeAt(secret, new Date(now.getTime() - 30_000));
    await sendCode(await halfSignedIn(person), earlier).expect(403);
    nextCode();
  });

  test('a clock may be half a minute off, and no more', async () => {
    const { person, secret } = await secure();
    const off = (steps: number) => codeAt(secret, new Date(now.getTime() + steps * 30_000));
    for (const steps of [-2, 2]) await sendCode(await halfSignedIn(person), off(steps)).expect(403);
    await sendCode(await halfSignedIn(person), off(1)).expect(200);
    nextCode();
    nextCode();
  });

  test('a recovery code does in place of one, once', async () => {
    const { person, recoveryCodes } = await secure();
    const [first = ''] = recoveryCodes;
    const typed = first.toUpperCase().replace(/-/g, ' ');
    await sendCode(await halfSignedIn(person), typed).expect(200);
    const again = await sendCode(await halfSignedIn(person), first).expect(403);
    expect((again.body as { message: string }).message).toContain('recovery code');
    await sendCode(await halfSignedIn(person), 'aaaaa-bbbbb-ccccc').expect(403);
  });

  test('guesses are stopped, for a right code too and in any browser', async () => {
    const { person, secret } = await secure();
    const guessing = await halfSignedIn(person);
    for (let guess = 0; guess < allowances.secondStep.times; guess += 1)
      await sendCode(guessing, '000000').expect(403);
    const stopped = await sendCode(await halfSignedIn(person), codeAt(secret, now)).expect(429);
    expect(Number(stopped.headers['retry-after'])).toBeGreaterThan(600);
    // Somebody else is not held up by it.
    const { person: other, secret: otherSecret } = await secure('Other Person');
    await sendCode(await halfSignedIn(other), codeAt(otherSecret, now)).expect(200);
    nextCode();
  });

  test('guesses that come slowly are stopped within the day', async () => {
    const { person, secret } = await secure();
    const browser = await halfSignedIn(person);
    const { knex } = application.database;
    for (let guess = 0; guess < allowances.secondStepOfDay.times; guess += 1) {
      await knex('rate_limits').where('key', 'like', 'secondStep:%').delete();
      await sendCode(browser, '000000').expect(403);
    }
    await knex('rate_limits').where('key', 'like', 'secondStep:%').delete();
    await sendCode(browser, codeAt(secret, now)).expect(429);
  });

  test('a session that waits is worth nothing after ten minutes, a change of password, or for nobody', async () => {
    const { person, browser: signedIn, secret } = await secure();
    const { knex } = application.database;
    const late = await halfSignedIn(person);
    await knex.raw(
      `update sessions set sess = jsonb_set(sess::jsonb, '{pendingSignIn,atMs}', to_jsonb(?::bigint))::json
         where sess #>> '{pendingSignIn,personId}' = ?`,
      [Date.now() - 10 * 60_000 - 1000, person.id],
    );
    expect((await sendCode(late, codeAt(secret, now)).expect(409)).body).toMatchObject({ code: 'conflict' });
    const waiting = await halfSignedIn(person);
    await signedIn.put('/api/account/password', { current: testPassword, next: testPassword }).expect(200);
    await sendCode(waiting, codeAt(secret, now)).expect(409);
    await sendCode(await openBrowser(application), '000000').expect(409);
  });

  test('whoever was signed in before is not, once another person’s password is typed', async () => {
    const { person } = await secure();
    const browser = await signIn(application, await addPerson(application.database, 'Earlier Person'));
    const answer = await browser.post('/api/session', { email: person.email, password: testPassword });
    expect(sessionSchema.parse(answer.body)).toMatchObject({ person: null, memberships: [] });
    await browser.get('/api/workspaces').expect(401);
  });
});

describe('switching it off, and new recovery codes', () => {
  test('take password and code', async () => {
    const { browser, person, secret, recoveryCodes } = await secure();
    const code = codeAt(secret, now);
    const paths = ['/api/account/second-step/recovery-codes', '/api/account/second-step/off'];
    for (const path of paths) {
      await browser.post(path, { code, password: 'wrong' }).expect(403);
      await browser.post(path, { code: '000000', password: testPassword }).expect(403);
      await browser.post(path, { password: testPassword }).expect(400);
    }
    await application.database.knex('rate_limits').delete();
    const renewed = await browser.post(paths[0]!, { code, password: testPassword }).expect(200);
    const next = recoveryCodesSchema.parse(renewed.body).recoveryCodes;
    expect(next.some((each) => recoveryCodes.includes(each))).toBe(false);
    await sendCode(await halfSignedIn(person), recoveryCodes[0]!).expect(403);
    await browser.post(paths[1]!, { code: next[0]!, password: testPassword }).expect(204);
    expect((await browser.get('/api/account/second-step')).body).toMatchObject({
      isOn: false,
      recoveryCodesLeft: 0,
    });
    // The password alone does again.
    await signIn(application, person);
    await browser.post(paths[1]!, { code: next[1]!, password: testPassword }).expect(409);
    nextCode();
  });
});

describe('a change of the server’s secret', () => {
  const changed = 'another secret of more than thirty-two characters';

  test('with the one before at hand goes unnoticed, and the secret is sealed anew', async () => {
    const { person, secret } = await secure();
    const { knex } = application.database;
    const sealed = () =>
      knex('second_steps').where({ person_id: person.id }).first<{ secret: Buffer }>('secret');
    const before = await sealed();
    const next = await application.another({
      clock,
      config: { ...testConfig, sessionSecret: changed, previousSessionSecret: testConfig.sessionSecret },
    });
    await sendCode(await halfSignedIn(person, next), codeAt(secret, now)).expect(200);
    nextCode();
    expect((await sealed()).secret.equals(before.secret)).toBe(false);
    const last = await application.another({ clock, config: { ...testConfig, sessionSecret: changed } });
    await sendCode(await halfSignedIn(person, last), codeAt(secret, now)).expect(200);
    nextCode();
  });

  test('without it says so, and recovery codes still lead in and to a new set-up', async () => {
    const { person, secret, recoveryCodes } = await secure();
    const next = await application.another({ clock, config: { ...testConfig, sessionSecret: changed } });
    const browser = await halfSignedIn(person, next);
    const refused = await sendCode(browser, codeAt(secret, now)).expect(403);
    expect((refused.body as { message: string }).message).toContain('use a recovery code');
    const [first, second] = recoveryCodes;
    browser.csrfToken = tokenOf(await sendCode(browser, first!).expect(200));
    await browser.post('/api/account/second-step/off', { code: second, password: testPassword }).expect(204);
    await offer(browser);
    nextCode();
  });
});
