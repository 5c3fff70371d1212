import { screen, waitFor, within } from '@testing-library/react';
import { beforeAll, expect, test } from 'vitest';
import type { EquipmentProfile } from '../../src/contract/profiles.ts';
import { fakeApi, json, refusal, sessionOf } from '../support/fake-api.ts';
import { renderRoute } from '../support/render-route.tsx';

// Loaded before the first test waits for it.
beforeAll(() => import('../../src/pages/profiles-page.tsx'));

const branch: EquipmentProfile = {
  id: 'p-1',
  profile: {
    name: 'Small branch gateway',
    basis: 'Bench, 11 March',
    encrypted: { oneFlowBps: 180_000_000, packetsPerSecond: 45_000 },
    oversizeDf: 'silent',
  },
  changedAt: '2026-03-18T14:32:00.000Z',
  changedBy: 'Mara Tadese',
  archivedAt: null,
  usedIn: [
    { designId: 'd-1', title: 'Terminals stretch', devices: 3, current: true },
    { designId: 'd-2', title: 'Standby controller', devices: 1, current: false },
  ],
};
const pair: EquipmentProfile = { ...branch, id: 'p-2', profile: { name: 'Pair' }, usedIn: [] };
const path = '/workspaces/w-1/profiles';
const list = json({ profiles: [pair, branch] });

test('a profile tells what was measured, by whom, where it is used and with which version', async () => {
  fakeApi({
    'GET /api/session': json(sessionOf('reviewer', ['workspace.read', 'design.read'])),
    [`GET /api${path}`]: list,
  });
  renderRoute(`${path}?profile=p-1`);
  expect(await screen.findByRole('heading', { name: 'Small branch gateway' })).toBeVisible();
  expect(screen.getByText('180 Mbit/s', { selector: 'span' })).toBeVisible();
  expect(screen.getByText('dropped without a word')).toBeVisible();
  const used = within(screen.getByRole('region', { name: 'Used in' }));
  expect(used.getByRole('link', { name: 'Terminals stretch' })).toHaveAttribute('href', '/designs/d-1');
  expect(used.getByText('an older version or one changed there')).toBeVisible();
  expect(screen.queryByRole('button', { name: 'Save' })).toBeNull();
  expect(screen.queryByRole('button', { name: 'New profile' })).toBeNull();
});

test('a change is saved as a whole, based on what was read', async () => {
  const { asked } = fakeApi({
    'GET /api/session': json(sessionOf('owner')),
    [`GET /api${path}`]: list,
    'PATCH /api/profiles/p-1': json(branch),
  });
  const { user } = renderRoute(`${path}?profile=p-1`);
  const table = await screen.findByLabelText('MAC table');
  expect(screen.getByRole('button', { name: 'Save' })).toBeDisabled();
  await user.type(table, '8000');
  await user.click(screen.getByRole('button', { name: 'Save' }));
  await waitFor(() =>
    expect(asked.find(({ method }) => method === 'PATCH')?.body).toEqual({
      profile: { ...branch.profile, macTable: 8000 },
      basedOn: branch.changedAt,
    }),
  );
});

test('what does not fit is named with field, value and way out, and nothing is sent', async () => {
  const { asked } = fakeApi({ 'GET /api/session': json(sessionOf('owner')), [`GET /api${path}`]: list });
  const { user } = renderRoute(path);
  await user.click(await screen.findByRole('button', { name: 'New profile' }));
  await user.type(screen.getAllByLabelText('One flow')[0]!, '180');
  await user.click(screen.getByRole('button', { name: 'Save' }));
  expect(
    screen.getAllByText(/One flow 180 does not fit: add the unit, such as 180 Mbit\/s\./).length,
  ).toBeGreaterThan(0);
  expect(screen.getByLabelText('Name')).toHaveAccessibleDescription('Name is empty: it has to be given.');
  expect(asked.every(({ method }) => method === 'GET')).toBe(true);
});

test('a name that is taken is said at the name', async () => {
  fakeApi({
    'GET /api/session': json(sessionOf('owner')),
    [`GET /api${path}`]: list,
    [`POST /api${path}`]: refusal(409, 'conflict', {
      message: "There is a profile called 'Pair' already; give this one another name.",
      details: [{ path: 'profile.name', value: 'Pair', expected: 'expected another name' }],
    }),
  });
  const { user } = renderRoute(path);
  await user.click(await screen.findByRole('button', { name: 'New profile' }));
  await user.type(screen.getByLabelText('Name'), 'Pair');
  await user.click(screen.getByRole('button', { name: 'Save' }));
  await waitFor(() =>
    expect(screen.getByLabelText('Name')).toHaveAccessibleDescription(
      /There is a profile called 'Pair' already/,
    ),
  );
});

test('what was typed is still there after a look at another profile', async () => {
  fakeApi({ 'GET /api/session': json(sessionOf('owner')), [`GET /api${path}`]: list });
  const { user } = renderRoute(`${path}?profile=p-1`);
  await user.type(await screen.findByLabelText('MAC table'), '8000');
  await user.click(screen.getByText('Pair'));
  expect(screen.getByLabelText('MAC table')).toHaveValue('');
  await user.click(screen.getByText('Small branch gateway'));
  expect(screen.getByLabelText('MAC table')).toHaveValue('8000');
});

test('a copy begins with all that the first says, under another name', async () => {
  fakeApi({ 'GET /api/session': json(sessionOf('owner')), [`GET /api${path}`]: list });
  const { user } = renderRoute(`${path}?profile=p-1`);
  await user.click(await screen.findByRole('button', { name: 'Copy' }));
  expect(screen.getByLabelText('Name')).toHaveValue('Small branch gateway (copy)');
  expect(screen.getAllByLabelText('One flow')[0]).toHaveValue('180 Mbit/s');
});

test('an empty workspace is told what a profile is good for', async () => {
  fakeApi({ 'GET /api/session': json(sessionOf('owner')), [`GET /api${path}`]: json({ profiles: [] }) });
  renderRoute(path);
  expect(await screen.findByText('No equipment is measured yet')).toBeVisible();
});
