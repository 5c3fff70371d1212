import { readFileSync, readdirSync } from 'node:fs';
import type { IncomingMessage } from 'node:http';
import { join } from 'node:path';
import type { Test } from 'supertest';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { Action, Role } from '#contract/session.ts';
import { defaultMailSettings } from '#contract/mail-settings.ts';
import { noPools } from '#contract/numbering.ts';
import { actions, roles } from '#contract/session.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import type { Access, Route } from '../../../server/auth/permissions.ts';
import { permissions, permits, routes } from '../../../server/auth/permissions.ts';
import { keepCaughtMail } from '../../../server/repositories/caught-mails.ts';
import { insertProfile } from '../../../server/repositories/equipment-profiles.ts';
import { insertMembership, insertWorkspace } from '../../../server/repositories/memberships.ts';
import { pairDesign } from '../../support/designs.ts';
import type { TestApplication, TestBrowser, TestWorkspace } from '../../support/test-application.ts';
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
let workspace: TestWorkspace;
let doomedId: string;
let engagementId: string;
let designId: string;
let waiverId: string;
let commentId: string;
let profileId: string;
let reviewedId: string;
let revisionId: string;
let shareId: string;
let spareMemberId: string;
let invitationId: string;
let mailId: string;
let stranger: TestBrowser;
let nobody: TestBrowser;
const members = {} as { [role in Role]: TestBrowser };

beforeAll(async () => {
  application = await startTestApplication();
  workspace = await addWorkspace(application);
  engagementId = await addEngagement(application, workspace.id);
  designId = await addDesign(application, engagementId, document);
  reviewedId = await addDesign(application, engagementId);
  await makeDoomed();
  revisionId = reviewedId;
  shareId = reviewedId;
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
  spareMemberId = (await addPerson(application.database, 'Spare Member')).id;
  await insertMembership(application.database.knex, workspace.id, spareMemberId, 'installer');
  const invite = requests['POST /api/workspaces/:workspaceId/invitations'];
  const invited = await invite(members.owner, ids()).expect(201);
  invitationId = (invited.body as { id: string }).id;
  mailId = await keepMail();
  const elsewhere = await addWorkspace(application);
  stranger = await signIn(application, elsewhere.people.owner);
  nobody = await openBrowser(application);
});
afterAll(() => application.close());

const missingId = '00000000-0000-4000-8000-000000000000';
const missing: Ids = {
  workspace: missingId,
  doomed: missingId,
  engagement: missingId,
  design: missingId,
  waiver: missingId,
  comment: missingId,
  reviewed: missingId,
  revision: missingId,
  share: missingId,
  profile: missingId,
  person: missingId,
  invitation: missingId,
  mail: missingId,
};

const document = applyPatch(pairDesign(), { tunnels: { 'tn-s0-s1-a': { b: { vni: 777 } } } });
const finding = runRules(document)[0]!;

interface Ids {
  readonly workspace: string;
  /** One to delete. */
  readonly doomed: string;
  readonly engagement: string;
  readonly design: string;
  readonly waiver: string;
  readonly comment: string;
  readonly reviewed: string;
  readonly revision: string;
  readonly share: string;
  readonly profile: string;
  readonly person: string;
  readonly invitation: string;
  readonly mail: string;
}

const wrongProof = { code: '000000', password: 'wrong' };

/** A request to each route that succeeds for whoever may make it. */
const requests: { readonly [route in Route]: (browser: TestBrowser, ids: Ids) => Test } = {
  'GET /api/health': (browser) => browser.get('/api/health'),
  'GET /api/openapi.json': (browser) => browser.get('/api/openapi.json'),
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
  'POST /api/session/second-step': (browser) => browser.post('/api/session/second-step', { code: '000000' }),
  'GET /api/account/second-step': (browser) => browser.get('/api/account/second-step'),
  'POST /api/account/second-step': (browser) => browser.post('/api/account/second-step'),
  'PUT /api/account/second-step': (browser) => browser.put('/api/account/second-step', wrongProof),
  'POST /api/account/second-step/off': (browser) => browser.post('/api/account/second-step/off', wrongProof),
  'POST /api/account/second-step/recovery-codes': (browser) =>
    browser.post('/api/account/second-step/recovery-codes', wrongProof),
  'GET /api/account/sessions': (browser) => browser.get('/api/account/sessions'),
  'DELETE /api/account/sessions': (browser) => browser.delete('/api/account/sessions'),
  'DELETE /api/account/sessions/:sessionId': (browser) =>
    browser.delete(`/api/account/sessions/${missingId}`),
  'GET /api/account/tokens': (browser) => browser.get('/api/account/tokens'),
  'POST /api/account/tokens': (browser) =>
    browser.post('/api/account/tokens', {
      name: 'Nightly checks',
      scope: 'read',
      workspaceId: null,
      expiresOn: new Date().toISOString().slice(0, 10),
    }),
  'DELETE /api/account/tokens/:tokenId': (browser) => browser.delete(`/api/account/tokens/${missingId}`),
  'GET /api/account/deletion': (browser) => browser.get('/api/account/deletion'),
  'POST /api/account/deletion': (browser) => browser.post('/api/account/deletion', { password: 'wrong' }),
  'GET /api/first-owner': (browser) => browser.get('/api/first-owner'),
  'POST /api/first-owner': (browser) =>
    browser.post('/api/first-owner', {
      code: '0000',
      name: 'Mara Tadese',
      email: 'm.tadese@ternwick.example',
      password: testPassword,
      workspaceName: 'Ternwick Net',
    }),
  'GET /api/workspaces': (browser) => browser.get('/api/workspaces'),
  'POST /api/workspaces': (browser) => browser.post('/api/workspaces', { name: 'Another' }),
  'GET /api/workspaces/:workspaceId': (browser, { workspace: id }) => browser.get(`/api/workspaces/${id}`),
  'PATCH /api/workspaces/:workspaceId': (browser, { workspace: id }) =>
    browser.patch(`/api/workspaces/${id}`, { name: 'Renamed' }),
  'GET /api/workspaces/:workspaceId/export': (browser, { workspace: id }) =>
    browser.get(`/api/workspaces/${id}/export`),
  'POST /api/workspaces/:workspaceId/deletion': (browser, { doomed: id }) =>
    browser.post(`/api/workspaces/${id}/deletion`, { name: 'Doomed', password: testPassword }),
  'GET /api/workspaces/:workspaceId/people': (browser, { workspace: id }) =>
    browser.get(`/api/workspaces/${id}/people`),
  'PATCH /api/workspaces/:workspaceId/people/:personId': (browser, { workspace: id, person }) =>
    browser.patch(`/api/workspaces/${id}/people/${person}`, { role: 'presales' }),
  'DELETE /api/workspaces/:workspaceId/people/:personId': (browser, { workspace: id, person }) =>
    browser.delete(`/api/workspaces/${id}/people/${person}`),
  'GET /api/workspaces/:workspaceId/activity': (browser, { workspace: id }) =>
    browser.get(`/api/workspaces/${id}/activity`),
  'GET /api/workspaces/:workspaceId/activity.csv': (browser, { workspace: id }) =>
    browser.get(`/api/workspaces/${id}/activity.csv`),
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
  'GET /api/designs/:designId/live': (browser, { design: id }) =>
    browser
      .get(`/api/designs/${id}/live?connectionId=${missingId}`)
      // A stream never ends by itself.
      .parse((answer, done) => {
        const response = answer as unknown as IncomingMessage;
        if (response.statusCode === 200) response.destroy();
        let text = '';
        response.on('data', (chunk) => (text += String(chunk)));
        response.on('close', () =>
          done(null, text === '' || response.statusCode === 200 ? {} : JSON.parse(text)),
        );
      }),
  'PUT /api/designs/:designId/presence': (browser, { design: id }) =>
    browser.put(`/api/designs/${id}/presence`, {
      connectionId: crypto.randomUUID(),
      place: { page: 'sheet', selection: [], view: null },
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
  'GET /api/revisions/:revisionId/sheet.svg': (browser, { revision: id }) =>
    browser.get(`/api/revisions/${id}/sheet.svg`),
  'GET /api/revisions/:revisionId/sheet.pdf': (browser, { revision: id }) =>
    browser.get(`/api/revisions/${id}/sheet.pdf`),
  'GET /api/designs/:designId/shares': (browser, { reviewed: id }) =>
    browser.get(`/api/designs/${id}/shares`),
  'POST /api/designs/:designId/shares': (browser, { reviewed: id, revision }) =>
    browser.post(`/api/designs/${id}/shares`, {
      revisionId: revision,
      label: 'Saltmarsh Ferries',
      expiresOn: new Date().toISOString().slice(0, 10),
      showsAddresses: false,
      showsFindings: false,
    }),
  'DELETE /api/shares/:shareId': (browser, { share: id }) => browser.delete(`/api/shares/${id}`),
  'POST /api/share': (browser) => browser.post('/api/share', { token: 'x'.repeat(43) }),
  'POST /api/share/sheet': (browser) => browser.post('/api/share/sheet', { token: 'x'.repeat(43) }),
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
  'GET /api/account/mail': (browser) => browser.get('/api/account/mail'),
  'PUT /api/account/mail': (browser) => browser.put('/api/account/mail', defaultMailSettings),
  'POST /api/password-reset': (browser) =>
    browser.post('/api/password-reset', { email: 'nobody@ternwick.example' }),
  'POST /api/password-reset/link': (browser) => browser.post('/api/password-reset/link', { token: 'none' }),
  'POST /api/password-reset/password': (browser) =>
    browser.post('/api/password-reset/password', { token: 'none', password: testPassword }),
  'POST /api/invitation': (browser) => browser.post('/api/invitation', { token: 'none' }),
  'POST /api/invitation/acceptance': (browser) =>
    browser.post('/api/invitation/acceptance', { token: 'none' }),
  'GET /api/workspaces/:workspaceId/invitations': (browser, { workspace: id }) =>
    browser.get(`/api/workspaces/${id}/invitations`),
  'POST /api/workspaces/:workspaceId/invitations': (browser, { workspace: id }) =>
    browser.post(`/api/workspaces/${id}/invitations`, {
      email: `${crypto.randomUUID()}@ternwick.example`,
      role: 'installer',
    }),
  'POST /api/workspaces/:workspaceId/invitations/:invitationId/mail': (
    browser,
    { workspace: id, invitation },
  ) => browser.post(`/api/workspaces/${id}/invitations/${invitation}/mail`),
  'DELETE /api/workspaces/:workspaceId/invitations/:invitationId': (browser, { workspace: id, invitation }) =>
    browser.delete(`/api/workspaces/${id}/invitations/${invitation}`),
  'GET /api/workspaces/:workspaceId/mailbox': (browser, { workspace: id }) =>
    browser.get(`/api/workspaces/${id}/mailbox`),
  'GET /api/workspaces/:workspaceId/mailbox/:mailId': (browser, { workspace: id, mail }) =>
    browser.get(`/api/workspaces/${id}/mailbox/${mail}`),
  'GET /api/workspaces/:workspaceId/mailbox/:mailId/page': (browser, { workspace: id, mail }) =>
    browser.get(`/api/workspaces/${id}/mailbox/${mail}/page`),
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

/** What a catcher kept of the invitation that was just sent. */
async function keepMail(): Promise<string> {
  const { knex } = application.database;
  const messageId = '<kept@mail.example>';
  await knex('mails').where({ workspace_id: workspace.id }).update({ message_id: messageId });
  const words = { from: '', to: '', subject: '', text: '', html: '', source: '' };
  await keepCaughtMail(knex, { messageId, ...words });
  return (await knex('caught_mails').first<{ mail_id: string }>('mail_id')).mail_id;
}

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

/** A link to an approved revision that nobody has revoked. */
async function makeShare(): Promise<void> {
  await makeApproved();
  const made = await requests['POST /api/designs/:designId/shares'](members.owner, ids()).expect(201);
  shareId = (made.body as { share: { id: string } }).share.id;
}

/** What has to be so before a member's request that succeeds once alone. */
const makeDoomed = async (): Promise<void> => {
  const { knex } = application.database;
  doomedId = await insertWorkspace(knex, 'Doomed');
  for (const role of roles) await insertMembership(knex, doomedId, workspace.people[role].id, role);
};

const ready: { readonly [route in Route]?: (role: Role) => Promise<void> } = {
  'PATCH /api/comments/:commentId': writeComment,
  'DELETE /api/comments/:commentId': writeComment,
  'POST /api/comments/:commentId/resolution': writeComment,
  'DELETE /api/comments/:commentId/resolution': writeComment,
  'POST /api/comments/:commentId/application': writeComment,
  'POST /api/workspaces/:workspaceId/deletion': makeDoomed,
  'POST /api/designs/:designId/revisions': makeDraft,
  'POST /api/designs/:designId/restoration': makeDraft,
  'GET /api/revisions/:revisionId': makeApproved,
  'GET /api/revisions/:revisionId/sheet.svg': makeApproved,
  'GET /api/revisions/:revisionId/sheet.pdf': makeApproved,
  'POST /api/designs/:designId/shares': makeApproved,
  'DELETE /api/shares/:shareId': makeShare,
  'POST /api/revisions/:revisionId/withdrawal': putToReview,
  'POST /api/revisions/:revisionId/decision': putToReview,
  'POST /api/revisions/:revisionId/build': makeApproved,
  'POST /api/revisions/:revisionId/supersession': makeApproved,
};

const isAction = (access: Access): access is Action => (actions as readonly string[]).includes(access);
const guarded = (Object.keys(routes) as Route[]).filter((route) => isAction(routes[route]));
const ids = (): Ids => ({
  workspace: workspace.id,
  doomed: doomedId,
  engagement: engagementId,
  design: designId,
  waiver: waiverId,
  comment: commentId,
  reviewed: reviewedId,
  revision: revisionId,
  share: shareId,
  profile: profileId,
  person: spareMemberId,
  invitation: invitationId,
  mail: mailId,
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
    const mounted = [...source.matchAll(/mountRoute\(\s*router,\s*'([^']+)'/g)].map(([, route]) => route);
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
        doomed: 'x',
        engagement: '1; drop',
        design: '../x',
        waiver: '%',
        comment: '?',
        reviewed: '../y',
        revision: '%00',
        share: '%00',
        profile: "'",
        person: '\\',
        invitation: '-',
        mail: '$',
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
    ['GET /api/account/second-step', 200],
    ['POST /api/account/second-step', 200],
    ['PUT /api/account/second-step', 403],
    ['POST /api/account/second-step/off', 403],
    ['POST /api/account/second-step/recovery-codes', 403],
    ['GET /api/account/sessions', 200],
    ['DELETE /api/account/sessions', 204],
    ['DELETE /api/account/sessions/:sessionId', 404],
    ['GET /api/account/tokens', 200],
    ['POST /api/account/tokens', 201],
    ['DELETE /api/account/tokens/:tokenId', 404],
    ['GET /api/account/deletion', 200],
    ['POST /api/account/deletion', 403],
    ['GET /api/account/mail', 200],
    ['PUT /api/account/mail', 200],
    ['GET /api/workspaces', 200],
    ['POST /api/workspaces', 201],
  ] as const)('%s answers whoever is signed in, and nobody else', async (route, status) => {
    await requests[route](stranger, ids()).expect(status);
    expect((await requests[route](nobody, ids()).expect(401)).body).toMatchObject({ code: 'not-signed-in' });
  });

  test.each([
    ['GET /api/health', 200],
    ['GET /api/openapi.json', 200],
    ['POST /api/engine/check', 422],
    ['POST /api/engine/wire', 200],
    ['POST /api/engine/load', 422],
    ['POST /api/engine/outage', 422],
    ['POST /api/engine/rules', 200],
    ['POST /api/engine/trace', 400],
    ['GET /api/session', 200],
    ['POST /api/session', 401],
    ['POST /api/session/second-step', 409],
    ['GET /api/first-owner', 200],
    ['POST /api/first-owner', 409],
    ['POST /api/session/demo', 404],
    ['POST /api/password-reset', 202],
    ['POST /api/password-reset/link', 404],
    ['POST /api/password-reset/password', 404],
    ['POST /api/share', 404],
    ['POST /api/share/sheet', 404],
    ['POST /api/invitation', 404],
    ['POST /api/invitation/acceptance', 404],
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
