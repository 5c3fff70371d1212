import { screen, waitFor } from '@testing-library/react';
import { expect, test } from 'vitest';
import { engagement, fakeApi, json, refusal, sessionOf } from '../support/fake-api.ts';
import { renderRoute } from '../support/render-route.tsx';

function accountApi(answer: Parameters<typeof fakeApi>[0][string] = json(sessionOf('architect'))) {
  return fakeApi({
    'GET /api/session': json(sessionOf('architect')),
    'GET /api/workspaces/w-1/engagements': json({ engagements: [engagement()] }),
    'PUT /api/account/password': answer,
  });
}

async function fill(
  user: ReturnType<typeof renderRoute>['user'],
  current: string,
  next: string,
  again: string,
) {
  await user.type(await screen.findByLabelText('Current password'), current);
  await user.type(screen.getByLabelText('New password'), next);
  await user.type(screen.getByLabelText('New password again'), `${again}{Enter}`);
}

test('a changed password is confirmed', async () => {
  const { asked } = accountApi();
  const { user } = renderRoute('/account/password');
  await fill(user, 'saltmarsh', 'low tide at seven', 'low tide at seven');
  expect(await screen.findByText(/Your password is changed/)).toBeVisible();
  expect(asked.find(({ method }) => method === 'PUT')?.body).toEqual({
    current: 'saltmarsh',
    next: 'low tide at seven',
  });
});

test('a new password that is too short, or typed in two ways, is told and not sent', async () => {
  const { asked } = accountApi();
  const { user } = renderRoute('/account/password');
  await fill(user, 'saltmarsh', 'low tide', 'low tides');
  await waitFor(() =>
    expect(screen.getByLabelText('New password')).toHaveAccessibleDescription(
      'The new password has 8 characters: expected at least 12 characters.',
    ),
  );
  await user.type(screen.getByLabelText('New password'), ' at seven');
  await user.keyboard('{Enter}');
  await waitFor(() =>
    expect(screen.getByLabelText('New password again')).toHaveAccessibleDescription(
      'The two new passwords differ. Type the same one twice.',
    ),
  );
  expect(asked.some(({ method }) => method === 'PUT')).toBe(false);
});

test('a wrong current password is told at its field', async () => {
  accountApi(refusal(403, 'wrong-credentials'));
  const { user, address } = renderRoute('/account/password');
  await fill(user, 'wrong', 'low tide at seven', 'low tide at seven');
  await waitFor(() =>
    expect(screen.getByLabelText('Current password')).toHaveAccessibleDescription(
      'This is not your current password. Type it again.',
    ),
  );
  expect(address()).toBe('/account/password');
});

test('any other refusal is told in the form', async () => {
  accountApi(refusal(503, 'unavailable', { message: 'The database is away.' }));
  const { user } = renderRoute('/account/password');
  await fill(user, 'saltmarsh', 'low tide at seven', 'low tide at seven');
  expect(await screen.findByRole('alert')).toHaveTextContent('The database is away.');
});
