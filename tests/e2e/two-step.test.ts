import type { Page } from 'playwright-core';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { codeAt } from '../support/authenticator.ts';
import { launchBrowser, type TestBrowser } from '../support/browser.ts';
import { signInAs } from './desk.ts';

let browser: TestBrowser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

const newcomer = { name: 'Edda Brandt', password: 'low tide at seven' };
const email = 'e.brandt@ternwick.example';

/** A request of the page's session, as its own scripts make them. */
const call = async <T>(page: Page, method: string, path: string, data?: unknown): Promise<T> => {
  const session = (await (await page.request.get('/api/session')).json()) as { csrfToken: string };
  const headers = { 'x-csrf-token': session.csrfToken };
  const answer = await page.request.fetch(path, { method, headers, ...(data === undefined ? {} : { data }) });
  expect(answer.ok(), `${method} ${path}: ${await answer.text()}`).toBe(true);
  return (await answer.json().catch(() => null)) as T;
};

/** Somebody with an account of their own, invited by the demo's owner; signed in on the page that is answered. */
const invited = async (): Promise<Page> => {
  const owner = await browser.newPage();
  await signInAs(owner, 'owner');
  const { pathname } = new URL(owner.url());
  const workspace = `/api${pathname.replace(/\/engagements$/, '')}`;
  await call(owner, 'POST', `${workspace}/invitations`, { email, role: 'reviewer' });
  let token: string | undefined;
  await expect
    .poll(
      async () => {
        const { mails } = await call<{ mails: readonly { id: string; to: string }[] }>(
          owner,
          'GET',
          `${workspace}/mailbox`,
        );
        const mail = mails.find(({ to }) => to.includes(email));
        if (mail === undefined) return undefined;
        const { text } = await call<{ text: string }>(owner, 'GET', `${workspace}/mailbox/${mail.id}`);
        token = /\/invitation\/([\w-]+)/.exec(text)?.[1];
        return token;
      },
      { timeout: 20_000 },
    )
    .toBeDefined();
  await owner.context().close();
  const page = await browser.newPage();
  await call(page, 'POST', '/api/invitation/acceptance', { token, newcomer });
  return page;
};

it('two-step sign-in is set up with a code of the shown secret, and a code leads in afterwards', async () => {
  const page = await invited();
  await page.goto('/account/two-step');
  await page.getByRole('button', { name: 'Set up' }).click();
  const shown = page.getByText(/^([A-Z2-7]{4} ){7}[A-Z2-7]{4}$/);
  const secret = (await shown.innerText()).replace(/\s/g, '');
  const first = codeAt(secret, new Date());
  await page.getByLabel('Six digits from the app').fill(first);
  await page.getByLabel('Your password').fill(newcomer.password);
  await page.getByRole('button', { name: 'Switch on' }).click();
  await page.getByRole('heading', { name: 'Recovery codes' }).waitFor();
  await page.getByRole('button', { name: 'I have kept them' }).click();
  await page.getByText('10 of 10 unused').waitFor();

  await page.getByRole('button', { name: `Account of ${newcomer.name}` }).click();
  await page.getByRole('menuitem', { name: 'Sign out' }).click();
  await page.getByLabel('E-mail').fill(email);
  await page.getByLabel('Password', { exact: true }).fill(newcomer.password);
  await page.getByRole('button', { name: 'Sign in', exact: true }).click();
  const code = page.getByLabel('Code from your authenticator app');
  await code.fill(first);
  await page.getByRole('button', { name: 'Sign in', exact: true }).click();
  await page.getByText(/does not fit, has run out or was used before/).waitFor();
  // The next one fits already: a clock may be half a minute slow.
  await code.fill(codeAt(secret, new Date(Date.now() + 30_000)));
  await page.getByRole('button', { name: 'Sign in', exact: true }).click();
  await page.getByRole('heading', { name: 'Engagements' }).waitFor();
  await page.context().close();
});
