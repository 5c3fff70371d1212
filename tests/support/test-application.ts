import type { Server } from 'node:http';
import { createServer } from 'node:http';
import type { Express } from 'express';
import { pino } from 'pino';
import supertest from 'supertest';
import { emptyDesign } from '#engine/model/design.ts';
import type { Design } from '#engine/model/design.ts';
import type { Role } from '#contract/session.ts';
import { roles } from '#contract/session.ts';
import type { AppOptions } from '../../server/app.ts';
import { createApp } from '../../server/app.ts';
import { hashPassword } from '../../server/auth/passwords.ts';
import type { Config } from '../../server/config.ts';
import type { Database } from '../../server/db/open-database.ts';
import { openDatabase } from '../../server/db/open-database.ts';
import { insertSnapshot } from '../../server/repositories/design-snapshots.ts';
import { insertDesign } from '../../server/repositories/designs.ts';
import { insertEngagement } from '../../server/repositories/engagements.ts';
import { insertMembership, insertWorkspace } from '../../server/repositories/memberships.ts';
import { insertPerson } from '../../server/repositories/people.ts';
import { summarise } from '../../server/services/design-summary.ts';
import { witnessed } from './api-witness.ts';
import { createTestDatabase } from './test-database.ts';

export const testPassword = 'a password for tests';
const passwordHash = hashPassword(testPassword);

export const testConfig: Config = {
  databaseUrl: 'postgresql://unused.example/unused',
  host: '127.0.0.1',
  port: 3000,
  publicUrl: 'http://127.0.0.1:3000',
  sessionSecret: 'a secret of more than thirty-two characters',
  previousSessionSecret: null,
  smtpUrl: null,
  mailFrom: { name: 'Longpatch', address: 'longpatch@mail.example' },
};

export interface TestApplication {
  readonly url: string;
  readonly database: Database;
  readonly server: Server;
  /** Everything the server logged, as text. */
  logged(): string;
  /** Another process on the same database: its own caches and connections. */
  another(options?: Partial<AppOptions>): Promise<TestApplication>;
  close(): Promise<void>;
}

/** The server on a database of its own, listening on loopback. */
export async function startTestApplication(options: Partial<AppOptions> = {}): Promise<TestApplication> {
  const testDatabase = await createTestDatabase();
  const application = await startOn(testDatabase.url, options);
  const others: TestApplication[] = [];
  return {
    ...application,
    another: async (otherOptions = {}) => {
      const other = await startOn(testDatabase.url, otherOptions);
      others.push(other);
      return other;
    },
    close: async () => {
      for (const each of [...others, application]) await each.close();
      await testDatabase.drop();
    },
  };
}

async function startOn(url: string, options: Partial<AppOptions>): Promise<TestApplication> {
  const lines: string[] = [];
  const database = openDatabase(url);
  const log = pino({ level: 'debug' }, { write: (line: string) => void lines.push(line) });
  const app: Express = createApp({ database, config: testConfig, log, ...options });
  const disagreements: string[] = [];
  const server = createServer(witnessed(app, disagreements));
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  return {
    url,
    database,
    server,
    logged: () => lines.join(''),
    another: () => Promise.reject(new Error('only the first application starts another')),
    close: async () => {
      server.closeAllConnections();
      await new Promise((resolve) => server.close(resolve));
      await database.close();
      if (disagreements.length > 0)
        throw new Error(
          `Answers other than the API's description says:\n${[...new Set(disagreements)].join('\n')}`,
        );
    },
  };
}

export interface TestPerson {
  readonly id: string;
  readonly name: string;
  readonly email: string;
}
export interface TestWorkspace {
  readonly id: string;
  readonly people: { readonly [role in Role]: TestPerson };
}

let serial = 0;

/** A workspace with one person of each role. */
export async function addWorkspace({ database }: Pick<TestApplication, 'database'>): Promise<TestWorkspace> {
  serial += 1;
  const id = await insertWorkspace(database.knex, `Workspace ${serial}`);
  const people = {} as { [role in Role]: TestPerson };
  for (const role of roles) {
    const person = await addPerson(database, `Some ${role[0]!.toUpperCase()}${role.slice(1)}`);
    await insertMembership(database.knex, id, person.id, role);
    people[role] = person;
  }
  return { id, people };
}

/** Somebody who is in no workspace. */
export async function addPerson({ knex }: Database, name: string): Promise<TestPerson> {
  serial += 1;
  const email = `person-${serial}@ternwick.example`;
  return { id: await insertPerson(knex, { name, email, passwordHash: await passwordHash }), name, email };
}

export async function addEngagement(
  { database }: Pick<TestApplication, 'database'>,
  workspaceId: string,
): Promise<string> {
  serial += 1;
  const words = { workspaceId, name: `Engagement ${serial}`, summary: '' };
  return (await insertEngagement(database.knex, words, new Date())).id;
}

/** A design in an engagement, as if created: its document is the snapshot at 0. */
export async function addDesign(
  { database }: Pick<TestApplication, 'database'>,
  engagementId: string,
  document: Design = emptyDesign('A design'),
): Promise<string> {
  const id = await insertDesign(database.knex, engagementId, summarise(document), null, new Date());
  await insertSnapshot(database.knex, id, { sequence: 0, document });
  return id;
}

/** A browser: it keeps cookies, and sends the session's token with every change. */
export interface TestBrowser {
  readonly agent: ReturnType<typeof supertest.agent>;
  csrfToken: string;
  get(path: string): supertest.Test;
  post(path: string, body?: unknown): supertest.Test;
  put(path: string, body?: unknown): supertest.Test;
  patch(path: string, body?: unknown): supertest.Test;
  delete(path: string): supertest.Test;
}

/** A browser that nobody is signed in with. */
export function openBrowser({ server }: TestApplication): Promise<TestBrowser> {
  return browserOf(supertest.agent(server));
}

/** A browser at any address. */
export async function browserOf(agent: ReturnType<typeof supertest.agent>): Promise<TestBrowser> {
  const change = (method: 'post' | 'put' | 'patch' | 'delete', path: string, body?: unknown) => {
    const request = agent[method](path).set('X-CSRF-Token', browser.csrfToken);
    return body === undefined ? request : request.send(body as object);
  };
  const browser: TestBrowser = {
    agent,
    csrfToken: '',
    get: (path) => agent.get(path),
    post: (path, body) => change('post', path, body),
    put: (path, body) => change('put', path, body),
    patch: (path, body) => change('patch', path, body),
    delete: (path) => change('delete', path),
  };
  browser.csrfToken = tokenOf(await agent.get('/api/session').expect(200));
  return browser;
}

export async function signIn(
  application: TestApplication,
  { email }: Pick<TestPerson, 'email'>,
  password = testPassword,
): Promise<TestBrowser> {
  const browser = await openBrowser(application);
  browser.csrfToken = tokenOf(await browser.post('/api/session', { email, password }).expect(200));
  return browser;
}

/** What the browser would send as its Cookie header. */
export function cookieOf({ agent }: TestBrowser): string {
  const { jar } = agent as unknown as { jar: CookieJar };
  const access = { domain: '127.0.0.1', path: '/', secure: false, script: false };
  return jar.getCookies(access).toValueString();
}

/** What supertest keeps cookies in. */
interface CookieJar {
  getCookies(access: object): { toValueString(): string };
}

export function tokenOf(response: supertest.Response): string {
  return (response.body as { csrfToken: string }).csrfToken;
}
