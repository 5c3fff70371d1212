import AxeBuilder from '@axe-core/playwright';
import type { Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { launchBrowser, type TestBrowser } from '../support/browser.ts';
import { atRest, newDesign, node, signInAs, storedDesign } from './desk.ts';

let browser: TestBrowser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

const seriousFindings = async (page: Page): Promise<readonly string[]> => {
  const { violations } = await new AxeBuilder({ page })
    .withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'])
    .analyze();
  return violations
    .filter(({ impact }) => impact === 'serious' || impact === 'critical')
    .map(({ id, help, nodes }) => `${id}: ${help} (${nodes[0]?.target.join(' ')})`);
};

describe('load and outage', () => {
  it('lays demands onto the design, names what fills first, and takes a what-if and an edit', async () => {
    const page = await browser.newPage();
    await signInAs(page, 'architect');
    await newDesign(page, 'Load of the terminals', 'Demo');
    await page.getByRole('tab', { name: 'Load' }).click();
    await page.getByText(/fw-ske wan1 on Coastal access, out, fills first: 65\s%/).waitFor();
    await page.locator('[data-part="tag"]').first().waitFor();
    expect(await page.locator('[data-part="tag"]').first().textContent()).toMatch(/first full, 65\s%/);

    const times = page.getByLabel('Times');
    await times.fill('2000');
    await times.press('Enter');
    await page.getByText('Times 2000 is not possible. Type a number above 0, up to 1000.').waitFor();
    await times.fill('3');
    await times.press('Enter');
    await page
      .getByText(/is asked for 19\.5\sMbit\/s and has 10\sMbit\/s: only 51\s% of this fits/)
      .waitFor();
    expect(new URL(page.url()).searchParams.get('times')).toBe('3');

    await page.getByText('Demands', { exact: true }).click();
    const rate = page.getByLabel('Rate there of Camera pictures');
    await rate.fill('2 Mbit/s');
    await rate.press('Enter');
    await page.getByText(/fills first/).waitFor();
    await expect
      .poll(async () => (await storedDesign(page)).demands?.['dm-cctv'])
      .toMatchObject({ forwardBps: 2_000_000 });
    expect(await seriousFindings(page)).toEqual([]);
  });

  it('fails what is pressed, shows who is parted, ranks every failure, and a reader may do it too', async () => {
    const page = await browser.newPage();
    await signInAs(page, 'reviewer');
    await page
      .getByRole('link', { name: /with planted faults/ })
      .first()
      .click();
    await node(page, 'sheet').waitFor();
    await page.getByRole('tab', { name: 'Outage' }).click();
    await page.getByRole('table', { name: 'Every single failure' }).waitFor();
    await atRest(page);
    await node(page, 'devices/fw-orr').click();
    await page.getByRole('heading', { name: 'What has failed' }).waitFor();
    expect(new URL(page.url()).searchParams.get('failed')).toBe('devices/fw-orr');
    await page.reload();
    await page.getByRole('list', { name: 'Failed' }).getByText('fw-orr').waitFor();

    await node(page, 'devices/fw-orr').focus();
    await page.keyboard.press('Enter');
    await expect.poll(() => new URL(page.url()).searchParams.get('failed')).toBeNull();

    await page.getByRole('row', { name: /^Coastal access/ }).click();
    await page.getByText('Sites', { exact: true }).click();
    await page.getByRole('row', { name: /^Gullhaven.*parted/ }).waitFor();
    expect(await seriousFindings(page)).toEqual([]);
  });
});
