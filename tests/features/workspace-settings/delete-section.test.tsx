import { QueryClientProvider } from '@tanstack/react-query';
import { render, screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { expect, test, vi } from 'vitest';
import { DeleteSection } from '../../../src/features/workspace-settings/delete-section.tsx';
import { createQueryClient } from '../../../src/lib/query-client.ts';
import { fakeApi, json, nothing, sessionOf } from '../../support/fake-api.ts';

const settings = { id: 'w-1', name: 'Ternwick Net', requiresSecondStep: false, withoutSecondStep: 1 };
const conditions = { lastOwnerOf: [], aloneIn: [], needsCode: false, isOffered: true };

function open(shown: object = conditions) {
  const api = fakeApi({
    'GET /api/session': json(sessionOf('owner')),
    'GET /api/account/deletion': json(shown),
    'POST /api/workspaces/w-1/deletion': nothing,
  });
  const onDeleted = vi.fn();
  render(
    <QueryClientProvider client={createQueryClient()}>
      <DeleteSection settings={settings} onDeleted={onDeleted} />
    </QueryClientProvider>,
  );
  return { ...api, onDeleted, user: userEvent.setup() };
}

test('a workspace is deleted once its name and the password are typed', async () => {
  const { asked, onDeleted, user } = open();
  await user.click(screen.getByRole('button', { name: 'Delete the workspace…' }));
  await user.type(await screen.findByLabelText('Type the name: Ternwick Net'), 'Ternwick{Enter}');
  expect(screen.getByLabelText('Type the name: Ternwick Net')).toHaveAccessibleDescription(
    'This is not the workspace’s name. Type Ternwick Net.',
  );
  expect(screen.getByLabelText('Your password')).toHaveAccessibleDescription(
    'The password is empty. Type it.',
  );
  expect(asked.some(({ method }) => method === 'POST')).toBe(false);
  await user.type(screen.getByLabelText('Type the name: Ternwick Net'), ' Net');
  await user.type(screen.getByLabelText('Your password'), 'a password for tests{Enter}');
  await waitFor(() => expect(onDeleted).toHaveBeenCalled());
  expect(asked.find(({ method }) => method === 'POST')).toMatchObject({
    body: { name: 'Ternwick Net', password: 'a password for tests' },
  });
});

test('the people of the demo are told that its workspace stays', async () => {
  const { user } = open({ ...conditions, isOffered: false });
  await user.click(screen.getByRole('button', { name: 'Delete the workspace…' }));
  await screen.findByText(/The demo’s workspace stays/);
  expect(screen.queryByRole('button', { name: 'Delete for good' })).not.toBeInTheDocument();
});
