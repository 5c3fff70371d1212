import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { Invitation } from '#contract/invitations.ts';
import { invitationListSchema, invitationSchema, offeredInvitationSchema } from '#contract/invitations.ts';
import type { TestApplication, TestBrowser, TestWorkspace } from '../../support/test-application.ts';
import {
  addPerson,
  addWorkspace,
  openBrowser,
  signIn,
  startTestApplication,
  testPassword,
  tokenOf,
} from '../../support/test-application.ts';
import { linkTo } from '../../support/queued-links.ts';

let now = new Date('2026-12-01T10:00:00Z');
let application: TestApplication;
let workspace: TestWorkspace;
let owner: TestBrowser;
let nobody: TestBrowser;

beforeAll(async () => {
  application = await startTestApplication({ clock: () => now });
  workspace = await addWorkspace(application);
  owner = await signIn(application, workspace.people.owner);
  nobody = await openBrowser(application);
});
afterAll(() => application.close());

let serial = 0;
const newAddress = () => `newcomer-${(serial += 1)}@ternwick.example`;
const path = (rest = '') => `/api/workspaces/${workspace.id}/invitations${rest}`;

async function invite(email: string, role = 'reviewer'): Promise<Invitation & { token: string }> {
  const response = await owner.post(path(), { email, role }).expect(201);
  return { ...invitationSchema.parse(response.body), token: await linkTo(application, email) };
}

const accept = (browser: TestBrowser, token: string, name?: string) =>
  browser.post('/api/invitation/acceptance', {
    token,
    ...(name === undefined ? {} : { newcomer: { name, password: testPassword } }),
  });

const activity = async (email: string) =>
  application.database
    .knex('activity')
    .where({ workspace_id: workspace.id, object_name: email })
    .orderBy('id')
    .select('action', 'details');

describe('inviting', () => {
  test('queues one mail with a link, keeps no key of it, and is on record', async () => {
    const email = newAddress();
    const invitation = await invite(email.toUpperCase());
    expect(invitation).toMatchObject({
      email,
      role: 'reviewer',
      invitedBy: workspace.people.owner.name,
      expiresAt: '2026-12-08T10:00:00.000Z',
      mail: { state: 'waiting' },
    });
    expect(invitation.token).toMatch(/^[\w-]{43}$/);
    const { rows } = await application.database.knex.raw<{ rows: { found: boolean }[] }>(
      'select invitations::text like ? as found from invitations where id = ?',
      [`%${invitation.token}%`, invitation.id],
    );
    expect(rows).toEqual([{ found: false }]);
    expect(await activity(email)).toEqual([{ action: 'person.invited', details: { role: 'reviewer' } }]);
    const list = invitationListSchema.parse((await owner.get(path()).expect(200)).body);
    expect(list.invitations[0]).toMatchObject({ id: invitation.id });
    expect(JSON.stringify(list)).not.toContain(invitation.token);
  });

  test('refuses who is a member, and who is invited already, and says how to go on', async () => {
    const { architect } = workspace.people;
    const member = await owner.post(path(), { email: architect.email, role: 'owner' }).expect(409);
    expect(member.body).toMatchObject({
      code: 'conflict',
      message: `${architect.name} (${architect.email}) is in this workspace already, as architect; change their role in the list of people.`,
    });
    const email = newAddress();
    await invite(email);
    const again = await owner.post(path(), { email, role: 'owner' }).expect(409);
    expect((again.body as { message: string }).message).toBe(
      `${email} was invited as reviewer on 1 December and has not come yet; send that invitation again, or take it back first.`,
    );
  });

  test.each([
    ['email', { email: 'no address', role: 'reviewer' }],
    ['email', { email: 'a@ternwick.example\r\nBcc: b@ternwick.example', role: 'reviewer' }],
    ['role', { email: 'a@ternwick.example', role: 'guest' }],
    ['workspaceId', { email: 'a@ternwick.example', role: 'reviewer', workspaceId: 'x' }],
  ])('names the field %s where it is at fault', async (field, body) => {
    const response = await owner.post(path(), body).expect(400);
    expect(response.body).toMatchObject({ details: [{ path: field }] });
  });

  test('sent again, the first link ends and the second holds for another week', async () => {
    const email = newAddress();
    const first = await invite(email);
    now = new Date(now.getTime() + 3 * 86_400_000);
    const sent = await owner.post(path(`/${first.id}/mail`)).expect(200);
    expect(invitationSchema.parse(sent.body).expiresAt).toBe(
      new Date(now.getTime() + 7 * 86_400_000).toISOString(),
    );
    await nobody.post('/api/invitation', { token: first.token }).expect(404);
    await nobody.post('/api/invitation', { token: await linkTo(application, email) }).expect(200);
    const mails = await application.database.knex('mails').where({ to_email: email }).orderBy('queued_at');
    expect(mails.map(({ state }) => state as string)).toEqual(['failed', 'queued']);
  });

  test('taken back, the link leads nowhere, the waiting mail stays at home, and another may follow', async () => {
    const email = newAddress();
    const invitation = await invite(email, 'presales');
    await owner.delete(path(`/${invitation.id}`)).expect(204);
    await nobody.post('/api/invitation', { token: invitation.token }).expect(404);
    await accept(nobody, invitation.token, 'Late Guest').expect(404);
    await owner.delete(path(`/${invitation.id}`)).expect(404);
    const [mail] = await application.database.knex('mails').where({ to_email: email });
    expect(mail).toMatchObject({ state: 'failed', content: null, problem: 'the invitation was taken back' });
    await invite(email);
    expect((await activity(email)).map(({ action }) => action as string)).toEqual([
      'person.invited',
      'invitation.revoked',
      'person.invited',
    ]);
  });

  test('another workspace’s invitation can’t be reached through one’s own', async () => {
    const invitation = await invite(newAddress());
    const elsewhere = await addWorkspace(application);
    const stranger = await signIn(application, elsewhere.people.owner);
    await stranger.post(`/api/workspaces/${elsewhere.id}/invitations/${invitation.id}/mail`).expect(404);
    await stranger.delete(`/api/workspaces/${elsewhere.id}/invitations/${invitation.id}`).expect(404);
    await nobody.post('/api/invitation', { token: invitation.token }).expect(200);
  });
});

describe('accepting', () => {
  test('a newcomer names themselves, chooses a password, and is signed in and a member', async () => {
    const email = newAddress();
    const { token } = await invite(email, 'installer');
    const browser = await openBrowser(application);
    const offered = await browser.post('/api/invitation', { token }).expect(200);
    expect(offeredInvitationSchema.parse(offered.body)).toMatchObject({
      email,
      role: 'installer',
      invitedBy: workspace.people.owner.name,
      hasAccount: false,
    });
    await accept(browser, token, 'Nina Newcomer').expect(200, { workspaceId: workspace.id });
    const session = (await browser.get('/api/session').expect(200)).body as Record<string, unknown>;
    expect(session).toMatchObject({
      person: { name: 'Nina Newcomer', email },
      memberships: [{ workspaceId: workspace.id, role: 'installer' }],
    });
    await accept(nobody, token, 'Second User').expect(404);
    await signIn(application, { email });
    expect(await activity('Nina Newcomer')).toEqual([
      { action: 'person.joined', details: { role: 'installer' } },
    ]);
  });

  test('who has an account joins with it, signed in, and is not made another', async () => {
    const person = await addPerson(application.database, 'Known Already');
    const { token } = await invite(person.email);
    const offered = await nobody.post('/api/invitation', { token }).expect(200);
    expect(offered.body).toMatchObject({ hasAccount: true });
    expect((await accept(nobody, token, 'Impostor').expect(401)).body).toMatchObject({
      code: 'not-signed-in',
    });
    const browser = await signIn(application, person);
    await accept(browser, token).expect(200);
    expect(await activity('Known Already')).toHaveLength(1);
    await accept(browser, token).expect(404);
  });

  test('who is signed in as somebody else is told so, and the invitation stands', async () => {
    const email = newAddress();
    const { token } = await invite(email);
    const refused = await accept(owner, token).expect(409);
    expect((refused.body as { message: string }).message).toContain(
      `The invitation is for ${email}, and you are signed in as ${workspace.people.owner.email}`,
    );
    await nobody.post('/api/invitation', { token }).expect(200);
  });

  test('a name, a password or a token that does not do is refused, and the invitation stands', async () => {
    const { token } = await invite(newAddress());
    const weak = { token, newcomer: { name: 'Nina', password: 'short' } };
    const response = await nobody.post('/api/invitation/acceptance', weak).expect(400);
    expect(response.body).toMatchObject({ details: [{ path: 'newcomer.password', value: 'not usable' }] });
    expect(response.text).not.toContain('short');
    await accept(nobody, token, 'Two\nlines').expect(400);
    await accept(nobody, token).expect(400);
    await accept(nobody, `${token}x`, 'Nina').expect(404);
    await nobody.post('/api/invitation', { token }).expect(200);
  });

  test('after seven days it is over; inviting anew needs no taking back', async () => {
    const email = newAddress();
    const { token } = await invite(email);
    now = new Date(now.getTime() + 7 * 86_400_000);
    await nobody.post('/api/invitation', { token }).expect(404);
    await accept(nobody, token, 'Late Guest').expect(404);
    await invite(email);
  });

  test('two that accept at the same moment are one', async () => {
    const { token } = await invite(newAddress());
    const browsers = [await openBrowser(application), await openBrowser(application)];
    const answers = await Promise.all(browsers.map((browser) => accept(browser, token, 'Twice Pressed')));
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 404]);
  });
});

test('what stands in a link is never logged, from the API nor from the page that it opens', async () => {
  const { token } = await invite(newAddress());
  await nobody.agent.get(`/invitation/${token}`);
  await nobody.agent.get(`/reset/${token}?x=1`);
  await nobody.post('/api/invitation', { token }).expect(200);
  expect(application.logged()).toContain('"path":"/invitation/…"');
  expect(application.logged()).not.toContain(token);
});

test('guessing at links is slowed down', async () => {
  const another = await application.another();
  const browser = await openBrowser(another);
  let status = 404;
  for (let tries = 0; tries < 120 && status === 404; tries += 1) {
    status = (await browser.post('/api/invitation', { token: `guess-${tries}` })).status;
  }
  expect(status).toBe(429);
  expect(tokenOf(await browser.get('/api/session'))).not.toBe('');
});
