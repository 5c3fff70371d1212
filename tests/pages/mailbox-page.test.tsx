import { screen, within } from '@testing-library/react';
import { expect, test } from 'vitest';
import { fakeApi, json, sessionOf } from '../support/fake-api.ts';
import { renderRoute } from '../support/render-route.tsx';

const first = {
  id: 'm-1',
  to: 'a@ternwick.example',
  subject: 'Mara invites you',
  keptAt: '2026-12-01T10:00:00.000Z',
};
const second = { ...first, id: 'm-2', subject: 'Rosa asks you to review' };
const words = {
  from: 'Longpatch <longpatch@mail.example>',
  text: 'Open it: http://127.0.0.1/invitation/x and <b>go</b>',
  source: 'Subject: Mara',
};
const mailboxApi = (mails = [first, second], isKeeping = true, role: 'owner' | 'architect' = 'owner') =>
  fakeApi({
    'GET /api/session': json(role === 'owner' ? sessionOf('owner') : sessionOf('architect', [])),
    'GET /api/workspaces/w-1/mailbox': json({ isKeeping, mails }),
    'GET /api/workspaces/w-1/mailbox/m-1': json({ ...first, ...words }),
    'GET /api/workspaces/w-1/mailbox/m-2': json({ ...second, ...words }),
  });

test('the newest mail is open, as its reader would have it, in a frame that can do nothing but open links', async () => {
  mailboxApi();
  renderRoute('/workspaces/w-1/mailbox');
  const frame = await screen.findByTitle('The mail ‘Mara invites you’');
  expect(frame).toHaveAttribute('src', '/api/workspaces/w-1/mailbox/m-1/page');
  expect(frame).toHaveAttribute('sandbox', 'allow-popups allow-popups-to-escape-sandbox');
});

test('another is opened by a press, as plain text with links; the address holds both', async () => {
  mailboxApi();
  const { user, address } = renderRoute('/workspaces/w-1/mailbox');
  const table = await screen.findByRole('table', { name: 'Kept mails' });
  await user.click(within(table).getByText('Rosa asks you to review'));
  await user.click(screen.getByRole('radio', { name: 'Plain text' }));
  expect(address()).toBe('/workspaces/w-1/mailbox?mail=m-2&as=text');
  const article = screen.getByRole('article', { name: 'Rosa asks you to review' });
  expect(await within(article).findByRole('link')).toHaveAttribute('href', 'http://127.0.0.1/invitation/x');
  expect(within(article).getByText(/<b>go<\/b>/)).toBeVisible();
});

test('an empty mailbox says what would stand in it, and one beside a mail server why nothing does', async () => {
  mailboxApi([]);
  renderRoute('/workspaces/w-1/mailbox');
  expect(await screen.findByText('No mail yet')).toBeVisible();
});

test('with a mail server it says where mails go', async () => {
  mailboxApi([], false);
  renderRoute('/workspaces/w-1/mailbox');
  expect(await screen.findByText('Mails go to the mail server')).toBeVisible();
});

test('nobody but owners finds it', async () => {
  mailboxApi([first], true, 'architect');
  renderRoute('/workspaces/w-1/mailbox');
  expect(await screen.findByRole('heading', { level: 1 })).not.toHaveTextContent('Mailbox');
});
