import AxeBuilder from '@axe-core/playwright';
import type { Page } from 'playwright-core';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { launchBrowser, type TestBrowser } from '../support/browser.ts';
import { signInAs } from './desk.ts';

let browser: TestBrowser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

async function expectAccessible(page: Page): Promise<void> {
  const { violations } = await new AxeBuilder({ page })
    .withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'])
    .exclude('iframe')
    .analyze();
  expect(
    violations.map(({ id, nodes }) => `${id}: ${nodes.map(({ target }) => target.join(' ')).join('; ')}`),
  ).toEqual([]);
}

test('an owner invites somebody, whose mail is in the mailbox, whose link leads into the workspace', async () => {
  const page = await browser.newPage();
  await signInAs(page, 'owner');
  await page.getByRole('link', { name: 'People' }).click();
  await page.getByRole('button', { name: 'Invite' }).click();
  const dialog = page.getByRole('dialog');
  await dialog.getByLabel('E-mail').fill('n.newcomer@ternwick.example');
  await dialog.getByLabel('Role').selectOption('Reviewer');
  await dialog.getByRole('button', { name: 'Send the invitation' }).click();
  await page
    .getByRole('table', { name: 'Invitations' })
    .getByText(/^sent /)
    .waitFor();
  await expectAccessible(page);

  await page.getByRole('button', { name: /^Account of/ }).click();
  await page.getByRole('menuitem', { name: 'Mailbox' }).click();
  const mail = page.frameLocator('iframe');
  const link = mail.getByRole('link', { name: 'Open the invitation' });
  await link.waitFor();
  await expectAccessible(page);
  const opened = page.context().waitForEvent('page');
  await link.click();
  const asOwner = await opened;
  await asOwner.getByText(/and the invitation is for n\.newcomer@ternwick\.example/).waitFor();
  await asOwner.getByRole('button', { name: 'Sign out and go on' }).click();
  await asOwner.getByLabel('Your name').fill('Nina Newcomer');
  await expectAccessible(asOwner);
  await asOwner.getByLabel(/^Password/).fill('a lead of four hundred km');
  await asOwner.getByRole('button', { name: 'Make my account and join' }).click();
  await asOwner.getByRole('heading', { name: 'Engagements' }).waitFor();
  await asOwner.getByRole('link', { name: 'People' }).click();
  await asOwner.getByText('Nina Newcomer').waitFor();
  expect(await asOwner.getByRole('button', { name: 'Invite' }).count()).toBe(0);
});
