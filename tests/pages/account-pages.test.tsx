import { screen, within } from '@testing-library/react';
import { expect, test } from 'vitest';
import type { ApiToken, DeletionPreview, SignedInSession } from '#contract/account.ts';
import { deviceWords } from '../../src/features/sessions/device-words.ts';
import { fakeApi, json, nothing, refusal, sessionOf, strangerSession } from '../support/fake-api.ts';
import { renderRoute } from '../support/render-route.tsx';

const here: SignedInSession = {
  id: 's-1',
  isThisOne: true,
  userAgent: 'Mozilla/5.0 (X11; Linux x86_64)',
  address: '192.0.2.7',
  startedAt: new Date().toISOString(),
  lastUsedAt: new Date().toISOString(),
  isKept: false,
};
const there: SignedInSession = {
  ...here,
  id: 's-2',
  isThisOne: false,
  userAgent: 'Mozilla/5.0 (Linux; Android 15; Mobile)',
  address: '198.51.100.4',
  isKept: true,
};

test.each([
  ['Mozilla/5.0 (X11; Linux x86_64) Gecko/20100101', 'Computer'],
  ['Mozilla/5.0 (Linux; Android 15) Mobile Safari/537.36', 'Phone'],
  ['Mozilla/5.0 (iPhone; CPU like Mac OS X)', 'Phone'],
  ['Mozilla/5.0 (Linux; Android 15) Safari/537.36', 'Tablet'],
  ['curl/8.5', 'Program'],
  ['', 'Unknown'],
])('what calls itself “%s” is listed as %s', (userAgent, words) => {
  expect(deviceWords(userAgent)).toBe(words);
});

test('sessions are told apart, and ended one by one or all but this one', async () => {
  let sessions = [here, there];
  const { asked } = fakeApi({
    'GET /api/session': json(sessionOf('reviewer')),
    'GET /api/account/sessions': () => Response.json({ sessions }),
    'DELETE /api/account/sessions/s-2': (request) => {
      sessions = [here];
      return nothing(request);
    },
  });
  const { user } = renderRoute('/account/sessions');
  const row = within((await screen.findByText('198.51.100.4')).closest('tr')!);
  expect(row.getByText(/^Phone/)).toHaveTextContent('Phone, kept signed in');
  const own = within(screen.getByText('192.0.2.7').closest('tr')!);
  expect(own.getByText(/^Computer/)).toHaveTextContent('Computer (this one)');
  expect(own.queryByRole('button')).toBeNull();
  await user.click(row.getByRole('button', { name: 'End the session of the phone at 198.51.100.4' }));
  expect(await screen.findByText('You are signed in nowhere else.')).toBeVisible();
  expect(screen.getByRole('button', { name: 'End all others' })).toBeDisabled();
  expect(asked.filter(({ method }) => method === 'DELETE')).toHaveLength(1);
});

const token: ApiToken = {
  id: 't-1',
  name: 'Nightly checks',
  prefix: 'lp_Ab12cd',
  scope: 'read',
  workspaceName: null,
  createdAt: new Date().toISOString(),
  expiresAt: new Date(Date.now() + 90 * 86_400_000).toISOString(),
  lastUsedAt: null,
  revokedAt: null,
};

test('a token is made with name, scope, workspace and last day, shown once, and revoked', async () => {
  let tokens: readonly ApiToken[] = [];
  const { asked } = fakeApi({
    'GET /api/session': json(sessionOf('architect')),
    'GET /api/account/tokens': () => Response.json({ tokens }),
    'POST /api/account/tokens': () => {
      tokens = [token];
      return Response.json({ secret: 'lp_Ab12cd-the-whole', token }, { status: 201 });
    },
    'DELETE /api/account/tokens/t-1': () => {
      tokens = [{ ...token, revokedAt: new Date().toISOString() }];
      return Response.json(tokens[0]);
    },
  });
  const { user } = renderRoute('/account/tokens');
  expect(await screen.findByText('No token yet')).toBeVisible();
  await user.click(screen.getByRole('button', { name: 'New token' }));
  await user.click(screen.getByRole('button', { name: 'Make the token' }));
  expect(screen.getByLabelText('Name')).toHaveAccessibleDescription(/^Name is empty/);
  await user.type(screen.getByLabelText('Name'), 'Nightly checks');
  await user.click(screen.getByRole('radio', { name: 'Read and write designs' }));
  await user.selectOptions(screen.getByLabelText('In'), 'Ternwick Net');
  await user.click(screen.getByRole('button', { name: 'Make the token' }));
  expect(await screen.findByText('lp_Ab12cd-the-whole')).toBeVisible();
  expect(asked.find(({ method }) => method === 'POST')?.body).toMatchObject({
    name: 'Nightly checks',
    scope: 'write',
    workspaceId: 'w-1',
    expiresOn: expect.stringMatching(/^\d{4}-\d\d-\d\d$/) as string,
  });
  await user.click(screen.getByRole('button', { name: 'I have kept it' }));
  expect(screen.queryByText('lp_Ab12cd-the-whole')).toBeNull();
  await user.click(screen.getByRole('button', { name: 'Revoke Nightly checks' }));
  expect(await screen.findByText(/^revoked /)).toBeVisible();
  expect(screen.queryByRole('button', { name: 'Revoke Nightly checks' })).toBeNull();
});

const free: DeletionPreview = { lastOwnerOf: [], aloneIn: [], needsCode: false, isOffered: true };

test('the last owner is told whom to make one, and where', async () => {
  const lastOwnerOf = [{ workspaceId: 'w-1', workspaceName: 'Ternwick Net' }];
  fakeApi({
    'GET /api/session': json(sessionOf('owner')),
    'GET /api/account/deletion': json({ ...free, lastOwnerOf }),
  });
  renderRoute('/account/deletion');
  expect(await screen.findByRole('link', { name: 'People of Ternwick Net' })).toHaveAttribute(
    'href',
    '/workspaces/w-1/people',
  );
  expect(screen.queryByLabelText('Your password')).toBeNull();
});

test('deleting the account says what goes with it, asks for the password and leads out', async () => {
  let session = sessionOf('architect');
  let isRight = false;
  const { asked } = fakeApi({
    'GET /api/session': () => Response.json(session),
    'GET /api/account/deletion': json({
      ...free,
      aloneIn: [{ workspaceId: 'w-2', workspaceName: 'Harbour works' }],
      needsCode: true,
    }),
    'POST /api/account/deletion': (request) => {
      if (!isRight) {
        return refusal(403, 'wrong-credentials', {
          details: [
            { path: 'password', value: 'what was typed', expected: 'expected your current password' },
          ],
        })(request);
      }
      session = strangerSession;
      return nothing(request);
    },
  });
  const { user } = renderRoute('/account/deletion');
  expect(await screen.findByText('Harbour works')).toBeVisible();
  await user.click(screen.getByRole('button', { name: 'Delete my account for good' }));
  expect(screen.getByLabelText('Your password')).toHaveAccessibleDescription(
    'The password is empty. Type it.',
  );
  await user.type(screen.getByLabelText('Your password'), 'low tide');
  await user.type(screen.getByLabelText(/^Code from your/), '123456{Enter}');
  expect(await screen.findByText('This is not your current password. Type it again.')).toBeVisible();
  isRight = true;
  await user.click(screen.getByRole('button', { name: 'Delete my account for good' }));
  expect(await screen.findByRole('heading', { name: 'Sign in' })).toBeVisible();
  expect(asked.find(({ method }) => method === 'POST')?.body).toEqual({
    password: 'low tide',
    code: '123456',
  });
});

test('the first owner of an empty server comes with the code that it printed', async () => {
  let session = strangerSession;
  const { asked } = fakeApi({
    'GET /api/session': () => Response.json(session),
    'GET /api/first-owner': json({ isAwaited: true }),
    'POST /api/first-owner': ({ body }) => {
      if ((body as { code: string }).code !== '12ab-34cd') {
        return Response.json(
          { code: 'wrong-credentials', message: 'This is not the code.', requestId: 'r-1' },
          { status: 403 },
        );
      }
      session = sessionOf('owner');
      return Response.json(session, { status: 201 });
    },
    'GET /api/workspaces/w-1/engagements': json({ engagements: [] }),
  });
  const { user } = renderRoute('/first-owner');
  const code = await screen.findByLabelText('Code that the server printed at its start');
  await user.type(code, 'guess');
  await user.type(screen.getByLabelText('Your name'), 'Mara Tadese');
  await user.type(screen.getByLabelText('E-mail'), 'm.tadese');
  await user.type(screen.getByLabelText(/^Password/), 'short');
  await user.type(screen.getByLabelText('Name of your workspace'), 'Ternwick Net{Enter}');
  expect(await screen.findByText(/^The password has 5 characters/)).toBeVisible();
  expect(screen.getByLabelText('E-mail')).toHaveAccessibleDescription(
    /^E-mail m\.tadese: expected an e-mail/,
  );
  await user.type(screen.getByLabelText('E-mail'), '@ternwick.example');
  await user.type(screen.getByLabelText(/^Password/), ' but not so short{Enter}');
  expect(await screen.findByText('This is not the code.')).toBeVisible();
  await user.clear(code);
  await user.type(code, '12ab-34cd{Enter}');
  expect(await screen.findByText('No engagement yet')).toBeVisible();
  expect(asked.filter(({ method }) => method === 'POST')).toHaveLength(2);
});

test('whoever comes after the first owner is led to the sign-in', async () => {
  fakeApi({
    'GET /api/session': json(strangerSession),
    'GET /api/first-owner': json({ isAwaited: false }),
  });
  renderRoute('/first-owner');
  expect(await screen.findByRole('link', { name: 'Sign in' })).toHaveAttribute('href', '/sign-in');
});
