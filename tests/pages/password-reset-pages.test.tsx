import { screen } from '@testing-library/react';
import { expect, test } from 'vitest';
import { fakeApi, json, nothing, refusal, strangerSession } from '../support/fake-api.ts';
import { renderRoute } from '../support/render-route.tsx';

const resetApi = (answers: Parameters<typeof fakeApi>[0] = {}) =>
  fakeApi({
    'GET /api/session': json(strangerSession),
    'POST /api/password-reset': () => new Response(null, { status: 202 }),
    'POST /api/password-reset/link': json({ email: 'r.halloran@ternwick.example' }),
    'POST /api/password-reset/password': nothing,
    ...answers,
  });

test('a link is asked for from the sign-in, and what is said gives nobody’s account away', async () => {
  const { asked } = resetApi();
  const { user } = renderRoute('/sign-in');
  await user.click(await screen.findByRole('link', { name: 'Password lost' }));
  await user.type(await screen.findByLabelText('E-mail that you sign in with'), 'rosa{Enter}');
  expect(screen.getByRole('alert')).toHaveTextContent('E-mail rosa: expected an e-mail address');
  await user.type(screen.getByLabelText('E-mail that you sign in with'), '@ternwick.example{Enter}');
  expect(await screen.findByText(/If somebody signs in as rosa@ternwick\.example/)).toBeVisible();
  expect(asked.find(({ method }) => method === 'POST')?.body).toEqual({ email: 'rosa@ternwick.example' });
});

test('too many questions are told with how long to wait', async () => {
  resetApi({
    'POST /api/password-reset': refusal(429, 'too-many-requests', { retryAfterSeconds: 600 }),
  });
  const { user } = renderRoute('/reset');
  await user.type(
    await screen.findByLabelText('E-mail that you sign in with'),
    'rosa@ternwick.example{Enter}',
  );
  expect(await screen.findByRole('alert')).toHaveTextContent('Wait 10 minutes, then try again');
});

test('a link sets a new password and leads to the sign-in', async () => {
  const { asked } = resetApi();
  const { user, address } = renderRoute('/reset/secret');
  await user.type(await screen.findByLabelText(/^New password/), 'short{Enter}');
  expect(screen.getByRole('alert')).toHaveTextContent(
    'The new password has 5 characters: expected at least 12 characters.',
  );
  await user.type(screen.getByLabelText(/^New password/), ' and then longer{Enter}');
  await screen.findByRole('heading', { level: 1, name: 'Sign in' });
  expect(address()).toBe('/sign-in');
  expect(screen.getByText('Your new password is set. Sign in with it.')).toBeVisible();
  expect(asked.filter(({ method }) => method === 'POST').at(-1)?.body).toEqual({
    token: 'secret',
    password: 'short and then longer',
  });
});

test('a link that is over leads to another', async () => {
  resetApi({ 'POST /api/password-reset/link': refusal(404, 'not-found') });
  renderRoute('/reset/secret');
  expect(await screen.findByText('This link holds no longer')).toBeVisible();
  expect(screen.getByRole('link', { name: 'Ask for another' })).toHaveAttribute('href', '/reset');
});
