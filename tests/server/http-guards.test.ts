import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { connect } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import supertest from 'supertest';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { errorSchema } from '#contract/errors.ts';
import { openDatabase } from '../../server/db/open-database.ts';
import { limits } from '../../server/services/limits.ts';
import type { TestApplication, TestBrowser, TestWorkspace } from '../support/test-application.ts';
import {
  addDesign,
  addEngagement,
  addWorkspace,
  signIn,
  startTestApplication,
  testPassword,
} from '../support/test-application.ts';

let application: TestApplication;
let workspace: TestWorkspace;
let architect: TestBrowser;
let designId: string;
let clientFolder: string;

beforeAll(async () => {
  clientFolder = mkdtempSync(join(tmpdir(), 'longpatch-client-'));
  application = await startTestApplication({ clientFolder });
  workspace = await addWorkspace(application);
  architect = await signIn(application, workspace.people.architect);
  designId = await addDesign(application, await addEngagement(application, workspace.id));
});
afterAll(async () => {
  await application.close();
  rmSync(clientFolder, { recursive: true });
});

const sendRaw = (path: string, body: string | Buffer, headers: Record<string, string> = {}) => {
  const request = architect.agent
    .post(path)
    .set({ 'X-CSRF-Token': architect.csrfToken, 'Content-Type': 'application/json', ...headers });
  // Serialised already.
  request.serialize(() => body as string);
  return request.send(body as string);
};
const engagements = () => `/api/workspaces/${workspace.id}/engagements`;

describe('a body', () => {
  test.each([
    ['that is no JSON', '{"name":', 400],
    ['that is empty', '', 400],
    ['that is a bare word', 'name', 400],
    ['with a lone surrogate in place of a name', '{"name":"\\ud800"}', 201],
    ['with a number too large for JavaScript', '{"name":1e999}', 400],
  ])('%s', async (_case, body, status) => {
    const response = await sendRaw(engagements(), body);
    expect(response.status).toBe(status);
    if (status >= 400) expect(errorSchema.parse(response.body).code).toBe('invalid-request');
  });

  test.each([
    ['another type', { 'Content-Type': 'text/plain' }, 415],
    ['a form', { 'Content-Type': 'application/x-www-form-urlencoded' }, 415],
    ['an unknown charset', { 'Content-Type': 'application/json; charset=klingon' }, 415],
    ['an unknown encoding', { 'Content-Encoding': 'rot13' }, 415],
    ['an encoding it does not have', { 'Content-Encoding': 'gzip' }, 400],
  ])('of %s is refused', async (_case, headers, status) => {
    const response = await sendRaw(engagements(), '{"name":"x"}', headers);
    expect(response.status).toBe(status);
    expect(errorSchema.parse(response.body).code).toBe('invalid-request');
  });

  test('above the limit of its route is refused', async () => {
    const over = (bytes: number) => JSON.stringify({ name: 'x'.repeat(bytes) });
    const small = await sendRaw(engagements(), over(limits.bodyBytes));
    expect([small.status, (small.body as { code: string }).code]).toEqual([413, 'too-large']);
    const edits = `/api/designs/${designId}/patches`;
    await sendRaw(edits, over(limits.bodyBytes)).expect(400);
    await sendRaw(edits, over(limits.editsBodyBytes)).expect(413);
  });

  test('of nothing but brackets is refused before anything walks it', async () => {
    const deep = (levels: number) => `{"name":${'['.repeat(levels)}${']'.repeat(levels)}}`;
    const response = await sendRaw(engagements(), deep(40_000)).expect(400);
    expect((response.body as { message: string }).message).toContain(`${limits.nestedLevels} levels`);
    await sendRaw(engagements(), '{"name":"[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[["}').expect(201);
    await sendRaw(engagements(), '{"name":"\\"[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[["}').expect(201);
  });

  test('that breaks off ends the request and not the server', async () => {
    const { port } = application.server.address() as { port: number };
    await new Promise<void>((resolve) => {
      const socket = connect(port, '127.0.0.1', () => {
        socket.write(
          'POST /api/engine/wire HTTP/1.1\r\nHost: x\r\nContent-Type: application/json\r\nContent-Length: 99\r\n\r\n{"st',
        );
        setTimeout(() => socket.destroy(), 50);
      });
      socket.on('close', () => resolve());
    });
    await architect.get('/api/health').expect(200);
  });
});

describe('a path', () => {
  test.each(['/api/nothing', '/api/designs', '/api/designs/%00', '/api/designs/x/patches?after=0'])(
    '%s that names nothing is not found',
    async (path) => {
      expect(errorSchema.parse((await architect.get(path).expect(404)).body).code).toBe('not-found');
    },
  );

  test('with a broken escape is refused', async () => {
    const response = await architect.get('/api/designs/%E0%A4%A').expect(400);
    expect(errorSchema.parse(response.body).code).toBe('invalid-request');
  });

  test('is refused with a method it does not have', async () => {
    await architect.put(`/api/designs/${designId}`, {}).expect(404);
  });
});

describe('headers', () => {
  test('let a page load nothing from elsewhere and run nothing inline', async () => {
    const { headers } = await architect.get('/').expect(503);
    const policy = headers['content-security-policy']!;
    expect(policy).toContain("default-src 'none'");
    expect(policy).toContain("script-src 'self';");
    expect(policy).toContain("frame-ancestors 'none'");
    expect(policy).not.toMatch(/unsafe-(eval|inline)/);
    expect(policy).not.toContain('upgrade-insecure-requests');
    expect(headers['strict-transport-security']).toBeUndefined();
    expect(headers['x-content-type-options']).toBe('nosniff');
    expect(headers['x-frame-options']).toBe('DENY');
    expect(headers['x-powered-by']).toBeUndefined();
  });

  test('keep answers with data out of every cache', async () => {
    expect((await architect.get('/api/session')).headers['cache-control']).toBe('no-store');
    expect((await architect.get(`/api/designs/${designId}`)).headers['cache-control']).toBe('no-store');
    expect((await architect.get('/api/nothing')).headers['cache-control']).toBe('no-store');
  });

  test('name each request, as errors and the log do', async () => {
    const response = await architect.get('/api/nothing');
    const id = response.headers['x-request-id']!;
    expect(errorSchema.parse(response.body).requestId).toBe(id);
    expect(application.logged()).toContain(id);
  });
});

describe('the log', () => {
  test('holds neither passwords nor cookies, tokens or what is searched for', async () => {
    await architect.get('/api/session?secret=in-the-query');
    await architect.post('/api/session', { email: 'nobody@ternwick.example', password: testPassword });
    const cookies = architect.agent.jar.getCookies({
      domain: '127.0.0.1',
      path: '/',
      secure: false,
      script: false,
    });
    const logged = application.logged();
    expect(logged).toContain('/api/session');
    for (const secret of [testPassword, architect.csrfToken, cookies.toValueString(), 'in-the-query'])
      expect(logged).not.toContain(secret);
  });

  test('has the cause of what went wrong on our side, the answer has not', async () => {
    const { knex } = application.database;
    await knex.schema.renameTable('engagements', 'engagements_away');
    const response = await architect.get(engagements()).expect(500);
    await knex.schema.renameTable('engagements_away', 'engagements');
    const { code, message, requestId } = errorSchema.parse(response.body);
    expect(code).toBe('internal');
    expect(message).not.toContain('engagements');
    const line = application
      .logged()
      .split('\n')
      .find((each) => each.includes(requestId) && each.includes('"err"'));
    expect(line).toContain('relation');
  });
});

describe('health', () => {
  test('is good while the database answers with the right schema', async () => {
    await architect.get('/api/health').expect(200, { status: 'ok' });
    const { knex } = application.database;
    await knex('knex_migrations').insert({ name: '29991231000000_from_later', batch: 9 });
    const response = await architect.get('/api/health').expect(503);
    expect(errorSchema.parse(response.body).code).toBe('unavailable');
    await knex('knex_migrations').where({ batch: 9 }).delete();
  });

  test('is bad, and other requests are put off, while there is no database', async () => {
    // RFC 863: nobody listens on the discard port here.
    const database = openDatabase('postgresql://nobody@127.0.0.1:9/nothing');
    const lonely = await application.another({ database });
    const health = await supertest(lonely.server).get('/api/health').expect(503);
    expect(errorSchema.parse(health.body).code).toBe('unavailable');
    const session = await supertest(lonely.server).get('/api/session').expect(503);
    expect(errorSchema.parse(session.body).code).toBe('unavailable');
    await supertest(lonely.server)
      .post('/api/engine/wire')
      .send({ stack: {}, innerPacketBytes: 99 })
      .expect(200);
    await database.close();
  });
});

describe('the client’s files', () => {
  test('are missed clearly before they are built', async () => {
    const response = await architect.get('/workspaces/x/engagements').expect(503);
    expect(response.headers['content-type']).toContain('text/html');
    expect(response.text).toContain('npm start');
  });

  test('are served, with the first page for every path of the application', async () => {
    mkdirSync(join(clientFolder, 'assets'));
    writeFileSync(join(clientFolder, 'index.html'), '<!doctype html><title>Longpatch</title>');
    writeFileSync(join(clientFolder, 'theme.js'), 'export {};');
    writeFileSync(join(clientFolder, '.built-from'), 'hash');
    writeFileSync(join(clientFolder, 'assets', 'main-1a2b3c.js'), 'export {};');
    for (const path of ['/', '/sign-in', '/designs/x/sheet']) {
      const page = await architect.get(path).expect(200);
      expect(page.text).toContain('<title>Longpatch</title>');
      expect(page.headers['cache-control']).toBe('no-cache');
      expect(page.headers['content-security-policy']).toBeDefined();
    }
    const asset = await architect.get('/assets/main-1a2b3c.js').expect(200);
    expect(asset.headers['cache-control']).toBe('public, max-age=31536000, immutable');
    expect((await architect.get('/theme.js').expect(200)).headers['cache-control']).toBe('no-cache');
    const gone = await architect.get('/assets/main-of-before.js').expect(404);
    expect(gone.headers['content-type']).toContain('text/plain');
    expect(gone.headers['cache-control']).toBe('no-cache');
    for (const path of ['/.built-from', '/..%2fpackage.json', '/assets/..%2f..%2fpackage.json']) {
      const response = await architect.get(path);
      expect(response.text).not.toContain('hash');
      expect(response.text).not.toContain('dependencies');
    }
  });
});
