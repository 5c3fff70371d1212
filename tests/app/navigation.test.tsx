import { act, screen, waitFor } from '@testing-library/react';
import { afterEach, expect, test, vi } from 'vitest';
import { engagement, fakeApi, json, refusal, sessionOf, strangerSession } from '../support/fake-api.ts';
import { renderRoute } from '../support/render-route.tsx';

const failing = vi.hoisted(() => ({ error: null as Error | null }));
vi.mock('../../src/features/rules-reference/rules-list.tsx', () => ({
  RulesList: () => {
    if (failing.error !== null) throw failing.error;
    return null;
  },
}));
afterEach(() => {
  failing.error = null;
  vi.restoreAllMocks();
});

const engagementsPath = '/workspaces/w-1/engagements';
function signedInApi(answers: Parameters<typeof fakeApi>[0] = {}) {
  return fakeApi({
    'GET /api/session': json(sessionOf('architect')),
    [`GET /api${engagementsPath}`]: json({ engagements: [engagement()] }),
    ...answers,
  });
}
const heading = (name: string) => screen.findByRole('heading', { level: 1, name });

test('the start is the workspace last worked in, else the first', async () => {
  const session = sessionOf('architect');
  const second = {
    workspaceId: 'w-2',
    workspaceName: 'Harbour works',
    role: 'reviewer' as const,
    actions: [],
    needsSecondStep: false,
  };
  signedInApi({
    'GET /api/session': json({ ...session, memberships: [...session.memberships, second] }),
    'GET /api/workspaces/w-2/engagements': json({ engagements: [] }),
  });
  window.localStorage.setItem('longpatch.workspace', 'w-2');
  const { address, user } = renderRoute('/');
  await heading('Engagements');
  expect(address()).toBe('/workspaces/w-2/engagements');
  await user.click(screen.getByRole('button', { name: 'Harbour works' }));
  await user.click(screen.getByRole('menuitemradio', { name: 'Ternwick Net' }));
  await waitFor(() => expect(address()).toBe(engagementsPath));
  await waitFor(() => expect(window.localStorage.getItem('longpatch.workspace')).toBe('w-1'));
});

test('who is in no workspace is told whom to ask', async () => {
  signedInApi({ 'GET /api/session': json({ ...sessionOf('architect'), memberships: [] }) });
  renderRoute('/');
  expect(await screen.findByText('You are in no workspace')).toBeVisible();
});

test('going to another page names the tab after it and puts the focus at its content', async () => {
  signedInApi();
  const { user } = renderRoute(engagementsPath);
  await heading('Engagements');
  expect(document.title).toBe('Engagements – Longpatch');
  await user.click(screen.getByRole('link', { name: 'Checks' }));
  await heading('Reference of checks');
  await waitFor(() => expect(document.title).toBe('Reference of checks – Longpatch'));
  await waitFor(() => expect(screen.getByRole('main')).toHaveFocus());
});

test('filtering leaves the focus where it is', async () => {
  signedInApi();
  const { user, address } = renderRoute('/checks');
  await heading('Reference of checks');
  await user.type(screen.getByLabelText('Word, standard or check'), 'vni');
  expect(screen.getByLabelText('Word, standard or check')).toHaveFocus();
  expect(screen.getByLabelText('Word, standard or check')).toHaveValue('vni');
  expect(address()).toBe('/checks?q=vni');
});

test('the first stop of the Tab key leads past the bar', async () => {
  signedInApi();
  const { user } = renderRoute(engagementsPath);
  await heading('Engagements');
  await user.tab();
  expect(screen.getByRole('link', { name: 'Skip to the content' })).toHaveFocus();
  await user.keyboard('{Enter}');
  expect(screen.getByRole('main')).toHaveFocus();
});

test('an address that leads nowhere says so and leads back', async () => {
  signedInApi();
  const { user } = renderRoute('/toaster');
  expect(await screen.findByText('/toaster')).toBeVisible();
  await user.click(screen.getByRole('link', { name: 'To the engagements' }));
  await heading('Engagements');
});

test('a page that fails leaves the bar and the other pages working', async () => {
  vi.spyOn(console, 'error').mockImplementation(() => undefined);
  signedInApi();
  failing.error = new Error('A table is missing.');
  const { user } = renderRoute('/checks');
  await heading('This page failed');
  expect(screen.getByRole('alert')).toHaveTextContent('A table is missing. What was saved is safe.');
  expect(screen.getByRole('banner')).toBeVisible();
  await user.click(screen.getByRole('link', { name: 'To the start' }));
  await heading('Engagements');
});

test('a part that cannot be loaded after an update of the server asks for a reload', async () => {
  vi.spyOn(console, 'error').mockImplementation(() => undefined);
  signedInApi();
  failing.error = new TypeError('Failed to fetch dynamically imported module: /assets/x.js');
  renderRoute('/checks');
  await heading('This page failed');
  expect(screen.getByRole('alert')).toHaveTextContent('The server may have been updated');
});

test('a session that ends under the reader leads to the sign-in with the way back', async () => {
  signedInApi();
  const { user, address } = renderRoute(`${engagementsPath}?q=ferr`);
  await heading('Engagements');
  signedInApi({
    'GET /api/session': json(strangerSession),
    [`GET /api${engagementsPath}`]: refusal(401, 'not-signed-in'),
  });
  await user.click(screen.getByLabelText('Show archived'));
  await heading('Sign in');
  expect(new URLSearchParams(address().split('?')[1]).get('return')).toBe(
    `${engagementsPath}?q=ferr&archived=1`,
  );
});

test('without a server the page says so and can be tried again', async () => {
  vi.stubGlobal('fetch', () => Promise.reject(new TypeError('failed to fetch')));
  const { user } = renderRoute(engagementsPath);
  expect(await screen.findByRole('alert')).toHaveTextContent('The server cannot be reached.');
  signedInApi();
  await user.click(screen.getByRole('button', { name: 'Try again' }));
  await heading('Engagements');
});

test('a lost network is told for as long as it is lost', async () => {
  signedInApi();
  renderRoute(engagementsPath);
  await heading('Engagements');
  const onLine = vi.spyOn(navigator, 'onLine', 'get').mockReturnValue(false);
  act(() => void window.dispatchEvent(new Event('offline')));
  expect(screen.getByText(/^No network\./)).toBeVisible();
  onLine.mockReturnValue(true);
  act(() => void window.dispatchEvent(new Event('online')));
  expect(screen.queryByText(/^No network\./)).not.toBeInTheDocument();
});

test('the account’s menu says who is signed in as what, and changes the theme', async () => {
  signedInApi();
  const { user } = renderRoute(engagementsPath);
  await heading('Engagements');
  await user.click(screen.getByRole('button', { name: 'Account of Rosa Halloran' }));
  expect(screen.getByText('Architect in Ternwick Net')).toBeVisible();
  await user.click(screen.getByRole('menuitemradio', { name: 'Slate' }));
  expect(document.documentElement.dataset.theme).toBe('slate');
});
