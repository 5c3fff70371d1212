import type { Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { launchBrowser, type TestBrowser } from '../support/browser.ts';
import { newDesign, saved, signInAs, storedDesign } from './desk.ts';

let browser: TestBrowser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

const count = async (page: Page, collection: string): Promise<number> =>
  Object.keys((await storedDesign(page))[collection]!).length;

/** The words of what has the focus. */
const focused = (page: Page): Promise<string> =>
  page.evaluate(
    () => document.activeElement?.getAttribute('aria-label') ?? document.activeElement?.textContent ?? '',
  );
const expectFocus = (page: Page, words: RegExp) => expect.poll(() => focused(page)).toMatch(words);

/** Goes to a row by the first letters of its name. */
const goTo = async (page: Page, name: string, words: RegExp): Promise<void> => {
  // A pause, so that the letters are not taken for more of what was typed before.
  await page.waitForTimeout(800);
  await page.keyboard.type(name);
  await expectFocus(page, words);
};

/** Opens the menu of the row and goes down it to an item. */
const choose = async (page: Page, item: string): Promise<void> => {
  await page.keyboard.press('Shift+F10');
  await page.getByRole('menu').waitFor();
  // The menu takes the focus a moment after it shows.
  await expect
    .poll(() => page.evaluate(() => document.activeElement?.closest('[role="menu"]') !== null))
    .toBe(true);
  const words = new RegExp(`^${item}`);
  for (let i = 0; i < 40 && !words.test(await focused(page)); i += 1) await page.keyboard.press('ArrowDown');
  await expectFocus(page, words);
  await page.keyboard.press('Enter');
};

/** Tabs on to what is labelled so in the dialog. */
const tabTo = async (page: Page, words: RegExp): Promise<void> => {
  await page.getByRole('dialog').waitFor();
  const label = (): Promise<string> =>
    page.evaluate(() => {
      const { activeElement: at } = document;
      const labels = at instanceof HTMLSelectElement || at instanceof HTMLInputElement ? at.labels : null;
      return labels?.[0]?.textContent ?? at?.textContent ?? '';
    });
  for (let i = 0; i < 15 && !words.test(await label()); i += 1) await page.keyboard.press('Tab');
  expect(await label()).toMatch(words);
};

/** Goes down a list of the dialog to the choice that begins so. */
const pick = async (page: Page, list: RegExp, choice: string): Promise<void> => {
  await tabTo(page, list);
  const chosen = (): Promise<string> =>
    page.evaluate(() => (document.activeElement as HTMLSelectElement).selectedOptions[0]?.textContent ?? '');
  for (let i = 0; i < 40 && !(await chosen()).startsWith(choice); i += 1)
    await page.keyboard.press('ArrowDown');
  expect(await chosen()).toMatch(new RegExp(`^${choice}`));
};

/** Presses the dialog's button that does it. */
const confirm = async (page: Page, button: RegExp): Promise<void> => {
  await tabTo(page, button);
  await page.keyboard.press('Enter');
  await page.getByRole('dialog').waitFor({ state: 'detached' });
};

describe('the outline with the keyboard alone', () => {
  it('makes a whole overlay of two sites', async () => {
    const page = await browser.newPage();
    await signInAs(page, 'architect');
    await newDesign(page, 'By words');
    await page.getByRole('tab', { name: 'Outline' }).focus();
    await page.keyboard.press('Enter');
    expect(page.url()).toContain('drawer=outline');
    // Past the filter field into the tree.
    const tree = page.getByRole('tree', { name: 'Outline' });
    await tree.waitFor();
    for (let i = 0; i < 4 && !/^Sites,/.test(await focused(page)); i += 1) await page.keyboard.press('Tab');
    await expectFocus(page, /^Sites, none yet/);

    // A group's button is one Tab from its head.
    const addTo = async (group: string, made: RegExp): Promise<void> => {
      await goTo(page, group, new RegExp(`^${group}`));
      await page.keyboard.press('Tab');
      await page.keyboard.press('Enter');
      await expectFocus(page, made);
    };
    await addTo('Transports', /^Transport Transport 1/);
    for (const i of [1, 2]) {
      await addTo('Sites', /^Site Site 1/);
      await page.keyboard.press('F2');
      await page.keyboard.type(i === 1 ? 'Head office' : 'Gullhaven');
      await page.keyboard.press('Enter');
      const site = i === 1 ? /^Site Head office/ : /^Site Gullhaven/;
      await expectFocus(page, site);
      await choose(page, 'Add a firewall');
      await expectFocus(page, new RegExp(`^Firewall fw-${i}`));
      await choose(page, 'Add an endpoint');
      await expectFocus(page, new RegExp(`^Loopback endpoint lo-fw-${i}`));
      await goTo(page, `fw-${i}`, new RegExp(`^Firewall fw-${i}`));
      await choose(page, 'Land');
      await pick(page, /^Transport$/, 'Transport 1');
      await confirm(page, /^Land it$/);
      await expect.poll(() => count(page, 'links')).toBe(3 * i - 2);
      await goTo(page, i === 1 ? 'Head' : 'Gull', site);
      await choose(page, 'Add a switch');
      await expectFocus(page, new RegExp(`^Switch sw-${i}`));
      await choose(page, 'Cable');
      await pick(page, /^To$/, `fw-${i}`);
      await confirm(page, /^Pull the cable$/);
      await expect.poll(() => count(page, 'links')).toBe(3 * i - 1);
      await goTo(page, i === 1 ? 'Head' : 'Gull', site);
      await choose(page, 'Add a host');
      await expectFocus(page, new RegExp(`^Host host-${i}`));
      await choose(page, 'Cable');
      await pick(page, /^To$/, `sw-${i}, port 3`);
      await confirm(page, /^Pull the cable$/);
      await expect.poll(() => count(page, 'links')).toBe(3 * i);
    }
    await addTo('Segments', /^Segment A Segment A/);

    // The tunnel starts at a loopback endpoint; it brings its association and both bridges along.
    await goTo(page, 'fw-1', /^Firewall fw-1/);
    await choose(page, 'Tunnel');
    await pick(page, /^To$/, 'lo-fw-2');
    await pick(page, /^Carries$/, 'A');
    await confirm(page, /^Pull the tunnel$/);
    await expect.poll(() => count(page, 'tunnels')).toBe(1);
    expect(await count(page, 'associations')).toBe(1);
    expect(await count(page, 'forwarders')).toBe(2);

    // What is selected in the outline is selected on the sheet and in the inspector; Enter goes to its first field.
    await goTo(page, 'sw-2', /^Switch sw-2/);
    await page.keyboard.press('Enter');
    await expectFocus(page, /^Name$/);
    await page.keyboard.press('Control+a');
    await page.keyboard.type('pier');
    await page.keyboard.press('Enter');
    await expect.poll(() => tree.getByRole('treeitem', { name: /^Switch pier/ }).count()).toBe(1);

    // Back to the row, removed, and taken back.
    for (let i = 0; i < 6 && !/^Switch pier/.test(await focused(page)); i += 1)
      await page.keyboard.press('Shift+Tab');
    await page.keyboard.press('Delete');
    await expect.poll(() => count(page, 'devices')).toBe(5);
    await page.keyboard.press('Control+z');
    await expect.poll(() => count(page, 'devices')).toBe(6);
    expect(await count(page, 'links')).toBe(6);
    await saved(page);
    await page.context().close();
  });

  it('is open again where a link says so', async () => {
    const page = await browser.newPage();
    await signInAs(page, 'reviewer');
    await page
      .getByRole('link', { name: /phase 1/ })
      .first()
      .click();
    await page.locator('.sheet-canvas').waitFor();
    await page.goto(`${page.url()}?drawer=outline`);
    await page.getByRole('treeitem', { name: /^Site Gullhaven/ }).waitFor();
    await page.getByRole('tab', { name: /^Findings/ }).click();
    expect(page.url()).not.toContain('drawer');
    await page.context().close();
  });
});
