import { screen, waitFor } from '@testing-library/react';
import { expect, test } from 'vitest';
import type { OfferedInvitation } from '#contract/invitations.ts';
import type { Session } from '#contract/session.ts';
import { engagement, fakeApi, json, refusal, sessionOf, strangerSession } from '../support/fake-api.ts';
import { renderRoute } from '../support/render-route.tsx';

const offered: OfferedInvitation = {
  workspaceName: 'Ternwick Net',
  invitedBy: 'Mara Tadese',
  email: 'n.newcomer@ternwick.example',
  role: 'reviewer',
  expiresAt: '2026-12-08T10:00:00.000Z',
  hasAccount: false,
};

function invitingApi(
  offer: Partial<OfferedInvitation> = {},
  first: Session = strangerSession,
  answers: Parameters<typeof fakeApi>[0] = {},
) {
  let session = first;
  return fakeApi({
    'GET /api/session': () => Response.json(session),
    'DELETE /api/session': () => {
      session = strangerSession;
      return new Response(null, { status: 204 });
    },
    'POST /api/invitation': json({ ...offered, ...offer }),
    'POST /api/invitation/acceptance': () => {
      session = sessionOf('reviewer');
      return Response.json({ workspaceId: 'w-1' });
    },
    'GET /api/workspaces/w-1/engagements': json({ engagements: [engagement()] }),
    ...answers,
  });
}

const posted = (asked: ReturnType<typeof fakeApi>['asked'], path: string) =>
  asked.filter((each) => each.method === 'POST' && each.path === path).map(({ body }) => body);

test('a newcomer names themselves, chooses a password and is in the workspace', async () => {
  const { asked } = invitingApi();
  const { user, address } = renderRoute('/invitation/secret');
  await screen.findByRole('heading', { level: 1, name: 'Join Ternwick Net' });
  expect(screen.getByText(/invited by Mara Tadese/)).toBeVisible();
  expect(screen.getByLabelText('Your name')).toHaveFocus();
  await user.keyboard('Nina Newcomer{Tab}saltmarsh');
  await user.click(screen.getByRole('button', { name: 'Make my account and join' }));
  expect(screen.getByLabelText(/^Password/)).toHaveAccessibleDescription(
    'The password has 9 characters: expected at least 12 characters.',
  );
  expect(posted(asked, '/api/invitation/acceptance')).toEqual([]);
  await user.type(screen.getByLabelText(/^Password/), ' ferries{Enter}');
  await screen.findByRole('heading', { level: 1, name: 'Engagements' });
  expect(address()).toBe('/workspaces/w-1/engagements');
  expect(posted(asked, '/api/invitation/acceptance')).toEqual([
    { token: 'secret', newcomer: { name: 'Nina Newcomer', password: 'saltmarsh ferries' } },
  ]);
  expect(screen.getByText('You are in Ternwick Net now, as reviewer.')).toBeVisible();
  expect(asked.every(({ path }) => !path.includes('secret'))).toBe(true);
});

test('who has an account is led to the sign-in and back', async () => {
  invitingApi({ hasAccount: true });
  renderRoute('/invitation/secret');
  expect(await screen.findByRole('link', { name: 'Sign in and join' })).toHaveAttribute(
    'href',
    '/sign-in?return=%2Finvitation%2Fsecret',
  );
});

test('who is signed in with the invited address joins with one press', async () => {
  const { asked } = invitingApi(
    { hasAccount: true, email: 'r.halloran@ternwick.example' },
    sessionOf('owner'),
  );
  const { user } = renderRoute('/invitation/secret');
  await user.click(await screen.findByRole('button', { name: 'Join' }));
  await screen.findByRole('heading', { level: 1, name: 'Engagements' });
  expect(posted(asked, '/api/invitation/acceptance')).toEqual([{ token: 'secret' }]);
});

test('who is signed in as somebody else is told so, and can go on as nobody', async () => {
  invitingApi({}, sessionOf('owner'));
  const { user, address } = renderRoute('/invitation/secret');
  expect(
    await screen.findByText(
      /signed in as r\.halloran@ternwick\.example, and the invitation is for n\.newcomer/,
    ),
  ).toBeVisible();
  await user.click(screen.getByRole('button', { name: 'Sign out and go on' }));
  expect(await screen.findByLabelText('Your name')).toBeVisible();
  expect(address()).toBe('/invitation/secret');
});

test('an invitation that is over says so and leads on', async () => {
  invitingApi({}, strangerSession, { 'POST /api/invitation': refusal(404, 'not-found') });
  renderRoute('/invitation/secret');
  expect(await screen.findByText('This invitation holds no longer')).toBeVisible();
  expect(screen.getByRole('link', { name: 'Sign in' })).toHaveAttribute('href', '/sign-in');
});

test('what goes wrong while accepting is told beneath, and what was typed stays', async () => {
  invitingApi({}, strangerSession, {
    'POST /api/invitation/acceptance': refusal(503, 'unavailable', { message: 'Try again in a moment.' }),
  });
  const { user } = renderRoute('/invitation/secret');
  await user.type(await screen.findByLabelText('Your name'), 'Nina');
  await user.type(screen.getByLabelText(/^Password/), 'saltmarsh ferries{Enter}');
  await waitFor(() => expect(screen.getByRole('alert')).toHaveTextContent('Try again in a moment.'));
  expect(screen.getByLabelText('Your name')).toHaveValue('Nina');
});
