import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { z } from 'zod';
import { secondStepOfferSchema } from '#contract/account.ts';
import { designSchema } from '#engine/model/design.ts';
import type { Route } from '../../server/auth/permissions.ts';
import { routes } from '../../server/auth/permissions.ts';
import { operationsByTopic } from '../../server/services/api-description/operations.ts';
import { limits } from '../../server/services/limits.ts';
import { createMailSender } from '../../server/mail/mail-sender.ts';
import { startMailServer } from '../support/mail-server.ts';
import { linkTo } from '../support/queued-links.ts';
import type { TestApplication, TestBrowser, TestWorkspace } from '../support/test-application.ts';
import {
  addDesign,
  addEngagement,
  addWorkspace,
  cookieOf,
  openBrowser,
  signIn,
  startTestApplication,
  testPassword,
} from '../support/test-application.ts';

let application: TestApplication;
let workspace: TestWorkspace;
let owner: TestBrowser;
let designId: string;

beforeAll(async () => {
  application = await startTestApplication();
  workspace = await addWorkspace(application);
  owner = await signIn(application, workspace.people.owner);
  designId = await addDesign(application, await addEngagement(application, workspace.id));
});
afterAll(() => application.close());

type Verb = 'post' | 'put' | 'patch' | 'delete';
const partsOf = (route: string): readonly [Verb, string] => {
  const [method, path] = route.split(' ') as [string, string];
  return [method.toLowerCase() as Verb, path.replace(/:\w+/g, '7d0f3c1e-0000-4000-8000-000000000000')];
};
const changing = (Object.keys(routes) as Route[]).filter(
  (route) => !route.startsWith('GET ') && !route.includes('/api/engine/'),
);

test('no route that changes anything takes a request without the token of its session', async () => {
  expect(changing.length).toBeGreaterThan(40);
  for (const route of changing) {
    const [verb, path] = partsOf(route);
    const response = await owner.agent[verb](path).send({});
    expect([route, response.status, (response.body as { code: string }).code]).toEqual([route, 403, 'csrf']);
  }
});

describe('bodies', () => {
  const shapes = (schema: z.ZodType): readonly Record<string, unknown>[] => {
    const { $defs = {}, ...top } = z.toJSONSchema(schema, { io: 'input', unrepresentable: 'any' }) as Record<
      string,
      unknown
    > & { $defs?: Record<string, Record<string, unknown>> };
    const open = (each: Record<string, unknown>): readonly Record<string, unknown>[] => {
      const { anyOf, oneOf, $ref } = each as {
        anyOf?: Record<string, unknown>[];
        oneOf?: Record<string, unknown>[];
        $ref?: string;
      };
      if ($ref !== undefined) return open($defs[$ref.replace('#/$defs/', '')] ?? {});
      return anyOf === undefined && oneOf === undefined ? [each] : (anyOf ?? oneOf ?? []).flatMap(open);
    };
    return open(top);
  };

  test('take no field that no route knows, wherever there is a body', () => {
    const open = operationsByTopic.flatMap(({ route, operation: { body } }) =>
      body !== undefined && shapes(body).some((shape) => shape['additionalProperties'] !== false)
        ? [route]
        : [],
    );
    expect(open).toEqual([]);
  });

  test('with a field too many change nothing', async () => {
    const member = `/api/workspaces/${workspace.id}/people/${workspace.people.presales.id}`;
    const comments = `/api/designs/${designId}/comments`;
    const made = (await owner.post(comments, { body: 'Look here' }).expect(201)).body as { id: string };
    for (const [verb, path, body, field] of [
      ['patch', member, { role: 'owner', personId: workspace.people.owner.id }, 'personId'],
      ['patch', `/api/workspaces/${workspace.id}`, { name: 'New', id: designId }, 'id'],
      ['post', comments, { body: 'x', author: { name: 'Somebody' } }, 'author'],
      ['patch', `/api/comments/${made.id}`, { body: 'x', writtenAt: '2026-01-01T00:00:00Z' }, 'writtenAt'],
    ] as const) {
      const response = await owner[verb](path, body);
      expect([path, response.status]).toEqual([path, 400]);
      expect(response.body).toMatchObject({
        details: [{ path: field, expected: 'expected no field of that name' }],
      });
    }
    const { knex } = application.database;
    const row = await knex('memberships').where({ person_id: workspace.people.presales.id }).first('role');
    expect(row).toEqual({ role: 'presales' });
  });

  test('above the limit of their route are refused before anything is read of them', async () => {
    const large = { name: 'x'.repeat(limits.bodyBytes) };
    for (const path of [
      `/api/workspaces/${workspace.id}/deletion`,
      `/api/workspaces/${workspace.id}/invitations`,
      `/api/designs/${designId}/shares`,
      '/api/share',
      '/api/password-reset',
      '/api/invitation',
      '/api/account/tokens',
    ]) {
      const response = await owner.post(path, large);
      expect([path, response.status, (response.body as { code: string }).code]).toEqual([
        path,
        413,
        'too-large',
      ]);
    }
  });

  test('bring no line break into names, which stand in the heads of mails', async () => {
    const name = 'Ruth\r\nBcc: everybody@evil.example';
    await owner.patch(`/api/workspaces/${workspace.id}`, { name }).expect(400);
    await owner
      .post(`/api/workspaces/${workspace.id}/invitations`, {
        email: `a@b.example\r\nBcc: c@d.example`,
        role: 'reviewer',
      })
      .expect(400);
    await owner
      .post('/api/invitation/acceptance', {
        token: 'x'.repeat(43),
        newcomer: { name, password: testPassword },
      })
      .expect(400);
  });
});

test('a title with line breaks, as an import may bring one, adds no head to a mail', async () => {
  const mailServer = await startMailServer();
  try {
    const sender = createMailSender({
      smtpUrl: mailServer.smtpUrl,
      from: { name: 'Longpatch', address: 'longpatch@mail.example' },
    });
    const letter = {
      messageId: '<1@mail.example>',
      to: 'reader@ternwick.example',
      date: new Date(),
      words: {
        subject: 'Review of Two sites\r\nBcc: everybody@evil.example\r\n\r\nAnother text',
        heading: 'A heading',
        paragraphs: [],
        footer: [],
      },
    };
    await sender.send(letter, { beforeEnd: async () => undefined });
    const { parsed, source } = await mailServer.mailTo('reader@ternwick.example');
    expect(mailServer.received).toHaveLength(1);
    expect(parsed.headers.has('bcc')).toBe(false);
    const [heads = ''] = source.split(/\r?\n\r?\n/);
    expect(heads).toMatch(/^Subject: .*Two sites/m);
    expect(heads).not.toMatch(/^(bcc|another)/im);
    expect(parsed.text).toMatch(/^A heading/);
  } finally {
    await mailServer.close();
  }
});

test('an invitation that is taken up puts the session under a new id, so that a planted one is worth nothing', async () => {
  const email = 'new.person@ternwick.example';
  await owner.post(`/api/workspaces/${workspace.id}/invitations`, { email, role: 'reviewer' }).expect(201);
  const token = await linkTo(application, email);
  const guest = await openBrowser(application);
  const planted = cookieOf(guest);
  await guest
    .post('/api/invitation/acceptance', { token, newcomer: { name: 'New Person', password: testPassword } })
    .expect(200);
  expect(cookieOf(guest)).not.toBe(planted);
  expect(application.logged().includes(token)).toBe(false);
});

test('what opens anything is in neither the log nor a refusal', async () => {
  const { secret } = secondStepOfferSchema.parse(
    (await owner.post('/api/account/second-step').expect(200)).body,
  );
  const [code, passphrase, token] = ['918273', 'harbour lights at dusk', 'T'.repeat(43)];
  const refusals = [
    await owner.put('/api/account/second-step', { code, password: 'not the password' }),
    await owner.post('/api/share', { token, passphrase }),
    await owner.post('/api/share', { token: 7, passphrase: [passphrase] }),
    await owner.post('/api/password-reset/link', { token }),
    await owner.post('/api/password-reset/password', { token, password: 'short' }),
    await owner.post(`/api/workspaces/${workspace.id}/deletion`, {
      name: 'x',
      password: ['not the password'],
    }),
  ];
  const said = refusals.map(({ text }) => text).join('\n') + application.logged();
  expect(refusals.every(({ status }) => status >= 400)).toBe(true);
  for (const each of [secret, code, passphrase, token, 'not the password', testPassword])
    expect([each, said.includes(each)]).toEqual([each, false]);
});

test('a design has no field for a key', () => {
  const names = new Set<string>();
  const walk = (value: unknown): void => {
    if (typeof value !== 'object' || value === null) return;
    const { properties } = value as { properties?: Record<string, unknown> };
    for (const name of Object.keys(properties ?? {})) names.add(name);
    Object.values(value).forEach(walk);
  };
  walk(z.toJSONSchema(designSchema, { unrepresentable: 'any' }));
  expect(names.size).toBeGreaterThan(100);
  // How long keys of an algorithm are is no key.
  const telling = [...names].filter((name) => /key|secret|passw|passphrase|psk|token|credential/i.test(name));
  expect(telling.sort()).toEqual(['keyBits']);
});
