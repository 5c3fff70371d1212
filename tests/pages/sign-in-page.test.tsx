import { screen, waitFor, within } from '@testing-library/react';
import { expect, test } from 'vitest';
import type { Session } from '#contract/session.ts';
import { engagement, fakeApi, json, refusal, sessionOf, strangerSession } from '../support/fake-api.ts';
import { renderRoute } from '../support/render-route.tsx';

/** A server at which signing in works. */
function signingInApi(answers: Parameters<typeof fakeApi>[0] = {}) {
  let session: Session = strangerSession;
  const takeIn = (): Response => {
    session = sessionOf('architect');
    return Response.json(session);
  };
  return fakeApi({
    'GET /api/session': () => Response.json(session),
    'POST /api/session': takeIn,
    'POST /api/session/demo': takeIn,
    'DELETE /api/session': () => {
      session = strangerSession;
      return new Response(null, { status: 204 });
    },
    'GET /api/workspaces/w-1/engagements': json({ engagements: [engagement()] }),
    ...answers,
  });
}
const heading = (name: string) => screen.findByRole('heading', { level: 1, name });

test('e-mail and password lead to the engagements', async () => {
  const { asked } = signingInApi();
  const { user, address } = renderRoute('/sign-in');
  await heading('Sign in');
  expect(screen.getByLabelText('E-mail')).toHaveFocus();
  await user.keyboard('R.Halloran@ternwick.example{Tab}saltmarsh');
  await user.click(screen.getByLabelText('Keep me signed in'));
  await user.click(screen.getByRole('button', { name: 'Sign in' }));
  await heading('Engagements');
  expect(address()).toBe('/workspaces/w-1/engagements');
  expect(asked.find(({ method }) => method === 'POST')).toMatchObject({
    path: '/api/session',
    body: { email: 'r.halloran@ternwick.example', password: 'saltmarsh', keep: true },
  });
});

test('what cannot be an e-mail address, and an empty password, are told where they stand and never sent', async () => {
  const { asked } = signingInApi();
  const { user } = renderRoute('/sign-in');
  await user.type(await screen.findByLabelText('E-mail'), 'rosa{Enter}');
  await waitFor(() =>
    expect(screen.getByLabelText('E-mail')).toHaveAccessibleDescription(
      'E-mail rosa: expected an e-mail address such as r.halloran@ternwick.example.',
    ),
  );
  expect(screen.getByLabelText('Password')).toHaveAccessibleDescription('The password is empty. Type it.');
  expect(asked.some(({ method }) => method === 'POST')).toBe(false);
});

test.each([
  [refusal(401, 'wrong-credentials'), /do not belong together/],
  [
    refusal(429, 'too-many-requests', { retryAfterSeconds: 90 }),
    'Too many tries. Wait 2 minutes, then try again.',
  ],
  [refusal(503, 'unavailable', { message: 'The database is away.' }), 'The database is away.'],
])('a refusal stands in the form, which keeps what was typed (%#)', async (answer, sentence) => {
  signingInApi({ 'POST /api/session': answer });
  const { user, address } = renderRoute('/sign-in');
  await user.type(await screen.findByLabelText('E-mail'), 'r.halloran@ternwick.example');
  await user.type(screen.getByLabelText('Password'), 'wrong{Enter}');
  expect(await screen.findByRole('alert')).toHaveTextContent(sentence);
  expect(screen.getByLabelText('E-mail')).toHaveValue('r.halloran@ternwick.example');
  expect(address()).toBe('/sign-in');
});

test('the password can be looked at', async () => {
  signingInApi();
  const { user } = renderRoute('/sign-in');
  const password = await screen.findByLabelText('Password');
  expect(password).toHaveAttribute('type', 'password');
  await user.click(screen.getByRole('button', { name: 'Show the password' }));
  expect(screen.getByLabelText('Password')).toHaveAttribute('type', 'text');
});

test('while the demo is on, one press signs in as one of its people', async () => {
  const { asked } = signingInApi();
  const { user } = renderRoute('/sign-in');
  await user.click(await screen.findByRole('button', { name: /Owner.*Mara Tadese/ }));
  await heading('Engagements');
  expect(asked.find(({ method }) => method === 'POST')).toMatchObject({
    path: '/api/session/demo',
    body: { role: 'owner' },
  });
});

test('without a demo nobody is offered', async () => {
  signingInApi({ 'GET /api/session': json({ ...strangerSession, demo: [] }) });
  renderRoute('/sign-in');
  await heading('Sign in');
  await screen.findByLabelText('E-mail');
  expect(screen.queryByRole('region', { name: /Demo/ })).not.toBeInTheDocument();
});

test('who comes to a page without being signed in gets there after signing in', async () => {
  signingInApi();
  const { user, address } = renderRoute('/checks?severity=advisory');
  await heading('Sign in');
  expect(address()).toBe('/sign-in?return=%2Fchecks%3Fseverity%3Dadvisory');
  await user.click(await screen.findByRole('button', { name: /Rosa Halloran/ }));
  await heading('Reference of checks');
  expect(address()).toBe('/checks?severity=advisory');
});

test('a way back that leads elsewhere is not gone', async () => {
  signingInApi({ 'GET /api/session': json(sessionOf('architect')) });
  const { address } = renderRoute('/sign-in?return=%2F%2Felsewhere.example');
  await heading('Engagements');
  expect(address()).toBe('/workspaces/w-1/engagements');
});

test('signing out leads back to the sign-in and forgets what was shown', async () => {
  signingInApi();
  const { user, address } = renderRoute('/sign-in');
  await user.click(await screen.findByRole('button', { name: /Rosa Halloran/ }));
  await heading('Engagements');
  await user.click(screen.getByRole('button', { name: 'Account of Rosa Halloran' }));
  await user.click(screen.getByRole('menuitem', { name: 'Sign out' }));
  await heading('Sign in');
  await waitFor(() => expect(address()).toBe('/sign-in'));
  expect(screen.queryByText('Saltmarsh Ferries')).not.toBeInTheDocument();
});

test('the page says what everybody must know before planning with it', async () => {
  signingInApi();
  renderRoute('/sign-in');
  await heading('Sign in');
  const notes = screen.getByRole('region', { name: 'Notes' });
  expect(within(notes).getByText(/never stored here/)).toBeVisible();
  expect(within(notes).getByText(/joins failure domains/)).toBeVisible();
});
