import supertest from 'supertest';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { sessionSchema } from '#contract/session.ts';
import { permissions } from '../../../server/auth/permissions.ts';
import { allowances } from '../../../server/auth/throttles.ts';
import { insertDemoPerson } from '../../../server/repositories/demo-people.ts';
import type { TestApplication, TestWorkspace } from '../../support/test-application.ts';
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
let workspace: TestWorkspace;

beforeAll(async () => {
  application = await startTestApplication();
  workspace = await addWorkspace(application);
});
afterAll(() => application.close());
beforeEach(() => application.database.knex('rate_limits').delete());

/** The session's id as the cookie carries it, and what else the cookie says. */
function cookieOf(response: supertest.Response): { readonly value: string; readonly attributes: string } {
  const [first = ''] = (response.headers['set-cookie'] ?? []) as unknown as string[];
  const [pair = '', ...attributes] = first.split('; ');
  return { value: pair, attributes: attributes.join('; ') };
}

const storedSessions = async (personId: string): Promise<number> => {
  const rows = await application.database
    .knex('sessions')
    .whereRaw("sess #>> '{passport,user,id}' = ?", [personId]);
  return rows.length;
};

describe('signing in', () => {
  test('answers who one is, in which workspaces, and what one may do there', async () => {
    const { reviewer } = workspace.people;
    const browser = await signIn(application, reviewer);
    const session = sessionSchema.parse((await browser.get('/api/session').expect(200)).body);
    expect(session.person).toEqual({
      id: reviewer.id,
      name: 'Some Reviewer',
      email: reviewer.email,
      initials: 'SR',
    });
    expect(session.memberships).toEqual([
      {
        workspaceId: workspace.id,
        workspaceName: expect.any(String) as string,
        role: 'reviewer',
        actions: permissions.reviewer,
        needsSecondStep: false,
      },
    ]);
    expect(session.demo).toEqual([]);
  });

  test('takes the e-mail address in any case and with spaces around it', async () => {
    const browser = await openBrowser(application);
    const email = `  ${workspace.people.owner.email.toUpperCase()} `;
    await browser.post('/api/session', { email, password: testPassword }).expect(200);
  });

  test('gives an unknown person and a wrong password the same answer', async () => {
    const browser = await openBrowser(application);
    const wrong = await browser
      .post('/api/session', { email: workspace.people.owner.email, password: 'wrong' })
      .expect(401);
    const unknown = await browser
      .post('/api/session', { email: 'nobody@ternwick.example', password: 'wrong' })
      .expect(401);
    const withoutId = (response: supertest.Response) => ({
      ...(response.body as object),
      requestId: 'any',
    });
    expect(withoutId(wrong)).toEqual(withoutId(unknown));
    expect(withoutId(wrong)).toMatchObject({ code: 'wrong-credentials' });
    const named = (response: supertest.Response) =>
      Object.keys(response.headers).filter((name) => name !== 'set-cookie');
    expect(named(wrong)).toEqual(named(unknown));
  });

  test('takes as long for an unknown person as for a wrong password', async () => {
    const browser = await openBrowser(application);
    const timeOf = async (email: string): Promise<number> => {
      const times: number[] = [];
      for (let attempt = 0; attempt < 7; attempt += 1) {
        const startedAt = performance.now();
        await browser.post('/api/session', { email, password: 'wrong' }).expect(401);
        times.push(performance.now() - startedAt);
      }
      return times.sort((a, b) => a - b)[3]!;
    };
    await timeOf('warm-up@ternwick.example');
    const known = await timeOf(workspace.people.owner.email);
    const unknown = await timeOf('nobody@ternwick.example');
    // Without the hash of nobody the unknown person would be answered in a tenth of the time.
    expect(unknown / known).toBeGreaterThan(0.4);
    expect(unknown / known).toBeLessThan(2.5);
  });

  test('puts the session under a new id, so that a planted one is worth nothing', async () => {
    const planted = supertest.agent(application.server);
    const before = await planted.get('/api/session');
    const plantedCookie = cookieOf(before).value;
    const after = await planted
      .post('/api/session')
      .set('X-CSRF-Token', tokenOf(before))
      .send({ email: workspace.people.architect.email, password: testPassword })
      .expect(200);
    expect(cookieOf(after).value).not.toBe(plantedCookie);
    expect(tokenOf(after)).not.toBe(tokenOf(before));
    const attacker = await supertest(application.server).get('/api/session').set('Cookie', plantedCookie);
    expect((attacker.body as { person: unknown }).person).toBeNull();
  });

  test('keeps the session for thirty days only when asked to', async () => {
    const browser = await openBrowser(application);
    const { email } = workspace.people.presales;
    const short = await browser.post('/api/session', { email, password: testPassword }).expect(200);
    expect(cookieOf(short).attributes).toBe('Path=/; HttpOnly; SameSite=Lax');
    browser.csrfToken = tokenOf(short);
    const kept = await browser
      .post('/api/session', { email, password: testPassword, keep: true })
      .expect(200);
    const expires = /Expires=([^;]+)/.exec(cookieOf(kept).attributes)?.[1] ?? '';
    const days = (Date.parse(expires) - Date.now()) / 86_400_000;
    expect(days).toBeGreaterThan(29.9);
    expect(days).toBeLessThan(30.1);
    const [row] = await application.database
      .knex('sessions')
      .whereRaw("sess #>> '{passport,user,id}' = ?", [workspace.people.presales.id])
      .orderBy('expire', 'desc')
      .select<{ expire: Date }[]>('expire');
    expect((row!.expire.getTime() - Date.now()) / 86_400_000).toBeGreaterThan(29.9);
  });

  test('over https sends a cookie that plain HTTP and other hosts can neither see nor set', async () => {
    const secure = await application.another({
      config: { ...testConfig, publicUrl: 'https://plan.ternwick.example' },
    });
    const response = await supertest(secure.server).get('/api/session').set('X-Forwarded-Proto', 'https');
    expect(cookieOf(response).value).toMatch(/^__Host-longpatch=/);
    expect(cookieOf(response).attributes).toContain('Secure');
    expect(response.headers['strict-transport-security']).toBeDefined();
  });

  test('names each field at fault, and shows no password', async () => {
    const browser = await openBrowser(application);
    const response = await browser
      .post('/api/session', { email: 'not an address', password: '', extra: 1 })
      .expect(400);
    expect(response.body).toMatchObject({ code: 'invalid-request' });
    const { details } = response.body as { details: { path: string; value: string; expected: string }[] };
    expect(details.map(({ path }) => path).sort()).toEqual(['email', 'extra', 'password']);
    const long = await browser
      .post('/api/session', { email: 'a@b.example', password: 'x'.repeat(201) })
      .expect(400);
    expect(JSON.stringify(long.body)).not.toContain('xxx');
  });
});

describe('the throttle on signing in', () => {
  const times = allowances.signInOfPersonFromAddress.times;

  test.each(['owner', 'nobody'] as const)('stops guesses at the password of %s', async (who) => {
    const email = who === 'owner' ? workspace.people.owner.email : 'nobody@ternwick.example';
    const browser = await openBrowser(application);
    for (let attempt = 0; attempt < times; attempt += 1) {
      await browser.post('/api/session', { email, password: 'wrong' }).expect(401);
    }
    const refused = await browser.post('/api/session', { email, password: testPassword }).expect(429);
    expect(refused.body).toMatchObject({ code: 'too-many-requests' });
    const { retryAfterSeconds } = refused.body as { retryAfterSeconds: number };
    expect(retryAfterSeconds).toBeGreaterThan(60);
    expect(refused.headers['retry-after']).toBe(String(retryAfterSeconds));
  });

  test('counts guesses that arrive at once, at two processes', async () => {
    const other = await application.another();
    const browsers = [await openBrowser(application), await openBrowser(other)];
    const { email } = workspace.people.installer;
    const statuses = await Promise.all(
      Array.from({ length: times + 6 }, async (_, index) => {
        const response = await browsers[index % 2]!.post('/api/session', { email, password: 'wrong' });
        return response.status;
      }),
    );
    expect(statuses.filter((status) => status === 401)).toHaveLength(times);
    expect(statuses.filter((status) => status === 429)).toHaveLength(6);
  });

  test('forgets the failures of somebody who gets in', async () => {
    const browser = await openBrowser(application);
    const { email } = workspace.people.owner;
    for (let round = 0; round < 2; round += 1) {
      for (let attempt = 0; attempt < times - 1; attempt += 1)
        await browser.post('/api/session', { email, password: 'wrong' }).expect(401);
      browser.csrfToken = tokenOf(
        await browser.post('/api/session', { email, password: testPassword }).expect(200),
      );
    }
  });

  test('holds no e-mail address', async () => {
    const browser = await openBrowser(application);
    const { email } = workspace.people.owner;
    await browser.post('/api/session', { email, password: 'wrong' }).expect(401);
    const keys = await application.database.knex('rate_limits').pluck<string[]>('key');
    expect(keys).toHaveLength(3);
    expect(keys.join(' ')).not.toContain('@');
  });
});

describe('changing requests without the session’s token', () => {
  test.each([
    ['no token', undefined],
    ['an invented token', 'f'.repeat(64)],
    ['an empty token', ''],
  ])('are refused with %s', async (_case, token) => {
    const browser = await signIn(application, workspace.people.architect);
    const request = browser.agent.post(`/api/workspaces/${workspace.id}/engagements`);
    if (token !== undefined) request.set('X-CSRF-Token', token);
    const response = await request.send({ name: 'Forged' }).expect(403);
    expect(response.body).toMatchObject({ code: 'csrf' });
    expect(await application.database.knex('engagements').where({ name: 'Forged' })).toEqual([]);
  });

  test('are refused with the token of another session', async () => {
    const browser = await signIn(application, workspace.people.architect);
    browser.csrfToken = (await openBrowser(application)).csrfToken;
    await browser.post(`/api/workspaces/${workspace.id}/engagements`, { name: 'Forged' }).expect(403);
  });

  test('sign nobody in', async () => {
    await supertest(application.server)
      .post('/api/session')
      .send({ email: workspace.people.owner.email, password: testPassword })
      .expect(403);
  });
});

describe('signing out', () => {
  test('ends the session on the server', async () => {
    const browser = await signIn(application, workspace.people.architect);
    const cookie = browser.agent.jar.getCookie('longpatch', {
      domain: '127.0.0.1',
      path: '/',
      secure: false,
      script: false,
    })!;
    await browser.delete('/api/session').expect(204);
    const replay = await supertest(application.server)
      .get('/api/session')
      .set('Cookie', `longpatch=${cookie.value}`);
    expect((replay.body as { person: unknown }).person).toBeNull();
  });
});

describe('changing one’s password', () => {
  const next = 'another password for tests';

  test('ends the person’s other sessions and keeps this one', async () => {
    const person = await addPerson(application.database, 'Changing Person');
    const here = await signIn(application, person);
    const elsewhere = await signIn(application, person);
    const answer = await here.put('/api/account/password', { current: testPassword, next }).expect(200);
    expect(sessionSchema.parse(answer.body).person?.id).toBe(person.id);
    const still = await here.get('/api/session');
    expect((still.body as { person: { id: string } }).person.id).toBe(person.id);
    const gone = await elsewhere.get('/api/session');
    expect((gone.body as { person: unknown }).person).toBeNull();
    expect(await storedSessions(person.id)).toBe(1);
    await signIn(application, person, next);
    const browser = await openBrowser(application);
    await browser.post('/api/session', { email: person.email, password: testPassword }).expect(401);
  });

  test('makes a session of before worthless even where it is written again', async () => {
    const person = await addPerson(application.database, 'Changing Person');
    const elsewhere = await signIn(application, person);
    const { knex } = application.database;
    const [old] = await knex('sessions').whereRaw("sess #>> '{passport,user,id}' = ?", [person.id]);
    const here = await signIn(application, person);
    await here.put('/api/account/password', { current: testPassword, next }).expect(200);
    await knex('sessions').insert({ ...old, sess: JSON.stringify((old as { sess: unknown }).sess) });
    const gone = await elsewhere.get('/api/session');
    expect((gone.body as { person: unknown }).person).toBeNull();
  });

  test('needs the current one, and a new one of twelve characters', async () => {
    const person = await addPerson(application.database, 'Changing Person');
    const browser = await signIn(application, person);
    const wrong = await browser.put('/api/account/password', { current: 'wrong', next }).expect(403);
    expect(wrong.body).toMatchObject({ code: 'wrong-credentials', details: [{ path: 'current' }] });
    const short = await browser
      .put('/api/account/password', { current: testPassword, next: 'short' })
      .expect(400);
    expect(short.body).toMatchObject({
      details: [{ path: 'next', expected: 'expected at least 12 characters' }],
    });
    await signIn(application, person);
  });

  test('stops guesses at the current one', async () => {
    const person = await addPerson(application.database, 'Changing Person');
    const browser = await signIn(application, person);
    for (let attempt = 0; attempt < allowances.currentPassword.times; attempt += 1)
      await browser.put('/api/account/password', { current: 'wrong', next }).expect(403);
    await browser.put('/api/account/password', { current: testPassword, next }).expect(429);
  });
});

describe('the demo', () => {
  test('is off unless the database says so: nobody can be signed in with one click', async () => {
    const browser = await openBrowser(application);
    await browser.post('/api/session/demo', { role: 'owner' }).expect(404);
  });

  test('signs in as the demo’s person of a role, and nobody else', async () => {
    const { reviewer } = workspace.people;
    await insertDemoPerson(application.database.knex, reviewer.id, workspace.id);
    const browser = await openBrowser(application);
    const session = sessionSchema.parse((await browser.get('/api/session')).body);
    expect(session.demo).toEqual([{ role: 'reviewer', name: reviewer.name, email: reviewer.email }]);
    await browser.post('/api/session/demo', { role: 'owner' }).expect(404);
    await browser.post('/api/session/demo', { role: 'guest' }).expect(400);
    const answer = await browser.post('/api/session/demo', { role: 'reviewer' }).expect(200);
    expect(sessionSchema.parse(answer.body).person?.id).toBe(reviewer.id);
    await application.database.knex('demo_people').delete();
  });
});
