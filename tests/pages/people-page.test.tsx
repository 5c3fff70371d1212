import { screen, waitFor, within } from '@testing-library/react';
import { expect, test } from 'vitest';
import type { Member } from '#contract/workspaces.ts';
import type { Session } from '#contract/session.ts';
import { fakeApi, json, nothing, refusal, sessionOf } from '../support/fake-api.ts';
import { renderRoute } from '../support/render-route.tsx';

const mara: Member = {
  personId: 'p-2',
  name: 'Mara Tadese',
  email: 'm.tadese@ternwick.example',
  role: 'owner',
  hasSecondStep: true,
  lastSeenAt: new Date(Date.now() - 5 * 60_000).toISOString(),
};
const rosa: Member = {
  ...mara,
  personId: 'p-1',
  name: 'Rosa Halloran',
  email: 'r.halloran@ternwick.example',
  role: 'architect',
  hasSecondStep: false,
  lastSeenAt: null,
};

function peopleApi(session: Session, answers: Parameters<typeof fakeApi>[0] = {}) {
  const seen = session.memberships[0]?.actions.includes('people.manage') === true;
  const people = [mara, rosa].map((each) => (seen ? each : { ...each, hasSecondStep: null }));
  return fakeApi({
    'GET /api/session': json(session),
    'GET /api/workspaces/w-1/people': json({ people }),
    'GET /api/workspaces/w-1/invitations': json({ invitations: [] }),
    ...answers,
  });
}
const rowOf = async (name: string) => within(await screen.findByRole('row', { name: new RegExp(name) }));

test('an owner sees who is there with what sign-in, and gives another role', async () => {
  const { asked } = peopleApi(sessionOf('owner'), {
    'PATCH /api/workspaces/w-1/people/p-2': json({ ...mara, role: 'reviewer' }),
  });
  const { user } = renderRoute('/workspaces/w-1/people');
  const row = await rowOf('Mara Tadese');
  expect(row.getByText('on')).toBeVisible();
  expect(row.getByText('5 min ago')).toBeVisible();
  expect((await rowOf('Rosa Halloran')).getByText('never')).toBeVisible();
  await user.click(row.getByRole('button', { name: 'Role of Mara Tadese: Owner' }));
  await user.click(screen.getByRole('menuitemradio', { name: 'Reviewer' }));
  expect(await screen.findByText('Mara Tadese is reviewer now.')).toBeVisible();
  expect(asked.find(({ method }) => method === 'PATCH')?.body).toEqual({ role: 'reviewer' });
});

test('why a role stays is said', async () => {
  peopleApi(sessionOf('owner'), {
    'PATCH /api/workspaces/w-1/people/p-2': refusal(409, 'conflict', {
      message: 'The only owner stays one.',
    }),
  });
  const { user } = renderRoute('/workspaces/w-1/people');
  await user.click((await rowOf('Mara Tadese')).getByRole('button', { name: /^Role of/ }));
  await user.click(screen.getByRole('menuitemradio', { name: 'Presales' }));
  expect(await screen.findByText('The role is as it was. The only owner stays one.')).toBeVisible();
});

test('somebody is removed after it was said what that means', async () => {
  const { asked } = peopleApi(sessionOf('owner'), { 'DELETE /api/workspaces/w-1/people/p-2': nothing });
  const { user } = renderRoute('/workspaces/w-1/people');
  await user.click(await screen.findByRole('button', { name: 'Remove Mara Tadese' }));
  const dialog = within(screen.getByRole('dialog'));
  expect(dialog.getByText(/What they did stays, under their name/)).toBeVisible();
  await user.click(dialog.getByRole('button', { name: 'Remove' }));
  expect(await screen.findByText('Mara Tadese is removed.')).toBeVisible();
  expect(asked.some(({ method }) => method === 'DELETE')).toBe(true);
});

test('others see the list without commands, and can leave', async () => {
  let session = sessionOf('reviewer', ['workspace.read']);
  peopleApi(session, {
    'GET /api/session': () => Response.json(session),
    'DELETE /api/workspaces/w-1/people/p-1': (asked) => {
      session = { ...session, memberships: [] };
      return nothing(asked);
    },
  });
  const { user } = renderRoute('/workspaces/w-1/people');
  const row = await rowOf('Mara Tadese');
  expect(row.getByText('Owner')).toBeVisible();
  expect(row.queryByRole('button')).toBeNull();
  expect(screen.queryByRole('columnheader', { name: /Two-step/ })).toBeNull();
  expect(screen.queryByRole('button', { name: 'Invite…' })).toBeNull();
  expect(screen.queryByRole('link', { name: 'Settings' })).toBeNull();
  await user.click(screen.getByRole('button', { name: 'Leave the workspace' }));
  await user.click(within(screen.getByRole('dialog')).getByRole('button', { name: 'Leave' }));
  expect(await screen.findByText('You are in no workspace')).toBeVisible();
});

test('whoever is in no workspace starts one and is led into it', async () => {
  let session: Session = { ...sessionOf('owner'), memberships: [] };
  const { asked } = fakeApi({
    'GET /api/session': () => Response.json(session),
    'POST /api/workspaces': () => {
      session = sessionOf('owner');
      return Response.json(session.memberships[0], { status: 201 });
    },
    'GET /api/workspaces/w-1/engagements': json({ engagements: [] }),
  });
  const { user, address } = renderRoute('/');
  await user.click(await screen.findByRole('button', { name: 'New workspace' }));
  await user.click(screen.getByRole('button', { name: 'Start' }));
  expect(screen.getByLabelText('Name')).toHaveAccessibleDescription(/^Name is empty/);
  await user.type(screen.getByLabelText('Name'), 'Ternwick Net{Enter}');
  await waitFor(() => expect(address()).toBe('/workspaces/w-1/engagements'));
  expect(asked.find(({ method }) => method === 'POST')?.body).toEqual({ name: 'Ternwick Net' });
});

test('settings require two-step sign-in of everybody, or say what is in the way', async () => {
  const settings = { id: 'w-1', name: 'Ternwick Net', requiresSecondStep: false, withoutSecondStep: 2 };
  let isSecured = false;
  const { asked } = fakeApi({
    'GET /api/session': json(sessionOf('owner')),
    'GET /api/workspaces/w-1': json(settings),
    'PATCH /api/workspaces/w-1': () =>
      isSecured
        ? Response.json({ ...settings, requiresSecondStep: true })
        : Response.json(
            { code: 'conflict', message: 'You have not set it up yourself.', requestId: 'r-1' },
            { status: 409 },
          ),
  });
  const { user } = renderRoute('/workspaces/w-1/settings');
  const box = await screen.findByLabelText('Required of everybody here');
  expect(screen.getByText(/^2 people have not set it up/)).toBeVisible();
  await user.click(box);
  expect(await screen.findByRole('link', { name: 'Set up two-step sign-in' })).toHaveAttribute(
    'href',
    '/account/two-step',
  );
  expect(box).not.toBeChecked();
  isSecured = true;
  await user.click(box);
  await waitFor(() => expect(screen.getByLabelText('Required of everybody here')).toBeChecked());
  await user.clear(screen.getByLabelText('Name of the workspace'));
  await user.tab();
  expect(screen.getByLabelText('Name of the workspace')).toHaveAccessibleDescription(/^Name is empty/);
  expect(asked.filter(({ method }) => method === 'PATCH')).toHaveLength(2);
});
