import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { sessionSchema } from '#contract/session.ts';
import { workspaceExportSchema } from '#contract/workspace-export.ts';
import { pairDesign } from '../../support/designs.ts';
import type { TestApplication, TestBrowser, TestWorkspace } from '../../support/test-application.ts';
import {
  addDesign,
  addEngagement,
  addWorkspace,
  signIn,
  startTestApplication,
  testPassword,
} from '../../support/test-application.ts';

let application: TestApplication;
let workspace: TestWorkspace;
let other: TestWorkspace;
let owner: TestBrowser;
let reviewer: TestBrowser;
let designId: string;
let shareToken: string;

beforeAll(async () => {
  application = await startTestApplication();
  workspace = await addWorkspace(application);
  other = await addWorkspace(application);
  owner = await signIn(application, workspace.people.owner);
  reviewer = await signIn(application, workspace.people.reviewer);
  const architect = await signIn(application, workspace.people.architect);
  designId = await addDesign(application, await addEngagement(application, workspace.id), pairDesign());
  await addDesign(application, await addEngagement(application, other.id));

  const edits = [{ editId: crypto.randomUUID(), patch: { meta: { documentType: 'Plan' } } }];
  await architect.post(`/api/designs/${designId}/patches`, { baseSequence: 0, edits }).expect(200);
  await architect.post(`/api/designs/${designId}/comments`, { body: 'Ready for a look' }).expect(201);
  const { body } = await architect.get(`/api/designs/${designId}`).expect(200);
  const { sequence } = body as { sequence: number };
  const asked = await architect.post(`/api/designs/${designId}/revisions`, { sequence }).expect(201);
  const revisionId = (asked.body as { id: string }).id;
  await reviewer.post(`/api/revisions/${revisionId}/decision`, { decision: 'approve' }).expect(200);
  const shared = await architect
    .post(`/api/designs/${designId}/shares`, {
      revisionId,
      label: 'Saltmarsh Ferries',
      expiresOn: new Date(Date.now() + 7 * 24 * 60 * 60 * 1000).toISOString().slice(0, 10),
      passphrase: 'harbour lights at dusk',
      showsAddresses: false,
      showsFindings: false,
    })
    .expect(201);
  shareToken = /[\w-]{40,}/.exec(JSON.stringify(shared.body))![0];
});
afterAll(() => application.close());

describe('taking a workspace along', () => {
  test('gives everything it holds in one file, and is recorded', async () => {
    const response = await owner.get(`/api/workspaces/${workspace.id}/export`).expect(200);
    expect(response.headers['content-disposition']).toBe('attachment; filename="workspace.json"');
    const told = workspaceExportSchema.parse(response.body);
    expect(told.people).toHaveLength(5);
    expect(told.engagements).toHaveLength(1);
    expect(told.designs.map(({ id }) => id)).toEqual([designId]);
    const [design] = told.designs;
    expect(design).toMatchObject({
      document: { meta: { documentType: 'Plan' }, sites: pairDesign().sites },
      revisions: [{ label: 'A', state: 'approved', document: { sites: pairDesign().sites } }],
      comments: [{ body: 'Ready for a look' }],
      shares: [{ label: 'Saltmarsh Ferries' }],
    });
    expect(design!.patches[0]).toMatchObject({ sequence: 1, patch: { meta: { documentType: 'Plan' } } });
    expect(told.activity.map(({ action }) => action)).toEqual([
      'workspace.exported',
      'share.created',
      'review.approved',
      'review.asked',
      'comment.written',
    ]);
  });

  test('gives no key to anything', async () => {
    const { text } = await owner.get(`/api/workspaces/${workspace.id}/export`).expect(200);
    expect(text).not.toContain(shareToken);
    expect(text).not.toContain('harbour lights');
    expect(text).not.toMatch(/argon2|scrypt|\$2[aby]\$/);
    const keys = new Set<string>();
    JSON.parse(text, (key, value: unknown) => {
      keys.add(key);
      return value;
    });
    expect([...keys].filter((key) => /hash|token|secret|passphrase|password/i.test(key))).toEqual([]);
  });
});

describe('deleting a workspace', () => {
  const remove = (browser: TestBrowser, proof: object) =>
    browser.post(`/api/workspaces/${workspace.id}/deletion`, proof);
  const nameOf = async () =>
    ((await owner.get(`/api/workspaces/${workspace.id}`).expect(200)).body as { name: string }).name;

  test('takes its name and the password, each refused by name', async () => {
    const name = await nameOf();
    const wrongName = await remove(owner, { name: 'Another', password: testPassword }).expect(400);
    expect((wrongName.body as { message: string }).message).toContain(`type ${name} to delete it`);
    const wrongPassword = await remove(owner, { name, password: 'a wrong one' }).expect(403);
    expect(wrongPassword.body).toMatchObject({
      code: 'wrong-credentials',
      details: [{ path: 'password' }],
    });
    await remove(owner, { name, password: testPassword, force: true }).expect(400);
    await remove(reviewer, { name, password: testPassword }).expect(403);
    await owner.get(`/api/designs/${designId}`).expect(200);
  });

  test('leaves nothing of it, and of others everything; sessions go on', async () => {
    await remove(owner, { name: await nameOf(), password: testPassword }).expect(204);
    const { knex } = application.database;
    const left = async (table: string) => Number((await knex(table).count({ count: '*' }))[0]!['count']);
    expect(await left('designs')).toBe(1);
    for (const table of ['revisions', 'design_patches', 'comments', 'shares', 'activity'])
      expect([table, await left(table)]).toEqual([table, 0]);
    expect((await knex('memberships').pluck<string[]>('workspace_id')).every((id) => id === other.id)).toBe(
      true,
    );
    for (const browser of [owner, reviewer]) {
      const { body } = await browser.get(`/api/designs/${designId}`).expect(404);
      expect((body as { message: string }).message).toContain('There is no such design, or it belongs');
      const session = sessionSchema.parse((await browser.get('/api/session').expect(200)).body);
      expect(session.person).not.toBeNull();
      expect(session.memberships).toEqual([]);
    }
  });
});
