import type { Page } from 'playwright-core';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { launchBrowser, type TestBrowser } from '../support/browser.ts';
import { atRest, node, signInAs } from './desk.ts';

let browser: TestBrowser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

const hops = (page: Page) => page.getByRole('list', { name: /^Hops/ }).getByRole('button');
const side = (page: Page) => page.getByRole('complementary', { name: 'Frame trace' });
const openDemo = async (page: Page): Promise<void> => {
  await signInAs(page, 'reviewer');
  await page
    .getByRole('link', { name: /phase 1/ })
    .first()
    .click();
  await node(page, 'sheet').waitFor();
};

it('a reviewer follows a frame to the hop where it no longer fits, and sends the length that does', async () => {
  const page = await browser.newPage();
  await openDemo(page);
  await page.getByRole('tab', { name: 'Frame trace' }).click();
  await page.getByRole('button', { name: /^1500 B from beside gate-ske to ticket-1/ }).click();
  await page.getByText('Dropped at fw-ske without a word.').waitFor();

  // Measured on finished packets by other software, tests/reference/esp-vxlan-sizes.csv: 1500 in VXLAN is 1550, in ESP 1604.
  await expect.poll(() => hops(page).count()).toBe(4);
  const drawn = (await hops(page).allInnerTexts()).map((text) => text.replaceAll(/\s+/g, ' '));
  expect(drawn[1]).toContain('1500 B in a 1500 B pipe');
  expect(drawn[2]).toContain('1550 B, no pipe yet');
  expect(drawn[3]).toContain('1604 B in a 1500 B pipe');
  expect(await hops(page).nth(3).locator('svg').textContent()).toContain('104 B over');
  expect(await side(page).innerText()).toMatch(/Largest IP packet\s+1396 B/);
  expect(await side(page).innerText()).toContain('Not reached: fw-ho, sw-ho, ticket-1.');

  // The sheet repeats the numbers, with the pipe beside its cord.
  const marks = page.locator('.react-flow__node-marks');
  expect(await marks.locator('[data-part="hop"]').allTextContents()).toEqual(['1', '2', '3', '4']);
  expect(await marks.locator('[data-part="overhang"]').textContent()).toContain('1604 in 1500');

  await page.getByRole('button', { name: 'Send 1396 B instead' }).click();
  await page.getByText('Reaches ticket-1.').waitFor();
  expect(new URL(page.url()).searchParams.get('bytes')).toBe('1396');

  // By keyboard to the third hop: the lamp goes no further.
  await hops(page).first().focus();
  await page.keyboard.press('Home');
  await page.keyboard.press('ArrowDown');
  await page.keyboard.press('ArrowDown');
  await page.getByText('Hop 3 of 6').waitFor();
  await expect.poll(() => marks.locator('[data-part="hop"]').count()).toBe(3);

  // A colleague who opens the address sees the same.
  await page.reload();
  await page.getByText('Reaches ticket-1.').waitFor();
  await page.context().close();
});

it('an end is picked on the sheet, and what an address can’t say is named', async () => {
  const page = await browser.newPage();
  await openDemo(page);
  const sheet = new URL(page.url()).pathname;
  await page.goto(`${sheet}?drawer=trace&from=gate-ske&to=nobody&bytes=many`);
  await page
    .getByText(/^Bytes is many: expected a whole number of bytes\.$/)
    .first()
    .waitFor();
  await page
    .getByText(/^To is nobody: expected a host of this design/)
    .first()
    .waitFor();
  for (const left of [1, 0]) {
    await page.getByRole('button', { name: 'Take it out' }).first().click();
    await expect.poll(() => page.getByRole('button', { name: 'Take it out' }).count()).toBe(left);
  }
  await atRest(page);
  await side(page).getByRole('button', { name: 'Pick To on the sheet' }).click();
  await node(page, 'devices/ticket-1').click();
  await page.getByText('Reaches ticket-1.').waitFor();
  expect(new URL(page.url()).searchParams.get('to')).toBe('ticket-1');
  await page.context().close();
});
