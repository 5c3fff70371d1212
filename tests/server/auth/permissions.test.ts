import { readFileSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import type { Test } from 'supertest';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { Action, Role } from '#contract/session.ts';
import { noPools } from '#contract/numbering.ts';
import { actions, roles } from '#contract/session.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import type { Access, Route } from '../../../server/auth/permissions.ts';
import { permissions, permits, routes } from '../../../server/auth/permissions.ts';
import { insertProfile } from '../../../server/repositories/equipment-profiles.ts';
import { pairDesign } from '../../support/designs.ts';
import type { TestApplication, TestBrowser, TestWorkspace } from '../../support/test-application.ts';
import {
  addDesign,
  addEngagement,
  addWorkspace,
  openBrowser,
  signIn,
  startTestApplication,
  testPassword,
} from '../../support/test-application.ts';

let application: TestApplication;
let workspace: TestWorkspace;
let engagementId: string;
let designId: string;
let waiverId: string;
let commentId: string;
let profileId: string;
let reviewedId: string;
let revisionId: string;
let stranger: TestBrowser;
let nobody: TestBrowser;
const members = {} as { [role in Role]: TestBrowser };

beforeAll(async () => {
  application = await startTestApplication();
  workspace = await addWorkspace(application);
  engagementId = await addEngagement(application, workspace.id);
  designId = await addDesign(application, engagementId, document);
  reviewedId = await addDesign(application, engagementId);
  revisionId = reviewedId;
  for (const role of roles) members[role] = await signIn(application, workspace.people[role]);
  const made = await requests['POST /api/designs/:designId/waivers'](members.reviewer, ids()).expect(201);
  waiverId = (made.body as { id: string }).id;
  profileId = await insertProfile(
    application.database.knex,
    workspace.id,
    { name: 'Theirs' },
    null,
    new Date(),
  );
  const elsewhere = await addWorkspace(application);
  stranger = await signIn(application, elsewhere.people.owner);
  nobody = await openBrowser(application);
});
afterAll(() => application.close());

const missingId = '00000000-0000-4000-8000-000000000000';
const missing: Ids = {
  workspace: missingId,
  engagement: missingId,
  design: missingId,
  waiver: missingId,
  comment: missingId,
  reviewed: missingId,
  revision: missingId,
  profile: missingId,
};

const document = applyPatch(pairDesign(), { tunnels: { 'tn-s0-s1-a': { b: { vni: 777 } } } });
const finding = runRules(document)[0]!;

interface Ids {
  readonly workspace: string;
  readonly engagement: string;
  readonly design: string;
  readonly waiver: string;
  readonly comment: string;
  readonly reviewed: string;
  readonly revision: string;
  readonly profile: string;
}

/** A request to each route that succeeds for whoever may make it. */
const requests: { readonly [route in Route]: (browser: TestBrowser, ids: Ids) => Test } = {
  'GET /api/health': (browser) => browser.get('/api/health'),
  'POST /api/engine/check': (browser) => browser.post('/api/engine/check', { design: {} }),
  'POST /api/engine/wire': (browser) =>
    browser.post('/api/engine/wire', { stack: {}, innerPacketBytes: 1500 }),
  'POST /api/engine/load': (browser) => browser.post('/api/engine/load', { design: {} }),
  'POST /api/engine/outage': (browser) =>
    browser.post('/api/engine/outage', { design: {}, failed: [{ collection: 'sites', id: 's0' }] }),
  'POST /api/engine/rules': (browser) => browser.post('/api/engine/rules', {}),
  'POST /api/engine/trace': (browser) => browser.post('/api/engine/trace', { design: {}, probe: {} }),
  'GET /api/session': (browser) => browser.get('/api/session'),
  'POST /api/session': (browser) =>
    browser.post('/api/session', { email: 'nobody@ternwick.example', password: testPassword }),
  'POST /api/session/demo': (browser) => browser.post('/api/session/demo', { role: 'owner' }),
  'DELETE /api/session': (browser) => browser.delete('/api/session'),
  'PUT /api/account/password': (browser) =>
    browser.put('/api/account/password', { current: testPassword, next: testPassword }),
  'GET /api/workspaces/:workspaceId/engagements': (browser, { workspace: id }) =>
    browser.get(`/api/workspaces/${id}/engagements`),
  'POST /api/workspaces/:workspaceId/engagements': (browser, { workspace: id }) =>
    browser.post(`/api/workspaces/${id}/engagements`, { name: 'New' }),
  'PATCH /api/engagements/:engagementId': (browser, { engagement: id }) =>
    browser.patch(`/api/engagements/${id}`, { name: 'Renamed' }),
  'POST /api/engagements/:engagementId/designs': (browser, { engagement: id }) =>
    browser.post(`/api/engagements/${id}/designs`, { title: 'New', from: { kind: 'empty' } }),
  'GET /api/designs/:designId': (browser, { design: id }) => browser.get(`/api/designs/${id}`),
  'PATCH /api/designs/:designId': (browser, { design: id }) =>
    browser.patch(`/api/designs/${id}`, { title: 'Renamed' }),
  'GET /api/designs/:designId/patches': (browser, { design: id }) =>
    browser.get(`/api/designs/${id}/patches?after=0`),
  'POST /api/designs/:designId/patches': (browser, { design: id }) =>
    browser.post(`/api/designs/${id}/patches`, {
      baseSequence: 0,
      edits: [{ editId: crypto.randomUUID(), patch: { meta: { documentType: 'Plan' } } }],
    }),
  'GET /api/designs/:designId/thumbnail': (browser, { design: id }) =>
    browser.get(`/api/designs/${id}/thumbnail?v=0&theme=paper`),
  'GET /api/designs/:designId/sheet.svg': (browser, { design: id }) =>
    browser.get(`/api/designs/${id}/sheet.svg`),
  'GET /api/designs/:designId/sheet.pdf': (browser, { design: id }) =>
    browser.get(`/api/designs/${id}/sheet.pdf`),
  'GET /api/designs/:designId/context': (browser, { design: id }) =>
    browser.get(`/api/designs/${id}/context`),
  'GET /api/designs/:designId/waivers': (browser, { design: id }) =>
    browser.get(`/api/designs/${id}/waivers`),
  'POST /api/designs/:designId/waivers': (browser, { design: id }) =>
    browser.post(`/api/designs/${id}/waivers`, {
      findingKey: finding.key,
      fingerprint: finding.fingerprint,
      reason: 'Agreed',
      expiresOn: new Date().toISOString().slice(0, 10),
    }),
  'DELETE /api/designs/:designId/waivers/:waiverId': (browser, { design: id, waiver }) =>
    browser.delete(`/api/designs/${id}/waivers/${waiver}`),
  'GET /api/designs/:designId/revisions': (browser, { reviewed: id }) =>
    browser.get(`/api/designs/${id}/revisions`),
  'POST /api/designs/:designId/revisions': (browser, { reviewed: id }) =>
    browser.post(`/api/designs/${id}/revisions`, { sequence: reviewedSequence }),
  'GET /api/revisions/:revisionId': (browser, { revision: id }) => browser.get(`/api/revisions/${id}`),
  'POST /api/revisions/:revisionId/withdrawal': (browser, { revision: id }) =>
    browser.post(`/api/revisions/${id}/withdrawal`),
  'POST /api/revisions/:revisionId/decision': (browser, { revision: id }) =>
    browser.post(`/api/revisions/${id}/decision`, { decision: 'send-back', note: 'Name the sites' }),
  'POST /api/revisions/:revisionId/build': (browser, { revision: id }) =>
    browser.post(`/api/revisions/${id}/build`, { builtOn: new Date().toISOString().slice(0, 10) }),
  'POST /api/revisions/:revisionId/supersession': (browser, { revision: id }) =>
    browser.post(`/api/revisions/${id}/supersession`, { reason: 'The customer left' }),
  'POST /api/designs/:designId/draft': (browser, { reviewed: id }) =>
    browser.post(`/api/designs/${id}/draft`),
  'POST /api/designs/:designId/restoration': (browser, { reviewed: id }) =>
    browser.post(`/api/designs/${id}/restoration`, { sequence: 0 }),
  'GET /api/designs/:designId/document': (browser, { design: id }) =>
    browser.get(`/api/designs/${id}/document?sequence=0`),
  'GET /api/designs/:designId/sittings': (browser, { design: id }) =>
    browser.get(`/api/designs/${id}/sittings`),
  'GET /api/designs/:designId/comments': (browser, { design: id }) =>
    browser.get(`/api/designs/${id}/comments`),
  'POST /api/designs/:designId/comments': (browser, { design: id }) =>
    browser.post(`/api/designs/${id}/comments`, { body: 'Why this VNI?' }),
  'PATCH /api/comments/:commentId': (browser, { comment: id }) =>
    browser.patch(`/api/comments/${id}`, { body: 'Why that VNI?' }),
  'DELETE /api/comments/:commentId': (browser, { comment: id }) => browser.delete(`/api/comments/${id}`),
  'POST /api/comments/:commentId/resolution': (browser, { comment: id }) =>
    browser.post(`/api/comments/${id}/resolution`),
  'DELETE /api/comments/:commentId/resolution': (browser, { comment: id }) =>
    browser.delete(`/api/comments/${id}/resolution`),
  'POST /api/comments/:commentId/application': (browser, { comment: id }) =>
    browser.post(`/api/comments/${id}/application`, { editId: crypto.randomUUID() }),
  'GET /api/workspaces/:workspaceId/pools': (browser, { workspace: id }) =>
    browser.get(`/api/workspaces/${id}/pools`),
  'PUT /api/workspaces/:workspaceId/pools': (browser, { workspace: id }) =>
    browser.put(`/api/workspaces/${id}/pools`, { pools: noPools }),
  'GET /api/workspaces/:workspaceId/profiles': (browser, { workspace: id }) =>
    browser.get(`/api/workspaces/${id}/profiles`),
  'POST /api/workspaces/:workspaceId/profiles': (browser, { workspace: id }) =>
    browser.post(`/api/workspaces/${id}/profiles`, { profile: { name: 'New' } }),
  'PATCH /api/profiles/:profileId': (browser, { profile: id }) =>
    browser.patch(`/api/profiles/${id}`, { profile: { name: 'Renamed' } }),
};

let reviewedSequence = 0;

/** Brings the design of the revision routes back to a draft, whatever the last request made of it. */
async function makeDraft(): Promise<void> {
  const { knex } = application.database;
  await knex('revisions').where({ design_id: reviewedId, state: 'in-review' }).update({ state: 'withdrawn' });
  const issued = knex('revisions').where({ design_id: reviewedId }).whereIn('state', ['approved', 'built']);
  await issued.update({ state: 'superseded' });
  await knex('designs').where({ id: reviewedId }).update({ state: 'draft' });
  reviewedSequence = (await knex('designs').where({ id: reviewedId }).first<{ sequence: number }>()).sequence;
}

async function putToReview(): Promise<void> {
  await makeDraft();
  const asked = await requests['POST /api/designs/:designId/revisions'](members.owner, ids()).expect(201);
  revisionId = (asked.body as { id: string }).id;
}

async function makeApproved(): Promise<void> {
  await putToReview();
  const { knex } = application.database;
  await knex('revisions').where({ id: revisionId }).update({ state: 'approved', decided_at: new Date() });
  await knex('designs').where({ id: reviewedId }).update({ state: 'approved' });
}

/** A comment of the member's own, or of the owner's where that role writes none; with a change that nobody applied yet. */
async function writeComment(role: Role): Promise<void> {
  const author = members[permits(role, 'comment.write') ? role : 'owner'];
  const written = await author
    .post(`/api/designs/${designId}/comments`, {
      body: 'Name it so.',
      suggestion: {
        patch: { notes: { [crypto.randomUUID()]: { text: 'As at the near end' } } },
        baseSequence: 0,
      },
    })
    .expect(201);
  commentId = (written.body as { id: string }).id;
}

/** What has to be so before a member's request that succeeds once alone. */
const ready: { readonly [route in Route]?: (role: Role) => Promise<void> } = {
  'PATCH /api/comments/:commentId': writeComment,
  'DELETE /api/comments/:commentId': writeComment,
  'POST /api/comments/:commentId/resolution': writeComment,
  'DELETE /api/comments/:commentId/resolution': writeComment,
  'POST /api/comments/:commentId/application': writeComment,
  'POST /api/designs/:designId/revisions': makeDraft,
  'POST /api/designs/:designId/restoration': makeDraft,
  'GET /api/revisions/:revisionId': makeApproved,
  'POST /api/revisions/:revisionId/withdrawal': putToReview,
  'POST /api/revisions/:revisionId/decision': putToReview,
  'POST /api/revisions/:revisionId/build': makeApproved,
  'POST /api/revisions/:revisionId/supersession': makeApproved,
};

const isAction = (access: Access): access is Action => (actions as readonly string[]).includes(access);
const guarded = (Object.keys(routes) as Route[]).filter((route) => isAction(routes[route]));
const ids = (): Ids => ({
  workspace: workspace.id,
  engagement: engagementId,
  design: designId,
  waiver: waiverId,
  comment: commentId,
  reviewed: reviewedId,
  revision: revisionId,
  profile: profileId,
});

describe('the table of roles', () => {
  test('says what product owners agreed on', () => {
    expect(permissions).toEqual({
      owner: actions,
      architect: [
        'workspace.read',
        'engagement.create',
        'engagement.edit',
        'design.read',
        'design.create',
        'design.edit',
        'design.archive',
        'comment.write',
        'review.ask',
        'design.build',
        'revision.read',
        'share.manage',
        'activity.read',
      ],
      reviewer: [
        'workspace.read',
        'design.read',
        'finding.waive',
        'comment.write',
        'review.decide',
        'revision.read',
        'activity.read',
      ],
      presales: [
        'workspace.read',
        'design.read',
        'design.create',
        'comment.write',
        'revision.read',
        'share.manage',
      ],
      installer: ['workspace.read', 'revision.read'],
    });
  });

  test('is the only way to put up a route', () => {
    const folder = join(import.meta.dirname, '..', '..', '..', 'server', 'routes');
    const files = readdirSync(folder).filter((name) => name !== 'mount-route.ts');
    const source = files.map((name) => readFileSync(join(folder, name), 'utf8')).join('\n');
    expect(source).not.toMatch(/\brouter\s*(\.|\[)/);
    const mounted = [...source.matchAll(/mountRoute\(router, '([^']+)'/g)].map(([, route]) => route);
    expect(mounted.sort()).toEqual(Object.keys(routes).sort());
  });

  test('lists each route that the server answers, and no other', () => {
    expect(Object.keys(requests).sort()).toEqual(Object.keys(routes).sort());
    expect(guarded.length).toBeGreaterThan(Object.keys(routes).length / 2);
  });
});

describe.each(guarded)('%s', (route) => {
  const action = routes[route] as Action;

  test.each(roles)('answers a member by what the role %s may do', async (role) => {
    await ready[route]?.(role);
    const response = await requests[route](members[role], ids());
    if (permits(role, action)) {
      expect(response.status).toBeLessThan(300);
    } else {
      expect(response.status).toBe(403);
      expect(response.body).toMatchObject({ code: 'not-allowed' });
    }
  });

  test('tells a stranger and a member about what does not exist in the same words', async () => {
    const answers = [
      await requests[route](stranger, ids()),
      await requests[route](stranger, missing),
      await requests[route](members.owner, missing),
      await requests[route](members.owner, {
        workspace: 'x',
        engagement: '1; drop',
        design: '../x',
        waiver: '%',
        comment: '?',
        reviewed: '../y',
        revision: '%00',
        profile: "'",
      }),
    ];
    const [first] = answers;
    expect(first!.body).toMatchObject({ code: 'not-found' });
    for (const answer of answers.slice(0, 3)) {
      expect(answer.status).toBe(404);
      expect({ ...(answer.body as object), requestId: '' }).toEqual({
        ...(first!.body as object),
        requestId: '',
      });
    }
    expect(answers[3]!.status).toBe(404);
  });

  test('asks somebody who is not signed in to do so', async () => {
    const response = await requests[route](nobody, ids());
    expect(response.status).toBe(401);
    expect(response.body).toMatchObject({ code: 'not-signed-in' });
  });
});

describe('routes that belong to no workspace', () => {
  test('a password is changed by its owner alone', async () => {
    await requests['PUT /api/account/password'](nobody, ids()).expect(401);
    const response = await requests['PUT /api/account/password'](stranger, ids()).expect(200);
    stranger.csrfToken = (response.body as { csrfToken: string }).csrfToken;
  });

  test.each([
    ['GET /api/health', 200],
    ['POST /api/engine/check', 422],
    ['POST /api/engine/wire', 200],
    ['POST /api/engine/load', 422],
    ['POST /api/engine/outage', 422],
    ['POST /api/engine/rules', 200],
    ['POST /api/engine/trace', 400],
    ['GET /api/session', 200],
    ['POST /api/session', 401],
    ['POST /api/session/demo', 404],
  ] as const)('%s answers everybody', async (route, status) => {
    await requests[route](nobody, ids()).expect(status);
  });

  test('signing out answers everybody', async () => {
    await requests['DELETE /api/session'](await openBrowser(application), ids()).expect(204);
  });
});

test('somebody whose role is taken away loses the right with the next request', async () => {
  const { architect } = workspace.people;
  const { knex } = application.database;
  const setRole = (role: Role) =>
    knex('memberships').where({ workspace_id: workspace.id, person_id: architect.id }).update({ role });
  const save = () => requests['POST /api/designs/:designId/patches'](members.architect, ids());
  const countPatches = async () => (await knex('design_patches').where({ design_id: designId })).length;
  await save().expect(200);
  const before = await countPatches();
  await setRole('reviewer');
  await save().expect(403);
  await knex('memberships').where({ workspace_id: workspace.id, person_id: architect.id }).delete();
  await save().expect(404);
  expect(await countPatches()).toBe(before);
});
