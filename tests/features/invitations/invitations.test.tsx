import { QueryClientProvider } from '@tanstack/react-query';
import { render, screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { expect, test, vi } from 'vitest';
import type { Invitation } from '#contract/invitations.ts';
import { InviteDialog } from '../../../src/features/invitations/invite-dialog.tsx';
import { mailWords } from '../../../src/features/invitations/mail-words.ts';
import { PendingInvitations } from '../../../src/features/invitations/pending-invitations.tsx';
import { createQueryClient } from '../../../src/lib/query-client.ts';
import { fakeApi, json, nothing, refusal, sessionOf } from '../../support/fake-api.ts';

const path = '/api/workspaces/w-1/invitations';
const at = new Date().toISOString();
const invitation: Invitation = {
  id: 'i-1',
  email: 'n.newcomer@ternwick.example',
  role: 'reviewer',
  invitedBy: 'Mara Tadese',
  invitedAt: at,
  expiresAt: new Date(Date.now() + 86_400_000).toISOString(),
  mail: { state: 'failed', at, problem: 'the mail server answered ‘550 No such mailbox’' },
};

function show(content: React.ReactNode) {
  render(<QueryClientProvider client={createQueryClient()}>{content}</QueryClientProvider>);
  return userEvent.setup();
}

test('somebody is invited with an address and a role', async () => {
  const { asked } = fakeApi({
    'GET /api/session': json(sessionOf('owner')),
    [`POST ${path}`]: json(invitation, 201),
  });
  const onClose = vi.fn();
  const user = show(<InviteDialog workspaceId="w-1" onClose={onClose} />);
  await user.type(screen.getByLabelText('E-mail'), 'nobody{Enter}');
  expect(screen.getByRole('alert')).toHaveTextContent('E-mail nobody: expected an e-mail address');
  await user.type(screen.getByLabelText('E-mail'), '@Ternwick.example');
  await user.selectOptions(screen.getByLabelText('Role'), 'Installer');
  await user.click(screen.getByRole('button', { name: 'Send the invitation' }));
  await waitFor(() => expect(onClose).toHaveBeenCalled());
  expect(asked.at(-1)).toMatchObject({
    method: 'POST',
    body: { email: 'nobody@ternwick.example', role: 'installer' },
  });
});

test('why an address is not invited stands at the address', async () => {
  fakeApi({
    'GET /api/session': json(sessionOf('owner')),
    [`POST ${path}`]: refusal(409, 'conflict', {
      message: 'Rosa is in this workspace already.',
      details: [{ path: 'email', value: 'r@ternwick.example', expected: 'expected somebody else' }],
    }),
  });
  const user = show(<InviteDialog workspaceId="w-1" onClose={() => undefined} />);
  await user.type(screen.getByLabelText('E-mail'), 'r@ternwick.example{Enter}');
  await waitFor(() =>
    expect(screen.getByLabelText('E-mail')).toHaveAccessibleDescription('Rosa is in this workspace already.'),
  );
});

test('who has not come yet can be sent another link, or taken back', async () => {
  const { asked } = fakeApi({
    'GET /api/session': json(sessionOf('owner')),
    [`GET ${path}`]: json({ invitations: [invitation] }),
    [`POST ${path}/i-1/mail`]: json(invitation),
    [`DELETE ${path}/i-1`]: nothing,
  });
  const user = show(<PendingInvitations workspaceId="w-1" />);
  expect(await screen.findByText(/^not sent: the mail server answered ‘550/)).toBeVisible();
  await user.click(
    screen.getByRole('button', { name: 'Send the invitation of n.newcomer@ternwick.example again' }),
  );
  await waitFor(() => expect(asked.some((each) => each.path === `${path}/i-1/mail`)).toBe(true));
  const takeBack = screen.getByRole('button', { name: /^Take the invitation/ });
  await waitFor(() => expect(takeBack).toBeEnabled());
  await user.click(takeBack);
  await waitFor(() => expect(asked.some(({ method }) => method === 'DELETE')).toBe(true));
});

test('nobody invited, nothing but that said', async () => {
  fakeApi({
    'GET /api/session': json(sessionOf('owner')),
    [`GET ${path}`]: json({ invitations: [] }),
  });
  show(<PendingInvitations workspaceId="w-1" />);
  expect(await screen.findByText(/^Nobody is invited just now/)).toBeVisible();
});

test.each([
  [null, 'none; send it again', true],
  [{ state: 'sent', at, problem: null }, 'sent just now', false],
  [{ state: 'waiting', at, problem: null }, 'on its way', false],
  [{ state: 'waiting', at, problem: 'busy' }, 'waits and is tried again: busy', true],
  [
    { state: 'uncertain', at, problem: 'the server stopped' },
    'the server stopped. If it has not, send it again.',
    true,
  ],
] as const)('a mail of %j is told as %j', (mail, words, isAmiss) => {
  expect(mailWords(mail, new Date())).toEqual({ words, isAmiss });
});
