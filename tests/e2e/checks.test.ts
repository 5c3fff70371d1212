import type { Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { launchBrowser, type TestBrowser } from '../support/browser.ts';
import { saved, signInAs } from './desk.ts';

let browser: TestBrowser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

/** Goes to the checks of a design of one's own that has the demo's planted faults. */
const openChecks = async (page: Page, title: string): Promise<void> => {
  await page.getByRole('main').getByRole('button', { name: 'New design' }).first().click();
  const dialog = page.getByRole('dialog');
  await dialog.getByText('Demo', { exact: true }).click();
  await dialog.getByLabel('Which demo').selectOption('planted-faults');
  await dialog.getByLabel('Title').fill(title);
  await dialog.getByRole('button', { name: 'Create and open' }).click();
  await page.locator('.sheet-canvas').waitFor();
  await page.getByRole('navigation', { name: 'Design' }).getByRole('link', { name: 'Checks' }).click();
  await page.getByRole('heading', { name: 'Checks', exact: true }).waitFor();
};
const row = (page: Page, words: RegExp) =>
  page.getByRole('main').getByRole('button', { name: words, expanded: false });

describe('the checks of a design', () => {
  it('a finding is waived with a reason, counts no longer, is seen muted on the sheet, and counts again once withdrawn', async () => {
    const page = await browser.newPage();
    await signInAs(page, 'owner');
    await openChecks(page, 'Waived');
    await page.getByText('12 open.').waitFor();
    await row(page, /VNI 10120 at Head office/).click();
    await page.getByRole('button', { name: 'Waive…' }).click();
    const dialog = page.getByRole('dialog', { name: 'Waive a finding' });
    await dialog.getByRole('button', { name: 'Waive', exact: true }).click();
    await dialog.getByText(/^Reason is empty\./).waitFor();
    await dialog.getByLabel('Reason').fill('The far end translates the VNI on purpose');
    await dialog.getByLabel(/^Holds until/).fill('2020-01-01');
    await dialog.getByText(/1 January 2020 is past\. Choose a day from/).waitFor();
    await dialog.getByRole('button', { name: '30 days' }).click();
    await dialog.getByRole('button', { name: 'Waive', exact: true }).click();
    await page.getByText('11 open, 1 waived.').waitFor();

    await page.getByRole('link', { name: 'Show on the sheet' }).click();
    await page.locator('.sheet-canvas').waitFor();
    await page.getByRole('tab', { name: 'Findings 11' }).waitFor();
    await page.getByText('Blocking: VNIs differ (waived)').waitFor();

    await page.goBack();
    await page.getByText('11 open, 1 waived.').waitFor();
    await row(page, /VNI 10120 at Head office.*waived until/).click();
    await page.getByRole('button', { name: 'Withdraw the waiver' }).click();
    await page.getByText('12 open.').waitFor();
  });

  it('all safe fixes are told first, left out one by one, and made and undone as one step', async () => {
    const page = await browser.newPage();
    await signInAs(page, 'architect');
    await openChecks(page, 'Mended');
    await page.getByRole('button', { name: 'Safe fixes…' }).click();
    const dialog = page.getByRole('dialog', { name: 'Apply safe fixes' });
    await dialog.getByRole('button', { name: 'Apply 12 fixes' }).waitFor();
    await dialog.getByText(/^Sets the VNI of tn-ho-gul-b at Gullhaven to 10120/).waitFor();
    await dialog.getByRole('checkbox', { name: 'Apply the fix for finding 7' }).click();
    await dialog.getByText(/^Stays: VNI 10120 at Head office/).waitFor();
    await dialog.getByRole('button', { name: 'Apply 11 fixes' }).click();
    await page.getByText('1 open.').waitFor();
    await saved(page);
    await page.getByRole('button', { name: 'Undo', exact: true }).first().click();
    await page.getByText('12 open.').waitFor();
    expect(await row(page, /VNI 10120 at Head office/).count()).toBe(1);
  });
});
