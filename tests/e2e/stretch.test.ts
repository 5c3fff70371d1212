import AxeBuilder from '@axe-core/playwright';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { launchBrowser, type TestBrowser } from '../support/browser.ts';
import { newDesign, saved, signInAs, storedDesign } from './desk.ts';

let browser: TestBrowser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

describe('the Stretch assistant', () => {
  it('makes a design of a form, refuses what contradicts itself, and stretches a segment further', async () => {
    const page = await browser.newPage();
    await signInAs(page, 'architect');
    await newDesign(page, 'From a form', 'Stretch');
    const dialog = page.getByRole('dialog', { name: 'Stretch' });
    await dialog.getByRole('button', { name: 'Add by names…' }).click();
    await dialog.getByLabel('Names, one on each line').fill('Head office\nGullhaven\nOrrin Point\nSkerry');
    await dialog.getByText('Full mesh', { exact: true }).click();
    await dialog.getByText('Filtered', { exact: true }).click();
    await dialog.getByText(/Filtered: yes\. Expected a hub or a chain/).waitFor();
    expect(await dialog.getByRole('button', { name: 'Put it on the sheet' }).isDisabled()).toBe(true);
    await dialog.getByText('Hub', { exact: true }).click();
    await dialog.getByText(/^All \d+ checks pass$/).waitFor();
    const { violations } = await new AxeBuilder({ page })
      .include('[role=dialog]')
      .withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'])
      .analyze();
    expect(violations.map(({ id, nodes }) => `${id}: ${nodes[0]?.html}`)).toEqual([]);
    await dialog.getByRole('button', { name: 'Put it on the sheet' }).click();
    await dialog.waitFor({ state: 'hidden' });
    await saved(page);
    expect(Object.keys((await storedDesign(page)).tunnels!)).toHaveLength(3);

    await page.locator('.part-button', { hasText: 'Segment 1' }).click();
    await page.getByRole('button', { name: 'Stretch to another site…' }).click();
    const further = page.getByRole('dialog', { name: 'Stretch Segment 1 to another site' });
    await further.getByRole('textbox', { name: 'Name' }).fill('Fennel Quay');
    await further.getByRole('textbox', { name: 'Name' }).press('Tab');
    await further.getByText('Adds 1 site, 1 tunnel, 1 association.').waitFor();
    await further.getByRole('button', { name: 'Stretch it' }).click();
    await further.waitFor({ state: 'hidden' });
    await saved(page);
    expect(Object.keys((await storedDesign(page)).tunnels!)).toHaveLength(4);
    await page.getByRole('button', { name: 'Undo', exact: true }).first().click();
    await page.getByRole('button', { name: 'Undo', exact: true }).first().click();
    await page.getByText('Nothing is on the sheet yet').waitFor();
    await page.context().close();
  });
});
