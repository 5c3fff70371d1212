import { createHash } from 'node:crypto';
import supertest from 'supertest';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import {
  apiTokenListSchema,
  createdApiTokenSchema,
  deletionPreviewSchema,
  sessionListSchema,
  type TokenScope,
} from '#contract/account.ts';
import { workspaceListSchema } from '#contract/workspaces.ts';
import { allowances } from '../../../server/auth/throttles.ts';
import { insertMembership, insertWorkspace } from '../../../server/repositories/memberships.ts';
import type {
  TestApplication,
  TestBrowser,
  TestPerson,
  TestWorkspace,
} from '../../support/test-application.ts';
import {
  addDesign,
  addEngagement,
  addPerson,
  addWorkspace,
  openBrowser,
  signIn,
  startTestApplication,
  testPassword,
} from '../../support/test-application.ts';

let application: TestApplication;
let now = new Date();

beforeAll(async () => {
  application = await startTestApplication({ clock: () => now });
});
afterAll(() => application.close());
beforeEach(async () => {
  now = new Date();
  await application.database.knex('rate_limits').delete();
});

const daysAhead = (days: number): string =>
  new Date(now.getTime() + days * 86_400_000).toISOString().slice(0, 10);

describe('sessions', () => {
  const list = async (browser: TestBrowser) =>
    sessionListSchema.parse((await browser.get('/api/account/sessions').expect(200)).body).sessions;

  test('are listed with what tells them apart, this one marked, and never the id that opens them', async () => {
    const person = await addPerson(application.database, 'Travelling Person');
    const first = await signIn(application, person);
    const second = await openBrowser(application);
    await second
      .post('/api/session', { email: person.email, password: testPassword, keep: true })
      .set('User-Agent', 'a phone of somebody')
      .expect(200);
    const sessions = await list(first);
    expect(sessions).toHaveLength(2);
    expect(sessions.find(({ isThisOne }) => isThisOne)).toMatchObject({ isKept: false });
    const other = sessions.find(({ isThisOne }) => !isThisOne)!;
    expect(other).toMatchObject({ userAgent: 'a phone of somebody', isKept: true });
    expect(other.address).toMatch(/127\.0\.0\.1/);
    for (const { startedAt, lastUsedAt } of sessions) {
      expect(Math.abs(Date.parse(startedAt ?? '') - Date.now())).toBeLessThan(30_000);
      expect(Math.abs(Date.parse(lastUsedAt) - Date.now())).toBeLessThan(30_000);
    }
    const ids = await application.database.knex('sessions').pluck<string[]>('sid');
    for (const id of ids) expect(JSON.stringify(sessions)).not.toContain(id);
  });

  test('end one by one, or all but this one, and only one’s own', async () => {
    const person = await addPerson(application.database, 'Travelling Person');
    const here = await signIn(application, person);
    const there = await signIn(application, person);
    const elsewhere = await signIn(application, person);
    const stranger = await signIn(application, await addPerson(application.database, 'Some Stranger'));
    const [thereId] = (await list(there)).filter(({ isThisOne }) => isThisOne).map(({ id }) => id);
    await stranger.delete(`/api/account/sessions/${thereId}`).expect(404);
    await here.delete(`/api/account/sessions/${thereId}`).expect(204);
    await here.delete(`/api/account/sessions/${thereId}`).expect(404);
    await there.get('/api/account/sessions').expect(401);
    expect(await list(here)).toHaveLength(2);
    await here.delete('/api/account/sessions').expect(204);
    await elsewhere.get('/api/account/sessions').expect(401);
    expect(await list(here)).toHaveLength(1);
    expect(await list(stranger)).toHaveLength(1);
  });
});

describe('a personal token', () => {
  let workspace: TestWorkspace;
  let engagementId: string;
  let designId: string;
  let architect: TestBrowser;

  beforeAll(async () => {
    workspace = await addWorkspace(application);
    engagementId = await addEngagement(application, workspace.id);
    designId = await addDesign(application, engagementId);
    architect = await signIn(application, workspace.people.architect);
  });

  const make = async (scope: TokenScope, workspaceId: string | null = null, browser = architect) => {
    const answer = await browser
      .post('/api/account/tokens', {
        name: `A ${scope} script`,
        scope,
        workspaceId,
        expiresOn: daysAhead(30),
      })
      .expect(201);
    return createdApiTokenSchema.parse(answer.body);
  };
  /** What a script sends: no cookie, no token of a session. */
  const send = (secret: string, method: 'get' | 'post' | 'patch' | 'put' | 'delete', path: string) =>
    supertest(application.server)[method](path).set('Authorization', `Bearer ${secret}`);
  const rename = (secret: string) =>
    send(secret, 'patch', `/api/designs/${designId}`).send({ title: 'Renamed' });

  test('is shown once and kept as a hash', async () => {
    const { secret, token } = await make('read');
    expect(secret).toMatch(/^lp_[A-Za-z0-9_-]{43}$/);
    expect(token).toMatchObject({
      name: 'A read script',
      scope: 'read',
      workspaceName: null,
      revokedAt: null,
    });
    expect(secret.startsWith(token.prefix)).toBe(true);
    const listed = await architect.get('/api/account/tokens').expect(200);
    expect(apiTokenListSchema.parse(listed.body).tokens.map(({ id }) => id)).toContain(token.id);
    expect(JSON.stringify(listed.body)).not.toContain(secret);
    const { knex } = application.database;
    const row = await knex('api_tokens').where({ id: token.id }).first<{ token_hash: Buffer }>();
    expect(row.token_hash.equals(createHash('sha256').update(secret).digest())).toBe(true);
    expect(JSON.stringify(row)).not.toContain(secret.slice(9));
    expect(application.logged()).not.toContain(secret);
  });

  test('is seen by nobody else: neither another person nor an owner of the workspace', async () => {
    const { token } = await make('read');
    const owner = await signIn(application, workspace.people.owner);
    expect(JSON.stringify((await owner.get('/api/account/tokens')).body)).not.toContain(token.id);
    await owner.delete(`/api/account/tokens/${token.id}`).expect(404);
    const people = await owner.get(`/api/workspaces/${workspace.id}/people`).expect(200);
    expect(JSON.stringify(people.body)).not.toMatch(/token/i);
  });

  test('reads where it may read, and notes its use', async () => {
    const { secret, token } = await make('read');
    await send(secret, 'get', `/api/designs/${designId}`).expect(200);
    const reached = await send(secret, 'get', '/api/workspaces').expect(200);
    expect(workspaceListSchema.parse(reached.body).workspaces).toMatchObject([
      { workspaceId: workspace.id, role: 'architect' },
    ]);
    const listed = apiTokenListSchema.parse((await architect.get('/api/account/tokens')).body).tokens;
    expect(listed.find(({ id }) => id === token.id)?.lastUsedAt).toBe(now.toISOString());
  });

  test('needs no proof that a page sent the request, sets no cookie, and does not lean on one', async () => {
    const { secret } = await make('write');
    const answer = await rename(secret).expect(200);
    expect(answer.headers['set-cookie']).toBeUndefined();
    // A cookie beside it is not looked at.
    const beside = await architect.agent
      .patch(`/api/designs/${designId}`)
      .set('Authorization', `Bearer ${secret}x`)
      .send({ title: 'Renamed' });
    expect(beside.status).toBe(401);
  });

  test('of the scope read writes nothing, and says what would', async () => {
    const { secret } = await make('read');
    const refused = await rename(secret).expect(403);
    expect(refused.body).toMatchObject({
      code: 'not-allowed',
      message: expect.stringContaining('make one that may write') as string,
    });
    await send(secret, 'post', `/api/engagements/${engagementId}/designs`)
      .send({ title: 'New', from: { kind: 'empty' } })
      .expect(403);
  });

  test('for one workspace finds no other, whether it reads or writes within a transaction', async () => {
    const { architect: person } = workspace.people;
    const elsewhere = await addWorkspace(application);
    await insertMembership(application.database.knex, elsewhere.id, person.id, 'architect');
    const otherEngagement = await addEngagement(application, elsewhere.id);
    const otherDesign = await addDesign(application, otherEngagement);
    const { secret } = await make('write', workspace.id);
    await rename(secret).expect(200);
    const patches = { baseSequence: 0, edits: [{ editId: crypto.randomUUID(), patch: { meta: {} } }] };
    const refused = await Promise.all([
      send(secret, 'get', `/api/designs/${otherDesign}`),
      send(secret, 'post', `/api/designs/${otherDesign}/patches`).send(patches),
      send(secret, 'patch', `/api/engagements/${otherEngagement}`).send({ name: 'Renamed' }),
      send(secret, 'get', `/api/workspaces/${elsewhere.id}/engagements`),
    ]);
    for (const { status, body } of refused) {
      expect(status).toBe(404);
      expect(body).toMatchObject({ code: 'not-found' });
    }
    const reached = await send(secret, 'get', '/api/workspaces');
    expect(workspaceListSchema.parse(reached.body).workspaces.map(({ workspaceId }) => workspaceId)).toEqual([
      workspace.id,
    ]);
    // A token for all reaches both; requests side by side keep their own limits.
    const everywhere = await make('write');
    const [inside, outside] = await Promise.all([
      send(everywhere.secret, 'get', `/api/designs/${otherDesign}`),
      send(secret, 'get', `/api/designs/${otherDesign}`),
    ]);
    expect([inside.status, outside.status]).toEqual([200, 404]);
  });

  test('never may more than its owner, now and not when it was made', async () => {
    const { secret } = await make('write');
    const { architect: person } = workspace.people;
    const { knex } = application.database;
    const setRole = (role: string) =>
      knex('memberships').where({ workspace_id: workspace.id, person_id: person.id }).update({ role });
    await setRole('reviewer');
    await rename(secret).expect(403);
    await send(secret, 'get', `/api/designs/${designId}`).expect(200);
    await setRole('installer');
    await send(secret, 'get', `/api/designs/${designId}`).expect(403);
    await setRole('architect');
    await rename(secret).expect(200);
  });

  test('of an owner manages neither people nor the workspace, and opens no account', async () => {
    const owner = await signIn(application, workspace.people.owner);
    const { secret } = await make('write', null, owner);
    const { people } = workspace;
    const refused = await Promise.all([
      send(secret, 'patch', `/api/workspaces/${workspace.id}`).send({ name: 'Taken' }),
      send(secret, 'get', `/api/workspaces/${workspace.id}`),
      send(secret, 'delete', `/api/workspaces/${workspace.id}/people/${people.presales.id}`),
      send(secret, 'get', '/api/session'),
      send(secret, 'put', '/api/account/password').send({ current: testPassword, next: 'another password' }),
      send(secret, 'get', '/api/account/sessions'),
      send(secret, 'post', '/api/account/tokens').send({}),
      send(secret, 'post', '/api/account/deletion').send({ password: testPassword }),
      send(secret, 'post', '/api/workspaces').send({ name: 'Taken' }),
    ]);
    for (const { status, body } of refused) {
      expect(status).toBe(403);
      expect(body).toMatchObject({
        code: 'not-allowed',
        message: expect.stringContaining('token') as string,
      });
    }
  });

  test('that is revoked, over, unknown or no token is refused with the reason', async () => {
    const { secret, token } = await make('read');
    const path = `/api/designs/${designId}`;
    const wordsOf = async (request: supertest.Test): Promise<string> => {
      const answer = await request.expect(401);
      expect(answer.headers['www-authenticate']).toBe('Bearer error="invalid_token"');
      expect(answer.body).toMatchObject({ code: 'not-signed-in' });
      return (answer.body as { message: string }).message;
    };
    const lastDay = daysAhead(30);
    now = new Date(Date.parse(`${lastDay}T23:59:59Z`));
    await send(secret, 'get', path).expect(200);
    now = new Date(now.getTime() + 1000);
    expect(await wordsOf(send(secret, 'get', path))).toContain(`ended with ${lastDay}`);
    now = new Date();
    await architect.delete(`/api/account/tokens/${token.id}`).expect(200);
    expect(await wordsOf(send(secret, 'get', path))).toContain('was revoked on');
    expect(await wordsOf(send(`${secret.slice(0, -1)}~`, 'get', path))).toContain('not known here');
    expect(await wordsOf(send('two words', 'get', path))).toContain('no Bearer token');
  });

  test('is guessed at so many times from one address, and used so many times a minute', async () => {
    const path = `/api/designs/${designId}`;
    for (let guess = 0; guess < allowances.badToken.times; guess += 1)
      await send('lp_guess', 'get', path).expect(401);
    await send('lp_guess', 'get', path).expect(429);
    // A good one is not held up by its neighbour's guesses.
    const { secret, token } = await make('read');
    await send(secret, 'get', path).expect(200);
    await application.database
      .knex('rate_limits')
      .where({ key: `tokenRequest:${token.id}` })
      .update({ points: allowances.tokenRequest.times });
    await send(secret, 'get', path).expect(429);
  });

  test.each([
    ['a day that is past', { expiresOn: '2020-01-01' }, 'expiresOn'],
    ['a day more than a year away', { expiresOn: daysAhead(367) }, 'expiresOn'],
    ['a scope that there is not', { scope: 'admin' }, 'scope'],
    ['no name', { name: ' ' }, 'name'],
  ])('is not made with %s', async (_case, wrong, field) => {
    const body = { name: 'Script', scope: 'read', workspaceId: null, expiresOn: daysAhead(1), ...wrong };
    const refused = await architect.post('/api/account/tokens', body).expect(400);
    expect(refused.body).toMatchObject({ details: [{ path: field }] });
  });

  test('is not made for a workspace that one is not in', async () => {
    const elsewhere = await addWorkspace(application);
    const body = { name: 'Script', scope: 'read', workspaceId: elsewhere.id, expiresOn: daysAhead(1) };
    await architect.post('/api/account/tokens', body).expect(404);
  });
});

describe('deleting one’s account', () => {
  async function member(role: 'owner' | 'architect', workspaceId: string, name: string): Promise<TestPerson> {
    const person = await addPerson(application.database, name);
    await insertMembership(application.database.knex, workspaceId, person.id, role);
    return person;
  }

  test('asks for the password, ends every way in, and leaves the name on what was done', async () => {
    const workspace = await addWorkspace(application);
    const person = await member('architect', workspace.id, 'Leaving Person');
    const { knex } = application.database;
    const engagementId = await addEngagement(application, workspace.id);
    const browser = await signIn(application, person);
    const elsewhere = await signIn(application, person);
    const made = await browser
      .post(`/api/engagements/${engagementId}/designs`, { title: 'Theirs', from: { kind: 'empty' } })
      .expect(201);
    const { id: designId } = made.body as { id: string };
    const patch = { meta: { documentType: 'Plan' } };
    await browser
      .post(`/api/designs/${designId}/patches`, {
        baseSequence: 0,
        edits: [{ editId: crypto.randomUUID(), patch }],
      })
      .expect(200);
    const token = createdApiTokenSchema.parse(
      (
        await browser.post('/api/account/tokens', {
          name: 'Script',
          scope: 'read',
          workspaceId: null,
          expiresOn: daysAhead(1),
        })
      ).body,
    );

    const wrong = await browser.post('/api/account/deletion', { password: 'wrong' }).expect(403);
    expect(wrong.body).toMatchObject({ code: 'wrong-credentials', details: [{ path: 'password' }] });
    await browser.post('/api/account/deletion', { password: testPassword }).expect(204);

    for (const each of [browser, elsewhere]) await each.get('/api/account/sessions').expect(401);
    await supertest(application.server)
      .get('/api/workspaces')
      .set('Authorization', `Bearer ${token.secret}`)
      .expect(401);
    const stranger = await openBrowser(application);
    await stranger.post('/api/session', { email: person.email, password: testPassword }).expect(401);
    expect(await knex('people').where({ id: person.id }).first()).toMatchObject({
      name: 'Leaving Person (left)',
      email: null,
      password_hash: null,
    });
    expect(await knex('memberships').where({ person_id: person.id })).toEqual([]);

    const owner = await signIn(application, workspace.people.owner);
    const patches = await owner.get(`/api/designs/${designId}/patches?after=0`).expect(200);
    expect(patches.body).toMatchObject({ patches: [{ by: 'Leaving Person (left)' }] });
    expect(await knex('activity').where({ workspace_id: workspace.id, action: 'person.left' })).toMatchObject(
      [{ person_name: 'Leaving Person', object_name: 'Leaving Person' }],
    );
    // The address is free for somebody new.
    await knex('people').insert({ name: 'New Person', email: person.email, password_hash: 'none' });
  });

  test('is refused to the last owner of a workspace with others in it, with the way out', async () => {
    const workspace = await addWorkspace(application);
    const browser = await signIn(application, workspace.people.owner);
    const preview = deletionPreviewSchema.parse((await browser.get('/api/account/deletion')).body);
    expect(preview).toMatchObject({
      lastOwnerOf: [{ workspaceId: workspace.id }],
      aloneIn: [],
      needsCode: false,
    });
    const refused = await browser.post('/api/account/deletion', { password: testPassword }).expect(409);
    expect(refused.body).toMatchObject({
      message: expect.stringContaining('make one of them an owner') as string,
    });
    await browser
      .patch(`/api/workspaces/${workspace.id}/people/${workspace.people.architect.id}`, { role: 'owner' })
      .expect(200);
    await browser.post('/api/account/deletion', { password: testPassword }).expect(204);
  });

  test('takes along workspaces that nobody else is in, after saying so', async () => {
    const { knex } = application.database;
    const workspaceId = await insertWorkspace(knex, 'Alone');
    const person = await member('owner', workspaceId, 'Lone Person');
    await addDesign(application, await addEngagement(application, workspaceId));
    const browser = await signIn(application, person);
    const preview = deletionPreviewSchema.parse((await browser.get('/api/account/deletion')).body);
    expect(preview).toMatchObject({ lastOwnerOf: [], aloneIn: [{ workspaceId, workspaceName: 'Alone' }] });
    await browser.post('/api/account/deletion', { password: testPassword }).expect(204);
    expect(await knex('workspaces').where({ id: workspaceId })).toEqual([]);
  });

  test('of two last owners at once leaves one of them', async () => {
    const { knex } = application.database;
    const workspaceId = await insertWorkspace(knex, 'Shared');
    const owners = [
      await member('owner', workspaceId, 'One Owner'),
      await member('owner', workspaceId, 'Other Owner'),
    ];
    await member('architect', workspaceId, 'Some Architect');
    const browsers = [await signIn(application, owners[0]!), await signIn(application, owners[1]!)];
    const answers = await Promise.all(
      browsers.map((browser) => browser.post('/api/account/deletion', { password: testPassword })),
    );
    expect(answers.map(({ status }) => status).sort()).toEqual([204, 409]);
    const left = await knex('memberships').where({ workspace_id: workspaceId, role: 'owner' });
    expect(left).toHaveLength(1);
  });
});
