import { randomUUID } from 'node:crypto';
import type { AddressInfo } from 'node:net';
import { afterAll, afterEach, beforeAll, describe, expect, test, vi } from 'vitest';
import { createdApiTokenSchema } from '#contract/account.ts';
import { livePresenceSchema } from '#contract/live.ts';
import { announcePlace } from '../../../server/live/announce.ts';
import { createLiveHub } from '../../../server/live/live-hub.ts';
import type { EventStream } from '../../support/event-stream.ts';
import { openEventStream } from '../../support/event-stream.ts';
import type { TestApplication, TestBrowser, TestWorkspace } from '../../support/test-application.ts';
import {
  addDesign,
  addEngagement,
  addWorkspace,
  cookieOf,
  signIn,
  startTestApplication,
} from '../../support/test-application.ts';

let application: TestApplication;
let second: TestApplication;
let workspace: TestWorkspace;
let engagementId: string;
let designId: string;
let architect: TestBrowser;
let reviewer: TestBrowser;
const open: EventStream[] = [];

beforeAll(async () => {
  application = await startTestApplication();
  second = await application.another();
  workspace = await addWorkspace(application);
  engagementId = await addEngagement(application, workspace.id);
  designId = await addDesign(application, engagementId);
  architect = await signIn(application, workspace.people.architect);
  reviewer = await signIn(second, workspace.people.reviewer);
});
afterEach(async () => {
  for (const stream of open.splice(0)) stream.close();
  await application.database.settled();
});
afterAll(() => application.close());

async function follow(
  process: TestApplication,
  browser: TestBrowser,
  connectionId = randomUUID(),
  id = designId,
): Promise<EventStream> {
  const { port } = process.server.address() as AddressInfo;
  const url = `http://127.0.0.1:${port}/api/designs/${id}/live?connectionId=${connectionId}`;
  const stream = await openEventStream(url, cookieOf(browser));
  open.push(stream);
  return stream;
}

const place = (overrides: object = {}) => ({ page: 'sheet', selection: [], view: null, ...overrides });
const say = (browser: TestBrowser, connectionId: string, where: object = place()) =>
  browser.put(`/api/designs/${designId}/presence`, { connectionId, place: where });
const edit = (browser: TestBrowser, revision: string, baseSequence: number) =>
  browser.post(`/api/designs/${designId}/patches`, {
    baseSequence,
    edits: [{ editId: randomUUID(), patch: { meta: { revision } } }],
  });
const named = (event: string) => (each: { readonly event: string }) => each.event === event;

describe('a stream', () => {
  test('begins with how things stand and tells of edits that another process took', async () => {
    const stream = await follow(second, reviewer);
    expect(stream.contentType).toBe('text/event-stream');
    const first = (await stream.next(named('patches'))).data as { sequence: number };
    await edit(architect, 'B', first.sequence).expect(200);
    expect((await stream.next(named('patches'))).data).toEqual({ sequence: first.sequence + 1 });
  });

  test('shows who is there, where, and that they went', async () => {
    const stream = await follow(second, reviewer);
    const connectionId = randomUUID();
    const theirs = await follow(application, architect, connectionId);
    const selection = [{ collection: 'devices', id: 'fw-1' }];
    await say(architect, connectionId, place({ selection })).expect(204);
    const seen = await stream.next(
      ({ event, data }) => event === 'presence' && livePresenceSchema.parse(data).people.length > 0,
    );
    expect(livePresenceSchema.parse(seen.data).people).toEqual([
      {
        connectionId,
        personId: workspace.people.architect.id,
        name: 'Some Architect',
        initials: 'SA',
        place: place({ selection }),
      },
    ]);
    theirs.close();
    await stream.next(
      ({ event, data }) => event === 'presence' && livePresenceSchema.parse(data).people.length === 0,
    );
  });

  test('ends when its reader loses the workspace', async () => {
    const elsewhere = await addWorkspace(application);
    const id = await addDesign(application, await addEngagement(application, elsewhere.id));
    const guest = await signIn(application, elsewhere.people.presales);
    const stream = await follow(second, guest, randomUUID(), id);
    await stream.next(named('patches'));
    const { knex } = application.database;
    const personId = elsewhere.people.presales.id;
    await knex('memberships').where({ person_id: personId }).delete();
    await announcePlace(knex, { workspaceId: elsewhere.id, personId });
    await vi.waitFor(() => expect(stream.isEnded()).toBe(true), { timeout: 5_000 });
  });

  test('ends when its session is ended from elsewhere', async () => {
    const there = await signIn(second, workspace.people.presales);
    const here = await signIn(application, workspace.people.presales);
    const stream = await follow(second, there);
    const own = await follow(application, here);
    await stream.next(named('patches'));
    await own.next(named('patches'));
    await here.delete('/api/account/sessions').expect(204);
    await vi.waitFor(() => expect(stream.isEnded()).toBe(true), { timeout: 5_000 });
    expect(own.isEnded()).toBe(false);
  });

  test('of a script ends when its token is revoked', async () => {
    const expiresOn = new Date().toISOString().slice(0, 10);
    const wanted = { name: 'Watcher', scope: 'read', workspaceId: null, expiresOn };
    const made = await architect.post('/api/account/tokens', wanted).expect(201);
    const { secret, token } = createdApiTokenSchema.parse(made.body);
    const { port } = second.server.address() as AddressInfo;
    const url = `http://127.0.0.1:${port}/api/designs/${designId}/live?connectionId=${randomUUID()}`;
    const answer = await fetch(url, { headers: { authorization: `Bearer ${secret}` } });
    expect(answer.status).toBe(200);
    let hasEnded = false;
    const read = answer.text().then(() => (hasEnded = true));
    await architect.delete(`/api/account/tokens/${token.id}`).expect(200);
    await vi.waitFor(() => expect(hasEnded).toBe(true), { timeout: 5_000 });
    await read;
  });

  test('ends with its process, so that the browser looks for another', async () => {
    const { database } = await application.another();
    const hub = createLiveHub(database);
    const stopping = await application.another({ live: hub });
    const stream = await follow(stopping, architect);
    await stream.next(named('patches'));
    hub.close();
    await vi.waitFor(() => expect(stream.isEnded()).toBe(true), { timeout: 5_000 });
  });

  test('hears again after the database dropped the connection, and is told to look', async () => {
    const third = await application.another();
    const stream = await follow(third, reviewer);
    const { sequence } = (await stream.next(named('patches'))).data as { sequence: number };
    await application.database.knex.raw(
      `select pg_terminate_backend(pid) from pg_stat_activity
       where query like 'listen %' and datname = current_database()`,
    );
    await edit(architect, 'C', sequence).expect(200);
    // Whether the edit fell into the gap or came after it.
    await stream.next(
      ({ event, data }) => event === 'patches' && (data as { sequence: number }).sequence === sequence + 1,
    );
  });
});

describe('what is refused', () => {
  test('a connection without an id, with a field named', async () => {
    const response = await architect.get(`/api/designs/${designId}/live?connectionId=mine`);
    expect(response.status).toBe(400);
    expect(response.body).toMatchObject({ details: [{ path: 'connectionId', value: '"mine"' }] });
  });

  test('speaking for a connection of somebody else', async () => {
    const connectionId = randomUUID();
    await say(architect, connectionId).expect(204);
    const response = await say(reviewer, connectionId);
    expect(response.status).toBe(409);
    expect(response.body).toMatchObject({ code: 'conflict' });
  });

  test.each([
    [{ page: 'Sheet!' }, 'place.page'],
    [{ view: { x: 0, y: 0, width: 0, height: 10 } }, 'place.view.width'],
    [
      { selection: Array.from({ length: 21 }, () => ({ collection: 'devices', id: 'x' })) },
      'place.selection',
    ],
  ])('a place that is none: %j', async (wrong, path) => {
    const response = await say(architect, randomUUID(), place(wrong)).expect(400);
    expect(response.body).toMatchObject({ details: [{ path }] });
  });
});
