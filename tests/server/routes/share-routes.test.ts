import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { Share } from '#contract/shares.ts';
import { createdShareSchema, openedShareSchema, shareListSchema } from '#contract/shares.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { allowances } from '../../../server/auth/throttles.ts';
import { hashLinkToken } from '../../../server/auth/link-tokens.ts';
import { withoutWrittenAddresses } from '../../../server/services/written-addresses.ts';
import { pairDesign } from '../../support/designs.ts';
import type { TestApplication, TestBrowser, TestWorkspace } from '../../support/test-application.ts';
import {
  addDesign,
  addEngagement,
  addWorkspace,
  openBrowser,
  signIn,
  startTestApplication,
} from '../../support/test-application.ts';

const startOfTests = new Date('2027-03-01T09:00:00Z');
let now = startOfTests;
let application: TestApplication;
let workspace: TestWorkspace;
let designId: string;
let revisionId: string;
let presales: TestBrowser;
let guest: TestBrowser;

// A fault, so that there is something to find, and a note that names an address.
const document = applyPatch(pairDesign(), {
  tunnels: { 'tn-s0-s1-a': { b: { vni: 777 } } },
  notes: { n1: { text: 'The far end is 198.51.100.21/24, software 7.2.', at: { x: 10, y: 10 } } },
});

beforeAll(async () => {
  application = await startTestApplication({ clock: () => now });
  workspace = await addWorkspace(application);
  designId = await addDesign(application, await addEngagement(application, workspace.id), document);
  const architect = await signIn(application, workspace.people.architect);
  presales = await signIn(application, workspace.people.presales);
  guest = await openBrowser(application);
  const asked = await architect.post(`/api/designs/${designId}/revisions`, { sequence: 0 }).expect(201);
  revisionId = (asked.body as { id: string }).id;
});
afterAll(() => application.close());

const tokenOf = (link: string): string => link.split('/').at(-1)!;

async function share(overrides: object = {}) {
  const response = await presales
    .post(`/api/designs/${designId}/shares`, {
      revisionId,
      label: 'Saltmarsh Ferries, operations',
      expiresOn: '2027-03-10',
      showsAddresses: true,
      showsFindings: true,
      ...overrides,
    })
    .expect(201);
  return createdShareSchema.parse(response.body);
}

async function view(link: string, passphrase?: string) {
  const response = await guest.post('/api/share', {
    token: tokenOf(link),
    ...(passphrase && { passphrase }),
  });
  expect(response.status).toBe(200);
  const opened = openedShareSchema.parse(response.body);
  if (opened.isLocked) throw new Error('it is locked');
  return opened.view;
}

async function listed(id: string): Promise<Share> {
  const { body } = await presales.get(`/api/designs/${designId}/shares`).expect(200);
  return shareListSchema.parse(body).shares.find((each) => each.id === id)!;
}

const sheet = async (link: string) => {
  const response = await guest
    .post('/api/share/sheet', { token: tokenOf(link) })
    .buffer(true)
    .parse((res, done) => {
      let text = '';
      res.on('data', (chunk) => (text += String(chunk)));
      res.on('end', () => done(null, text));
    });
  expect(response.status).toBe(200);
  expect(response.headers['content-security-policy']).toContain("default-src 'none'");
  return response.body as string;
};

describe('a link to a revision', () => {
  test('shows a guest the revision, and counts and records that it was opened', async () => {
    const { link, share: made } = await share();
    const seen = await view(link);
    expect(seen).toMatchObject({
      label: 'Saltmarsh Ferries, operations',
      revision: 'A',
      state: 'in-review',
      approvedBy: null,
      sheets: 1,
      leftOut: [],
    });
    expect(seen.findings!.open.map(({ sentence }) => sentence).join()).toContain('777');
    expect(seen.segments[0]!.subnets.length + seen.sites.length).toBeGreaterThan(1);
    await view(link);
    expect(await listed(made.id)).toMatchObject({ views: 2, viewedAt: now.toISOString() });
    const opened = await application.database.knex('activity').where({ object_id: made.id }).select('action');
    expect(opened.map(({ action }: { action: string }) => action).sort()).toEqual([
      'share.created',
      'share.opened',
      'share.opened',
    ]);
    expect(await sheet(link)).toContain('<svg');
  });

  test('leaves out addresses and findings, wherever they are written', async () => {
    const { link } = await share({ showsAddresses: false, showsFindings: false });
    const seen = await view(link);
    expect(seen).toMatchObject({ findings: null, leftOut: ['addresses', 'findings'] });
    const shown = JSON.stringify(seen) + (await sheet(link));
    const addresses = shown.match(/\b\d{1,3}(\.\d{1,3}){3}\b/g) ?? [];
    expect(addresses).toEqual([]);
    expect(shown).toContain('software 7.2');
    expect((await sheet((await share()).link)).match(/198\.51\.100\.21/)).not.toBeNull();
  });

  test('opens with its passphrase alone, and only so many guesses are taken', async () => {
    const { link, share: made } = await share({ passphrase: 'low water at noon' });
    const token = tokenOf(link);
    const open = (passphrase?: string) =>
      guest.post('/api/share', { token, ...(passphrase && { passphrase }) });
    expect((await open().expect(200)).body).toEqual({ isLocked: true });
    expect((await open('high water').expect(401)).body).toMatchObject({ code: 'wrong-credentials' });
    await guest.post('/api/share/sheet', { token }).expect(401);
    expect((await view(link, 'low water at noon')).revision).toBe('A');
    expect((await listed(made.id)).views).toBe(1);
    for (let guess = 0; guess < allowances.passphrase.times; guess += 1) await open('high water').expect(401);
    await open('low water at noon').expect(429);
  });

  test('ends on its day and when it is revoked, in the same words as one that never was', async () => {
    const { link, share: made } = await share({ expiresOn: '2027-03-02' });
    await view(link);
    now = new Date('2027-03-03T00:00:00Z');
    const ended = await guest.post('/api/share', { token: tokenOf(link) }).expect(404);
    now = startOfTests;
    const revoked = await presales.delete(`/api/shares/${made.id}`).expect(200);
    expect(revoked.body).toMatchObject({ id: made.id, revokedBy: 'Some Presales' });
    const gone = await guest.post('/api/share', { token: tokenOf(link) }).expect(404);
    const never = await guest.post('/api/share', { token: 'x'.repeat(43) }).expect(404);
    const words = [ended, gone, never].map(({ body }) => (body as { message: string }).message);
    expect(new Set(words).size).toBe(1);
  });

  test('is nowhere kept as it is', async () => {
    const { link } = await share();
    const rows = await application.database.knex('shares').select();
    expect(JSON.stringify(rows)).not.toContain(tokenOf(link));
    expect(
      rows.some(({ token_hash: hash }: { token_hash: Buffer }) => hash.equals(hashLinkToken(tokenOf(link)))),
    ).toBe(true);
    await view(link);
    expect(application.logged()).not.toContain(tokenOf(link));
  });

  test.each([
    [{ expiresOn: '2027-02-28' }, 400, 'expiresOn'],
    [{ expiresOn: '2029-03-01' }, 400, 'expiresOn'],
    [{ label: '' }, 400, 'label'],
    [{ passphrase: 'short' }, 400, 'passphrase'],
    [{ madeBy: 'somebody' }, 400, 'madeBy'],
  ])('is refused with the field named: %j', async (wrong, status, path) => {
    const body = {
      revisionId,
      label: 'For them',
      expiresOn: '2027-03-10',
      showsAddresses: true,
      showsFindings: true,
      ...wrong,
    };
    const response = await presales.post(`/api/designs/${designId}/shares`, body).expect(status);
    expect(response.body).toMatchObject({ details: [{ path }] });
  });

  test('is not made for a revision of another design, nor for one that was taken back', async () => {
    const other = await addDesign(application, await addEngagement(application, workspace.id), pairDesign());
    const body = {
      revisionId,
      label: 'For them',
      expiresOn: '2027-03-10',
      showsAddresses: true,
      showsFindings: true,
    };
    await presales.post(`/api/designs/${other}/shares`, body).expect(404);
    const { link } = await share();
    const architect = await signIn(application, workspace.people.architect);
    await architect.post(`/api/revisions/${revisionId}/withdrawal`).expect(200);
    await presales.post(`/api/designs/${designId}/shares`, body).expect(409);
    await guest.post('/api/share', { token: tokenOf(link) }).expect(404);
  });
});

test('only what is an address is left out of a text', () => {
  expect(
    withoutWrittenAddresses(
      'From 198.51.100.21 to 2001:db8::1/64 by 10.0.0.0/8 at 10:30, version 7.2.1, 52:54:00:12:34:56.',
    ),
  ).toBe('From (left out) to (left out) by (left out) at 10:30, version 7.2.1, 52:54:00:12:34:56.');
});

test('no search engine is to keep any of it', async () => {
  for (const path of ['/api/session', '/share/x', '/sign-in']) {
    const { headers } = await guest.get(path);
    expect(headers['x-robots-tag']).toBe('noindex, nofollow');
  }
});
