import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { secondStepOfferSchema } from '#contract/account.ts';
import { sessionSchema } from '#contract/session.ts';
import { memberListSchema, workspaceSettingsSchema, type Member } from '#contract/workspaces.ts';
import { allowances } from '../../../server/auth/throttles.ts';
import { insertMembership } from '../../../server/repositories/memberships.ts';
import { codeAt } from '../../support/authenticator.ts';
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
  signIn,
  startTestApplication,
  testPassword,
} from '../../support/test-application.ts';

let application: TestApplication;
let workspace: TestWorkspace;
let owner: TestBrowser;

beforeAll(async () => {
  application = await startTestApplication();
});
afterAll(() => application.close());
beforeEach(async () => {
  await application.database.knex('rate_limits').delete();
  workspace = await addWorkspace(application);
  owner = await signIn(application, workspace.people.owner);
});

const pathOf = (person?: TestPerson): string =>
  `/api/workspaces/${workspace.id}/people${person === undefined ? '' : `/${person.id}`}`;
const listFor = async (browser: TestBrowser): Promise<readonly Member[]> =>
  memberListSchema.parse((await browser.get(pathOf()).expect(200)).body).people;

describe('the people of a workspace', () => {
  test('are listed with role and when they were here; owners alone are told of their second step', async () => {
    const people = await listFor(owner);
    expect(people.map(({ role }) => role).sort()).toEqual([
      'architect',
      'installer',
      'owner',
      'presales',
      'reviewer',
    ]);
    await application.database.settled();
    const again = await listFor(owner);
    const seen = again.find(({ personId }) => personId === workspace.people.owner.id)?.lastSeenAt;
    expect(Math.abs(Date.parse(seen ?? '') - Date.now())).toBeLessThan(30_000);
    expect(again.filter(({ lastSeenAt }) => lastSeenAt === null)).toHaveLength(4);
    expect(people.map(({ hasSecondStep }) => hasSecondStep)).toEqual([false, false, false, false, false]);
    const installer = await signIn(application, workspace.people.installer);
    expect(new Set((await listFor(installer)).map(({ hasSecondStep }) => hasSecondStep))).toEqual(
      new Set([null]),
    );
  });

  test('get another role from an owner, which counts with their next request', async () => {
    const { installer } = workspace.people;
    const designId = await addDesign(application, await addEngagement(application, workspace.id));
    const browser = await signIn(application, installer);
    await browser.get(`/api/designs/${designId}`).expect(403);
    const changed = await owner.patch(pathOf(installer), { role: 'architect' }).expect(200);
    expect(changed.body).toMatchObject({ personId: installer.id, role: 'architect' });
    await browser.get(`/api/designs/${designId}`).expect(200);
    const [note] = await application.database.knex('activity').where({ workspace_id: workspace.id });
    expect(note).toMatchObject({
      action: 'person.role-changed',
      person_id: workspace.people.owner.id,
      object_name: installer.name,
      details: { from: 'installer', to: 'architect' },
    });
    // The same role again is no change.
    await owner.patch(pathOf(installer), { role: 'architect' }).expect(200);
    expect(await application.database.knex('activity').where({ workspace_id: workspace.id })).toHaveLength(1);
    await owner.patch(pathOf(installer), { role: 'king' }).expect(400);
  });

  test('are removed by an owner, and see nothing with their next request', async () => {
    const { architect } = workspace.people;
    const designId = await addDesign(application, await addEngagement(application, workspace.id));
    const browser = await signIn(application, architect);
    await browser.get(`/api/designs/${designId}`).expect(200);
    await owner.delete(pathOf(architect)).expect(204);
    await browser.get(`/api/designs/${designId}`).expect(404);
    await browser.get(pathOf()).expect(404);
    expect(sessionSchema.parse((await browser.get('/api/session')).body)).toMatchObject({
      person: { id: architect.id },
      memberships: [],
    });
    await owner.delete(pathOf(architect)).expect(404);
    expect(await listFor(owner)).toHaveLength(4);
  });

  test('may leave by themselves, whatever their role', async () => {
    const { reviewer, presales } = workspace.people;
    const browser = await signIn(application, reviewer);
    await browser.delete(pathOf(presales)).expect(403);
    await browser.delete(pathOf(reviewer)).expect(204);
    await browser.get(pathOf()).expect(404);
    const [note] = await application.database.knex('activity').where({ workspace_id: workspace.id });
    expect(note).toMatchObject({ action: 'person.left', object_name: reviewer.name });
  });

  test('of another workspace are not found, even by an owner', async () => {
    const elsewhere = await addWorkspace(application);
    const theirs = elsewhere.people.architect;
    await owner.patch(pathOf(theirs), { role: 'reviewer' }).expect(404);
    await owner.delete(pathOf(theirs)).expect(404);
    await owner.delete(`/api/workspaces/${elsewhere.id}/people/${theirs.id}`).expect(404);
  });

  test('always have an owner: the last one neither goes nor takes another role', async () => {
    const own = pathOf(workspace.people.owner);
    for (const request of [owner.delete(own), owner.patch(own, { role: 'architect' })]) {
      const refused = await request.expect(409);
      expect(refused.body).toMatchObject({
        code: 'conflict',
        message: expect.stringContaining('make somebody else an owner first') as string,
      });
    }
    await owner.patch(pathOf(workspace.people.architect), { role: 'owner' }).expect(200);
    await owner.patch(own, { role: 'reviewer' }).expect(200);
    await owner.patch(pathOf(workspace.people.installer), { role: 'owner' }).expect(403);
  });

  test('keep an owner where two remove one another at once, at two processes', async () => {
    const second = await addPerson(application.database, 'Second Owner');
    await insertMembership(application.database.knex, workspace.id, second.id, 'owner');
    const other = await application.another();
    const secondOwner = await signIn(other, second);
    for (let round = 0; round < 3; round += 1) {
      const answers = await Promise.all([
        owner.delete(pathOf(second)),
        secondOwner.delete(pathOf(workspace.people.owner)),
      ]);
      expect(answers.map(({ status }) => status).sort()).toEqual([204, 404]);
      const { knex } = application.database;
      expect(await knex('memberships').where({ workspace_id: workspace.id, role: 'owner' })).toHaveLength(1);
      const removed = answers[0].status === 204 ? second : workspace.people.owner;
      await insertMembership(knex, workspace.id, removed.id, 'owner');
    }
  });
});

describe('a new workspace', () => {
  test('belongs to whoever starts it, who may start only so many a day', async () => {
    const person = await addPerson(application.database, 'Starting Person');
    const browser = await signIn(application, person);
    const made = await browser.post('/api/workspaces', { name: '  Harbour works ' }).expect(201);
    expect(made.body).toMatchObject({ workspaceName: 'Harbour works', role: 'owner' });
    const { workspaceId } = made.body as { workspaceId: string };
    await browser.post(`/api/workspaces/${workspaceId}/engagements`, { name: 'First' }).expect(201);
    await owner.get(`/api/workspaces/${workspaceId}/engagements`).expect(404);
    await browser.post('/api/workspaces', { name: ' ' }).expect(400);
    await application.database
      .knex('rate_limits')
      .where({ key: `workspaceStart:${person.id}` })
      .update({ points: allowances.workspaceStart.times });
    await browser.post('/api/workspaces', { name: 'One more' }).expect(429);
  });
});

describe('the settings of a workspace', () => {
  const path = (): string => `/api/workspaces/${workspace.id}`;
  const session = async (browser: TestBrowser) =>
    sessionSchema.parse((await browser.get('/api/session')).body);

  /** Sets two-step sign-in up for whoever the browser is of. */
  async function secure(browser: TestBrowser): Promise<void> {
    const { secret } = secondStepOfferSchema.parse((await browser.post('/api/account/second-step')).body);
    const proof = { code: codeAt(secret, new Date()), password: testPassword };
    await browser.put('/api/account/second-step', proof).expect(200);
  }

  test('hold its name, and the change is on record', async () => {
    const changed = await owner.patch(path(), { name: 'Renamed works' }).expect(200);
    expect(workspaceSettingsSchema.parse(changed.body)).toEqual({
      id: workspace.id,
      name: 'Renamed works',
      requiresSecondStep: false,
      withoutSecondStep: 5,
    });
    expect((await session(owner)).memberships[0]?.workspaceName).toBe('Renamed works');
    const notes = await application.database.knex('activity').where({ workspace_id: workspace.id });
    expect(notes).toMatchObject([{ action: 'workspace.changed', details: { name: 'Renamed works' } }]);
    await owner.patch(path(), { owner: 'me' }).expect(400);
    const architect = await signIn(application, workspace.people.architect);
    await architect.get(path()).expect(403);
  });

  test('may ask for two-step sign-in: whoever has none stays out, and says so, until they set it up', async () => {
    const refused = await owner.patch(path(), { requiresSecondStep: true }).expect(409);
    expect((refused.body as { message: string }).message).toContain('do so first');
    const designId = await addDesign(application, await addEngagement(application, workspace.id));
    const architect = await signIn(application, workspace.people.architect);
    await secure(owner);
    expect((await owner.patch(path(), { requiresSecondStep: true }).expect(200)).body).toMatchObject({
      requiresSecondStep: true,
      withoutSecondStep: 4,
    });
    for (const wanted of [`/api/designs/${designId}`, pathOf(), `${path()}/engagements`]) {
      const shut = await architect.get(wanted).expect(403);
      expect(shut.body).toMatchObject({ code: 'second-step-required' });
    }
    const edits = [{ editId: crypto.randomUUID(), patch: { meta: { documentType: 'Plan' } } }];
    const save = () => architect.post(`/api/designs/${designId}/patches`, { baseSequence: 0, edits });
    expect((await save().expect(403)).body).toMatchObject({ code: 'second-step-required' });
    expect((await session(architect)).memberships).toMatchObject([{ needsSecondStep: true, actions: [] }]);
    await owner.get(pathOf()).expect(200);

    await secure(architect);
    await save().expect(200);
    expect((await session(architect)).memberships).toMatchObject([{ needsSecondStep: false }]);
    expect((await listFor(owner)).filter(({ hasSecondStep }) => hasSecondStep)).toHaveLength(2);
  });
});
