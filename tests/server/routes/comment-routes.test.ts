import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import {
  appliedSuggestionSchema,
  commentListSchema,
  mentionToken,
  threadSchema,
  type Thread,
} from '#contract/comments.ts';
import { openDesignSchema } from '#contract/designs.ts';
import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { runRules } from '#engine/rules/run-rules.ts';
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
let elsewhere: TestWorkspace;
let engagementId: string;
let designId: string;
let reviewer: TestBrowser;
let architect: TestBrowser;
let stranger: TestBrowser;
const start = new Date('2026-12-01T14:00:00Z');
let now = start;

const tunnel = 'tn-s0-s1-a';
const document = applyPatch(pairDesign(), { tunnels: { [tunnel]: { b: { vni: 777 } } } });
const finding = runRules(document).find(({ rule }) => rule === 'tunnel-vni-mismatch')!;
const right = document.tunnels[tunnel]!.a.vni!;
const cure: MergePatch = { tunnels: { [tunnel]: { b: { vni: right } } } };

beforeAll(async () => {
  application = await startTestApplication({ clock: () => now });
  workspace = await addWorkspace(application);
  elsewhere = await addWorkspace(application);
  engagementId = await addEngagement(application, workspace.id);
  reviewer = await signIn(application, workspace.people.reviewer);
  architect = await signIn(application, workspace.people.architect);
  stranger = await signIn(application, elsewhere.people.owner);
});
afterAll(() => application.close());
beforeEach(async () => {
  now = start;
  designId = await addDesign(application, engagementId, document);
});

const minutes = (count: number): void => {
  now = new Date(now.getTime() + count * 60_000);
};
const write = (browser: TestBrowser, body: string, more: object = {}) =>
  browser.post(`/api/designs/${designId}/comments`, { body, ...more });
const begin = async (browser: TestBrowser, body: string, more: object = {}): Promise<Thread> =>
  threadSchema.parse((await write(browser, body, more).expect(201)).body);
const list = async () =>
  commentListSchema.parse((await architect.get(`/api/designs/${designId}/comments`).expect(200)).body);
const change = (browser: TestBrowser, id: string, body: string) =>
  browser.patch(`/api/comments/${id}`, { body });
const remove = (browser: TestBrowser, id: string) => browser.delete(`/api/comments/${id}`);
const apply = (browser: TestBrowser, id: string, more: object = {}) =>
  browser.post(`/api/comments/${id}/application`, { editId: crypto.randomUUID(), ...more });
const save = (patch: MergePatch, baseSequence = 0) =>
  architect
    .post(`/api/designs/${designId}/patches`, {
      baseSequence,
      edits: [{ editId: crypto.randomUUID(), patch }],
    })
    .expect(200);
const stored = async () => {
  const opened = openDesignSchema.parse((await architect.get(`/api/designs/${designId}`).expect(200)).body);
  return { sequence: opened.sequence, document: opened.document as Design };
};
const mailsTo = async ({ id }: { readonly id: string }) =>
  application.database
    .knex('mails')
    .where({ person_id: id, kind: 'mention' })
    .orderBy('queued_at')
    .pluck<object[]>('content');
const recorded = async (): Promise<readonly { action: string; object_name: string }[]> =>
  application.database
    .knex('activity')
    .where({ design_id: designId })
    .orderBy('id')
    .select<{ action: string; object_name: string }[]>('action', 'object_name');

describe('a thread', () => {
  test('is about an element, one of its properties, a finding or the design, and keeps what that was called', async () => {
    const ref = { collection: 'tunnels', id: tunnel };
    await begin(reviewer, 'In general fine.');
    await begin(reviewer, 'Why bare?', { pin: { kind: 'element', ref } });
    await begin(reviewer, 'Not this one.', { pin: { kind: 'element', ref, path: ['b', 'vni'] } });
    await begin(architect, 'I know.', { pin: { kind: 'finding', key: finding.key } });
    await save({ tunnels: { [tunnel]: { name: 'renamed' } } });
    await save({ tunnels: { [tunnel]: null } }, 1);
    const { threads } = await list();
    const called = document.tunnels[tunnel]!.name;
    expect(threads.map(({ pin }) => pin)).toEqual([
      { kind: 'finding', key: finding.key, ref: finding.elements[0], called: finding.sentence },
      { kind: 'element', ref, path: ['b', 'vni'], called },
      { kind: 'element', ref, path: [], called },
      { kind: 'design' },
    ]);
  });

  test('takes replies in order, with who wrote them as they are called now', async () => {
    const { id } = await begin(reviewer, ' Why this VNI?\n\nThe far end has another. ');
    minutes(3);
    const thread = await begin(architect, 'An oversight.', { replyTo: id });
    expect(thread.comments.map(({ author, body, writtenAt }) => [author?.name, body, writtenAt])).toEqual([
      [workspace.people.reviewer.name, 'Why this VNI?\n\nThe far end has another.', start.toISOString()],
      [workspace.people.architect.name, 'An oversight.', now.toISOString()],
    ]);
    expect((await list()).threads).toEqual([thread]);
  });

  test('is resolved and reopened by anybody who may comment; while resolved it takes no reply', async () => {
    const { id } = await begin(reviewer, 'Why this VNI?');
    const path = `/api/comments/${id}/resolution`;
    const resolved = threadSchema.parse((await architect.post(path).expect(200)).body);
    expect(resolved).toMatchObject({
      resolvedBy: { name: workspace.people.architect.name },
      resolvedAt: start.toISOString(),
    });
    minutes(1);
    expect((await reviewer.post(path).expect(200)).body).toEqual(resolved);
    await write(reviewer, 'But', { replyTo: id }).expect(409);
    expect((await reviewer.delete(path).expect(200)).body).toMatchObject({
      resolvedBy: null,
      resolvedAt: null,
    });
    await begin(reviewer, 'But', { replyTo: id });
    expect((await recorded()).map(({ action }) => action)).toEqual([
      'comment.written',
      'comment.resolved',
      'comment.reopened',
      'comment.written',
    ]);
  });

  test.each([
    ['no words', { body: '  ' }, 400, 'body'],
    ['a book', { body: 'x'.repeat(4001) }, 400, 'body'],
    ['a key in its words', { body: 'PSK: hT7kq92LmZ' }, 400, 'body'],
    [
      'an element that is not there',
      { pin: { kind: 'element', ref: { collection: 'sites', id: 'x' } } },
      409,
      'pin.ref',
    ],
    [
      'an element of no kind',
      { pin: { kind: 'element', ref: { collection: 'ships', id: 'x' } } },
      400,
      'pin.ref.collection',
    ],
    ['a finding that is not there', { pin: { kind: 'finding', key: 'x' } }, 409, 'pin.key'],
    [
      'a reply to nothing that has a pin',
      { replyTo: '00000000-0000-4000-8000-000000000000', pin: { kind: 'design' } },
      400,
      'pin',
    ],
    ['a name of its own', { name: 'x' }, 400, 'name'],
  ])('is refused with %s', async (_what, more, status, path) => {
    const { body } = await write(reviewer, 'Words', more).expect(status);
    expect(body).toMatchObject({
      details: [{ path, expected: expect.stringMatching(/^expected /) as string }],
    });
    expect(JSON.stringify(body)).not.toContain('hT7kq92LmZ');
    expect((await list()).threads).toEqual([]);
  });

  test('takes no reply from another design, and none to a reply', async () => {
    const { id } = await begin(reviewer, 'First');
    const thread = await begin(reviewer, 'Second', { replyTo: id });
    await write(reviewer, 'Third', { replyTo: thread.comments[1]!.id }).expect(404);
    designId = await addDesign(application, engagementId, document);
    await write(reviewer, 'Third', { replyTo: id }).expect(404);
  });

  test('does not begin on an archived design, and stays to be read', async () => {
    await begin(reviewer, 'First');
    await architect.patch(`/api/designs/${designId}`, { archived: true }).expect(200);
    await write(reviewer, 'Second').expect(409);
    expect((await list()).threads).toHaveLength(1);
  });

  test('cannot be told from nothing by another workspace', async () => {
    const { id } = await begin(reviewer, 'Ours');
    const missing = '00000000-0000-4000-8000-000000000000';
    const answers = await Promise.all(
      [id, missing].map(async (each) => ({
        ...((await change(stranger, each, 'Mine').expect(404)).body as object),
        requestId: '',
      })),
    );
    expect(answers[0]).toEqual(answers[1]);
    await stranger.get(`/api/designs/${designId}/comments`).expect(404);
    await write(stranger, 'Hello').expect(404);
    await remove(stranger, id).expect(404);
    await stranger.post(`/api/comments/${id}/resolution`).expect(404);
    await apply(stranger, id).expect(404);
  });
});

describe('a comment of one’s own', () => {
  test('can be changed for an hour, by its author alone', async () => {
    const { id } = await begin(reviewer, 'Frist');
    await change(architect, id, 'First').expect(403);
    minutes(60);
    const { comments } = threadSchema.parse((await change(reviewer, id, 'First').expect(200)).body);
    expect(comments).toMatchObject([
      { body: 'First', writtenAt: start.toISOString(), editedAt: now.toISOString() },
    ]);
    minutes(1);
    await change(reviewer, id, 'Second').expect(409);
  });

  test('leaves no trace when it is deleted before anybody replied', async () => {
    const { id } = await begin(reviewer, 'First');
    await remove(architect, id).expect(403);
    await remove(reviewer, id).expect(204);
    expect((await list()).threads).toEqual([]);
    await remove(reviewer, id).expect(404);
  });

  test('leaves its place while there are replies, and goes with the last of them', async () => {
    const { id } = await begin(reviewer, `${mentionToken(workspace.people.architect.id)} look`);
    const { comments } = await begin(architect, 'Why?', { replyTo: id });
    await remove(reviewer, id).expect(204);
    const [thread] = (await list()).threads;
    expect(thread!.comments).toMatchObject([
      {
        body: '',
        mentions: [],
        deletedAt: now.toISOString(),
        author: { name: workspace.people.reviewer.name },
      },
      { body: 'Why?', deletedAt: null },
    ]);
    await change(reviewer, id, 'Again').expect(409);
    await remove(architect, comments[1]!.id).expect(204);
    expect((await list()).threads).toEqual([]);
  });
});

describe('a mention', () => {
  test('keeps the person, shows the name they have now, and sends one mail to each but the author', async () => {
    const { architect: author, owner, reviewer: self } = workspace.people;
    const body = `${mentionToken(author.id)} and ${mentionToken(self.id)}: see ${mentionToken(author.id)}`;
    const before = { author: await mailsTo(author), self: await mailsTo(self), owner: await mailsTo(owner) };
    const { id } = await begin(reviewer, body);
    const { knex } = application.database;
    await knex('people').where({ id: author.id }).update({ name: 'Another Name' });
    const [thread] = (await list()).threads;
    expect(thread!.comments[0]).toMatchObject({ body });
    expect(thread!.comments[0]!.mentions.map(({ name }) => name).sort()).toEqual(['Another Name', self.name]);
    await knex('people').where({ id: author.id }).update({ name: author.name });
    await change(reviewer, id, `${body} ${mentionToken(owner.id)}`).expect(200);
    const fresh = (await mailsTo(author)).slice(before.author.length);
    expect(fresh).toMatchObject([
      {
        designTitle: document.meta.title,
        by: self.name,
        excerpt: `@${author.name} and @${self.name}: see @${author.name}`,
        link: `http://127.0.0.1:3000/designs/${designId}/review?thread=${id}`,
      },
    ]);
    expect(await mailsTo(self)).toEqual(before.self);
    expect((await mailsTo(owner)).length).toBe(before.owner.length + 1);
  });

  test('of a stranger, and of a member who opens no designs, is refused', async () => {
    for (const { id } of [elsewhere.people.architect, workspace.people.installer]) {
      const { body } = await write(reviewer, `${mentionToken(id)} look`).expect(400);
      expect(body).toMatchObject({ details: [{ path: 'body', value: id }] });
    }
    expect((await list()).members.map(({ role }) => role).sort()).toEqual([
      'architect',
      'owner',
      'presales',
      'reviewer',
    ]);
  });

  test('of somebody who left stays in what was written, and calls them no more', async () => {
    const { presales } = workspace.people;
    const { knex } = application.database;
    const { id } = await begin(reviewer, `${mentionToken(presales.id)} look`);
    const mails = await mailsTo(presales);
    const membership = { workspace_id: workspace.id, person_id: presales.id };
    await knex('memberships').where(membership).delete();
    await change(reviewer, id, `${mentionToken(presales.id)} look again`).expect(200);
    await write(reviewer, `${mentionToken(presales.id)} you too`).expect(400);
    expect(await mailsTo(presales)).toEqual(mails);
    await knex('memberships').insert({ ...membership, role: 'presales' });
  });
});

describe('a suggestion', () => {
  const suggest = (patch: MergePatch = cure, more: object = {}) =>
    begin(reviewer, 'As at the near end.', {
      pin: { kind: 'finding', key: finding.key },
      suggestion: { patch, baseSequence: 0 },
      ...more,
    });

  test('becomes a patch of whoever applies it, once, and its thread is resolved', async () => {
    const { id, comments } = await suggest();
    expect(comments[0]!.suggestion).toMatchObject({
      patch: cure,
      before: { tunnels: { [tunnel]: { b: { vni: 777 } } } },
      appliedBy: null,
    });
    expect(await stored()).toMatchObject({ sequence: 0 });
    await apply(reviewer, id).expect(403);
    const { thread, sequence } = appliedSuggestionSchema.parse((await apply(architect, id).expect(200)).body);
    expect(sequence).toBe(1);
    expect(thread).toMatchObject({
      resolvedBy: { name: workspace.people.architect.name },
      comments: [
        { suggestion: { appliedBy: { name: workspace.people.architect.name }, appliedSequence: 1 } },
      ],
    });
    const after = await stored();
    expect(after.document.tunnels[tunnel]!.b.vni).toBe(right);
    const again = await apply(architect, id, { confirmed: true }).expect(409);
    expect(again.body).toMatchObject({ message: expect.stringContaining('applied already') as string });
    expect(await stored()).toEqual(after);
    await remove(reviewer, id).expect(409);
    expect((await recorded()).map(({ action }) => action)).toEqual(['comment.written', 'suggestion.applied']);
  });

  test('whose place has another value by now says so, and is applied only when that is confirmed', async () => {
    const { id } = await suggest();
    await save({ tunnels: { [tunnel]: { b: { vni: 778 } } } });
    const { body } = await apply(architect, id).expect(409);
    expect(body).toMatchObject({
      code: 'conflict',
      details: [{ path: `tunnels.${tunnel}.b.vni`, value: '778', expected: 'expected 777' }],
    });
    expect((await stored()).document.tunnels[tunnel]!.b.vni).toBe(778);
    await apply(architect, id, { confirmed: true }).expect(200);
    expect((await stored()).document.tunnels[tunnel]!.b.vni).toBe(right);
  });

  test('applies what is left of it when a part of what it changes is gone', async () => {
    const { id } = await suggest({ ...cure, meta: { title: 'Another title' } });
    await save({ tunnels: { [tunnel]: null } });
    await apply(architect, id).expect(409);
    await apply(architect, id, { confirmed: true }).expect(200);
    const after = await stored();
    expect(after.document.meta.title).toBe('Another title');
    expect(after.document.tunnels[tunnel]).toBeUndefined();
  });

  test('is not applied when nothing of it is left', async () => {
    const { id } = await suggest();
    await save({ tunnels: { [tunnel]: null } });
    const before = await stored();
    const { body } = await apply(architect, id, { confirmed: true }).expect(409);
    expect(body).toMatchObject({ message: expect.stringContaining('Nothing of the suggestion') as string });
    expect(await stored()).toEqual(before);
  });

  test.each([
    [
      'leaves no valid design',
      { suggestion: { patch: { tunnels: { [tunnel]: { a: null } } }, baseSequence: 0 } },
      422,
    ],
    [
      'names what is not there',
      { suggestion: { patch: { devices: { 'sw-s0': { site: 'nowhere' } } }, baseSequence: 0 } },
      422,
    ],
    [
      'changes nothing',
      { suggestion: { patch: { meta: { title: document.meta.title } }, baseSequence: 0 } },
      400,
    ],
    ['is made on what is not saved', { suggestion: { patch: cure, baseSequence: 7 } }, 409],
    ['is no patch', { suggestion: { patch: ['x'], baseSequence: 0 } }, 400],
  ])('is refused when it %s', async (_what, more, status) => {
    await write(reviewer, 'Like so?', more).expect(status);
    expect((await list()).threads).toEqual([]);
  });

  test('of plain words there is none to apply', async () => {
    const { id } = await begin(reviewer, 'First');
    await apply(architect, id).expect(409);
  });
});
