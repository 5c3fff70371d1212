import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import {
  designSummarySchema,
  engagementListSchema,
  engagementSchema,
  openDesignSchema,
} from '#contract/designs.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { pairDesign } from '../../support/designs.ts';
import type { TestApplication, TestBrowser, TestWorkspace } from '../../support/test-application.ts';
import {
  addDesign,
  addEngagement,
  addWorkspace,
  signIn,
  startTestApplication,
} from '../../support/test-application.ts';

let application: TestApplication;
let workspace: TestWorkspace;
let architect: TestBrowser;
let now = new Date('2026-03-18T14:36:00Z');

beforeAll(async () => {
  application = await startTestApplication({ clock: () => now });
  workspace = await addWorkspace(application);
  architect = await signIn(application, workspace.people.architect);
});
afterAll(() => application.close());

const list = async (query = '') =>
  engagementListSchema.parse(
    (await architect.get(`/api/workspaces/${workspace.id}/engagements${query}`).expect(200)).body,
  ).engagements;

describe('engagements', () => {
  test('are started, renamed, described, archived and restored', async () => {
    const created = engagementSchema.parse(
      (
        await architect
          .post(`/api/workspaces/${workspace.id}/engagements`, { name: '  Saltmarsh Ferries ' })
          .expect(201)
      ).body,
    );
    expect(created).toMatchObject({ name: 'Saltmarsh Ferries', summary: '', archivedAt: null, designs: [] });
    const path = `/api/engagements/${created.id}`;
    const described = await architect.patch(path, { summary: 'Four terminals' }).expect(200);
    expect(described.body).toMatchObject({ name: 'Saltmarsh Ferries', summary: 'Four terminals' });
    const archived = await architect.patch(path, { archived: true }).expect(200);
    expect(archived.body).toMatchObject({ archivedAt: now.toISOString() });
    expect((await list()).map(({ id }) => id)).not.toContain(created.id);
    expect((await list('?archived=true')).map(({ id }) => id)).toContain(created.id);
    const firstArchivedAt = now.toISOString();
    now = new Date('2026-03-19T08:00:00Z');
    const again = await architect.patch(path, { archived: true }).expect(200);
    expect(again.body).toMatchObject({ archivedAt: firstArchivedAt });
    const restored = await architect.patch(path, { archived: false, name: 'Ferries' }).expect(200);
    expect(restored.body).toMatchObject({ archivedAt: null, name: 'Ferries' });
    expect((await list()).map(({ name }) => name)).toContain('Ferries');
  });

  test('take no field that the contract does not know', async () => {
    const response = await architect
      .post(`/api/workspaces/${workspace.id}/engagements`, {
        name: 'Mine',
        workspaceId: 'x',
        archivedAt: null,
      })
      .expect(400);
    expect((response.body as { details: unknown[] }).details).toHaveLength(2);
    const id = await addEngagement(application, workspace.id);
    await architect.patch(`/api/engagements/${id}`, { workspaceId: workspace.id }).expect(400);
  });

  test.each([
    [{ name: '' }, 'name'],
    [{ name: '   ' }, 'name'],
    [{ name: 'x'.repeat(81) }, 'name'],
    [{ name: 'two\nlines' }, 'name'],
    [{ name: 'nothing\u0000' }, 'name'],
    [{ name: 7 }, 'name'],
    [{ name: 'Fine', summary: 'x'.repeat(201) }, 'summary'],
    [{ name: 'Fine', summary: 'nothing\u0000' }, 'summary'],
    [[], ''],
    [null, ''],
  ])('refuse %j and name what is wrong', async (body, path) => {
    const response = await architect.agent
      .post(`/api/workspaces/${workspace.id}/engagements`)
      .set('X-CSRF-Token', architect.csrfToken)
      .set('Content-Type', 'application/json')
      .send(JSON.stringify(body))
      .expect(400);
    expect(response.body).toMatchObject({ code: 'invalid-request', details: [{ path }] });
  });

  test('refuse a query that they do not know', async () => {
    await architect.get(`/api/workspaces/${workspace.id}/engagements?archived=yes`).expect(400);
    await architect.get(`/api/workspaces/${workspace.id}/engagements?archive=true`).expect(400);
  });
});

describe('designs in an engagement', () => {
  const create = (engagementId: string, from: object, title = 'A title') =>
    architect.post(`/api/engagements/${engagementId}/designs`, { title, from });
  const open = async (id: string) =>
    openDesignSchema.parse((await architect.get(`/api/designs/${id}`).expect(200)).body);

  test('start empty, under their title', async () => {
    const engagementId = await addEngagement(application, workspace.id);
    const summary = designSummarySchema.parse(
      (await create(engagementId, { kind: 'empty' }, ' Phase 1 ').expect(201)).body,
    );
    expect(summary).toMatchObject({
      engagementId,
      title: 'Phase 1',
      state: 'draft',
      counts: { blocking: 0, degrading: 0, advisory: 0 },
      sequence: 0,
      changedAt: now.toISOString(),
      changedBy: workspace.people.architect.name,
    });
    const opened = await open(summary.id);
    expect(opened).toMatchObject({ sequence: 0, workspaceId: workspace.id, summary });
    // Its title block says whose it is and who drew it, so that no export leaves without.
    expect(opened.document).toMatchObject({
      meta: {
        title: 'Phase 1',
        createdBy: workspace.people.architect.name,
        legalOwner: expect.stringMatching(/^Workspace /) as string,
      },
      devices: {},
    });
    expect(opened.actions).toContain('design.edit');
  });

  test.each(['fault-free', 'planted-faults'] as const)('start from the demo: %s', async (demo) => {
    const engagementId = await addEngagement(application, workspace.id);
    const { body } = await create(engagementId, { kind: 'demo', demo }).expect(201);
    const summary = designSummarySchema.parse(body);
    expect(summary.title).toBe('A title');
    expect(summary.counts.blocking > 0).toBe(demo === 'planted-faults');
    const { document } = await open(summary.id);
    expect(parseDesign(document)).toMatchObject({ ok: true });
  });

  test('start as a copy, which is another drawing with another number', async () => {
    const engagementId = await addEngagement(application, workspace.id);
    const original = pairDesign();
    const document = { ...original, meta: { ...original.meta, identification: 'SMF-1', revision: 'C' } };
    const designId = await addDesign(application, engagementId, document);
    const { body } = await create(engagementId, { kind: 'copy', designId }, 'Copy').expect(201);
    const copy = designSummarySchema.parse(body);
    expect(copy).toMatchObject({ title: 'Copy', identification: null, revision: null });
    const opened = await open(copy.id);
    expect(opened.document).toEqual({ ...original, meta: { ...original.meta, title: 'Copy' } });
  });

  test('are not copied from a workspace that one is not in', async () => {
    const elsewhere = await addWorkspace(application);
    const theirs = await addDesign(application, await addEngagement(application, elsewhere.id));
    const engagementId = await addEngagement(application, workspace.id);
    await create(engagementId, { kind: 'copy', designId: theirs }).expect(404);
    await create(engagementId, { kind: 'copy', designId: crypto.randomUUID() }).expect(404);
    await create(engagementId, { kind: 'copy', designId: 'nothing' }).expect(400);
  });

  test('start from a document, every problem of which is named', async () => {
    const engagementId = await addEngagement(application, workspace.id);
    const document = pairDesign();
    const { body } = await create(engagementId, { kind: 'document', document }).expect(201);
    expect((await open(designSummarySchema.parse(body).id)).document).toEqual({
      ...document,
      meta: { ...document.meta, title: 'A title' },
    });
    const broken = { ...document, sites: {}, extra: 1 };
    const refused = await create(engagementId, { kind: 'document', document: broken }).expect(422);
    expect(refused.body).toMatchObject({
      code: 'invalid-design',
      details: [{ path: '', expected: 'no field called extra' }],
    });
    const dangling = await create(engagementId, {
      kind: 'document',
      document: { ...document, sites: {} },
    }).expect(422);
    const { details } = dangling.body as { details: { path: string }[] };
    expect(details.map(({ path }) => path)).toContain('devices.fw-s0.site');
    for (const nothing of [null, 7, 'x', [], {}])
      await create(engagementId, { kind: 'document', document: nothing }).expect(422);
    await create(engagementId, { kind: 'document' }).expect(400);
  });

  test('are not started in an archived engagement', async () => {
    const engagementId = await addEngagement(application, workspace.id);
    await architect.patch(`/api/engagements/${engagementId}`, { archived: true }).expect(200);
    const refused = await create(engagementId, { kind: 'empty' }).expect(409);
    expect(refused.body).toMatchObject({ code: 'conflict' });
  });

  test('stand in the list of their engagement, the last changed first, archived ones when asked for', async () => {
    const engagementId = await addEngagement(application, workspace.id);
    const ids: string[] = [];
    for (const minute of [1, 2, 3]) {
      now = new Date(`2026-03-20T10:0${minute}:00Z`);
      ids.push(designSummarySchema.parse((await create(engagementId, { kind: 'empty' })).body).id);
    }
    const shown = async (query: string) =>
      (await list(query)).find(({ id }) => id === engagementId)!.designs.map(({ id }) => id);
    expect(await shown('')).toEqual([ids[2], ids[1], ids[0]]);
    await architect.patch(`/api/designs/${ids[1]}`, { archived: true }).expect(200);
    expect(await shown('')).toEqual([ids[2], ids[0]]);
    expect(await shown('?archived=true')).toEqual([ids[2], ids[1], ids[0]]);
  });
});

describe('a deleted design', () => {
  const day = 24 * 60 * 60 * 1000;
  const start = new Date('2026-04-01T10:00:00Z');
  const listedIds = async (query: string) =>
    (await list(query)).flatMap(({ designs }) => designs).map(({ id }) => id);
  const deleted = async () => {
    now = start;
    const id = await addDesign(application, await addEngagement(application, workspace.id));
    const { body } = await architect.patch(`/api/designs/${id}`, { deleted: true }).expect(200);
    expect(body).toMatchObject({ archivedAt: start.toISOString(), deletedAt: start.toISOString() });
    return id;
  };

  test('is seen among the archived alone, takes no edits, and comes back whole', async () => {
    const id = await deleted();
    expect(await listedIds('')).not.toContain(id);
    expect(await listedIds('?archived=true')).toContain(id);
    await architect
      .post(`/api/designs/${id}/patches`, {
        baseSequence: 0,
        edits: [{ editId: crypto.randomUUID(), patch: { meta: { documentType: 'Plan' } } }],
      })
      .expect(409);
    const { body } = await architect.patch(`/api/designs/${id}`, { deleted: false }).expect(200);
    expect(body).toMatchObject({ archivedAt: null, deletedAt: null });
    expect(await listedIds('')).toContain(id);
  });

  test('is gone for good after 30 days, whoever deletes it again meanwhile', async () => {
    const id = await deleted();
    now = new Date(start.getTime() + 20 * day);
    await architect.patch(`/api/designs/${id}`, { deleted: true }).expect(200);
    now = new Date(start.getTime() + 30 * day);
    expect(await listedIds('?archived=true')).toContain(id);
    now = new Date(start.getTime() + 30 * day + 1000);
    expect(await listedIds('?archived=true')).not.toContain(id);
    await architect.get(`/api/designs/${id}`).expect(404);
  });

  test('stays for good once it is archived instead', async () => {
    const id = await deleted();
    await architect.patch(`/api/designs/${id}`, { archived: true }).expect(200);
    now = new Date(start.getTime() + 90 * day);
    expect(await listedIds('?archived=true')).toContain(id);
  });

  test('is not both archived and deleted by one request', async () => {
    const id = await deleted();
    const { body } = await architect
      .patch(`/api/designs/${id}`, { archived: false, deleted: true })
      .expect(400);
    expect(body).toMatchObject({ details: [{ path: 'deleted' }] });
  });
});
