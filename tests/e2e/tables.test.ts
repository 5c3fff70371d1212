import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { launchBrowser, type TestBrowser } from '../support/browser.ts';
import { newDesign, saved, signInAs, storedDesign } from './desk.ts';

let browser: TestBrowser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

describe('working in tables', () => {
  it('a VLAN is typed into its row, a bad one is refused there, and undo reaches over the pages', async () => {
    const page = await browser.newPage();
    await signInAs(page, 'architect');
    await newDesign(page, 'Tables', 'Demo');
    await page.getByRole('link', { name: 'Segments', exact: true }).click();
    const cell = page.getByRole('textbox', { name: 'VLAN of Ticketing at Gullhaven' });
    await cell.fill('4095');
    await cell.press('Enter');
    await page
      .getByRole('alert')
      .getByText(/VLAN of Ticketing at Gullhaven 4095 does not fit: .*reserved/)
      .waitFor();
    await cell.fill('112');
    await cell.press('Enter');
    await saved(page);
    await page.getByRole('link', { name: 'Numbering', exact: true }).click();
    await page.getByText('VLANs and subnets 10').click();
    const same = page.getByRole('textbox', { name: 'VLAN of Ticketing at Gullhaven' });
    expect(await same.inputValue()).toBe('112');
    await page.getByRole('button', { name: 'Undo' }).click();
    await expect.poll(() => same.inputValue()).toBe('110');
    await page.context().close();
  });

  it('what has no number gets the lowest free one, as one step', async () => {
    const page = await browser.newPage();
    await signInAs(page, 'architect');
    await newDesign(page, 'Unnumbered', 'Demo');
    await page.getByRole('link', { name: 'Numbering', exact: true }).click();
    for (const end of ['fw-ho', 'fw-gul']) {
      const cell = page.getByRole('textbox', { name: new RegExp(`^VNI of tn-ho-gul-a at ${end}$`) });
      await cell.fill('');
      await cell.press('Enter');
    }
    await page.getByRole('button', { name: 'Allocate what is unset' }).click();
    const dialog = page.getByRole('dialog');
    expect(await dialog.getByRole('row').count()).toBe(3);
    await dialog.getByRole('button', { name: 'Give these 2 numbers' }).click();
    await saved(page);
    const tunnels = Object.values((await storedDesign(page)).tunnels!) as readonly {
      readonly name: string;
      readonly a: { readonly vni?: number };
      readonly b: { readonly vni?: number };
    }[];
    const { a, b } = tunnels.find(({ name }) => name === 'tn-ho-gul-a')!;
    expect(a.vni).toBeGreaterThanOrEqual(10_001);
    expect(b.vni).toBe(a.vni);
    await page.context().close();
  });

  it('an inventory comes in from a spreadsheet, nothing of it while a cell is wrong', async () => {
    const page = await browser.newPage();
    await signInAs(page, 'architect');
    await newDesign(page, 'From a spreadsheet');
    await page.getByRole('link', { name: 'Segments', exact: true }).click();
    await page.getByRole('button', { name: 'Inventory as tables' }).click();
    const dialog = page.getByRole('dialog');
    const choose = (name: string, text: string) =>
      dialog.getByLabel('CSV files').setInputFiles({ name, mimeType: 'text/csv', buffer: Buffer.from(text) });
    await choose('devices.csv', 'Hostname;Type;Location\nsw-marl;Switch;Marl\n');
    await dialog.getByRole('row', { name: /Devices 2 Location Marl a site of this design/ }).waitFor();
    expect(await dialog.getByRole('button', { name: /^Bring in \d/ }).count()).toBe(0);
    await choose('sites.csv', 'Location\nMarl\n');
    await dialog.getByRole('button', { name: 'Bring in 2 rows' }).click();
    await dialog.waitFor({ state: 'detached' });
    await saved(page);
    const { sites, devices } = await storedDesign(page);
    expect(Object.values(sites!)).toEqual([{ name: 'Marl' }]);
    expect(Object.values(devices!)).toMatchObject([{ kind: 'switch', name: 'sw-marl' }]);
    await page.context().close();
  });
});
