import AxeBuilder from '@axe-core/playwright';
import type { Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { launchBrowser, type TestBrowser } from '../support/browser.ts';
import { atRest, middleOf, newDesign, node, saved, signInAs, storedDesign } from './desk.ts';

let browser: TestBrowser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

interface Places {
  readonly devices: {
    readonly [id: string]: { readonly x: number; readonly y: number; readonly locked?: true };
  };
  readonly sites: { readonly [id: string]: { readonly collapsed?: true } };
}
const places = async (page: Page): Promise<Places> =>
  (await storedDesign(page))['layout'] as unknown as Places;

const openDemo = async (title: string): Promise<Page> => {
  const page = await browser.newPage();
  await signInAs(page, 'architect');
  await newDesign(page, title, 'Demo');
  await atRest(page);
  return page;
};
const seriousIn = async (page: Page): Promise<readonly string[]> =>
  (
    await new AxeBuilder({ page }).withTags(['wcag2a', 'wcag2aa', 'wcag21aa', 'wcag22aa']).analyze()
  ).violations
    .filter(({ impact }) => impact === 'serious' || impact === 'critical')
    .map(({ id, nodes }) => `${id}: ${nodes[0]!.target.join(' ')}`);
const item = (page: Page, name: RegExp) => page.getByRole('menuitem', { name });

describe('arranging a sheet', () => {
  it('snaps a drag to its neighbours, locks and aligns by menu, and moves by keys as one step', async () => {
    const page = await openDemo('In line');
    const [cam, gate] = ['devices/cam-orr', 'devices/gate-orr'].map((id) => node(page, id));
    const guides = page.locator('.snap-guides line');
    const from = await middleOf(cam!);
    await page.mouse.move(from.x, from.y);
    await page.mouse.down();
    await page.mouse.move(from.x + 30, from.y + 20, { steps: 4 });
    await page.mouse.move((await middleOf(gate!)).x + 3, from.y + 40, { steps: 4 });
    await guides.first().waitFor({ state: 'attached' });
    // Alt lets go of the neighbours while it is held.
    await page.keyboard.down('Alt');
    await page.mouse.move((await middleOf(gate!)).x + 4, from.y + 40);
    await expect.poll(() => guides.count()).toBe(0);
    await page.keyboard.up('Alt');
    await page.mouse.move((await middleOf(gate!)).x + 3, from.y + 40);
    await guides.first().waitFor({ state: 'attached' });
    await page.mouse.up();
    await expect.poll(() => guides.count()).toBe(0);
    await saved(page);
    await atRest(page);
    const after = await places(page);

    // A right press opens its menu where it was, on what stays there; the inspector comes when the menu is gone.
    const inspector = page.getByRole('complementary', { name: 'Inspector' });
    await page.keyboard.press('Escape');
    await page.getByRole('button', { name: 'Show the inspector' }).click();
    await inspector.waitFor({ state: 'hidden' });
    await page.getByRole('button', { name: 'Fit', exact: true }).click();
    await atRest(page);
    const pressed = await middleOf(cam!);
    await page.mouse.click(pressed.x, pressed.y, { button: 'right' });
    const menu = (await page.getByRole('menu').boundingBox())!;
    expect(Math.abs(menu.x - pressed.x)).toBeLessThan(12);
    await atRest(page);
    expect(await middleOf(cam!)).toEqual(pressed);
    await page.keyboard.press('Escape');
    await inspector.waitFor();
    await atRest(page);

    // A locked one stays where it is, whatever tries to move it.
    await cam!.click({ button: 'right' });
    expect(await seriousIn(page)).toEqual([]);
    await item(page, /^Lock its place/).click();
    await expect.poll(async () => (await places(page)).devices['cam-orr']!.locked).toBe(true);
    await page.keyboard.press('Shift+ArrowRight');
    await page.getByText('cam-orr is locked in place. Free it to move it.').first().waitFor();
    expect((await places(page)).devices['cam-orr']).toEqual({ ...after.devices['cam-orr'], locked: true });

    // The others come to it, by the menu on one of them.
    const gateMiddle = await middleOf(gate!);
    await page.keyboard.down('Shift');
    await page.mouse.click(gateMiddle.x, gateMiddle.y);
    await page.keyboard.up('Shift');
    await gate!.click({ button: 'right' });
    await item(page, /^Align$/).press('ArrowRight');
    await item(page, /^Align bottom edges/).click();
    await expect
      .poll(async () => (await places(page)).devices['gate-orr']!.y)
      .toBe(after.devices['cam-orr']!.y);
    await page.keyboard.press('Control+z');
    await expect
      .poll(async () => (await places(page)).devices['gate-orr']!.y)
      .toBe(after.devices['gate-orr']!.y);
    await page.context().close();
  });

  it('does by name and key what the table of keys lists, and links to what it shows', async () => {
    const page = await openDemo('By name');
    await page.keyboard.press('Control+k');
    await page.getByRole('combobox').fill('all keys');
    await page.keyboard.press('Enter');
    const keys = page.getByRole('dialog', { name: 'Keys of the sheet' });
    await keys.getByRole('row', { name: /^Align left edges/ }).waitFor();
    expect(await seriousIn(page)).toEqual([]);
    // Single letters can be turned off, and are then none.
    await keys.getByRole('checkbox').uncheck();
    await page.keyboard.press('Escape');
    await keys.waitFor({ state: 'detached' });
    await page.keyboard.press('3');
    expect(page.url()).not.toContain('layers');
    await page.keyboard.press('Control+k');
    await page.getByRole('combobox').fill('show all keys');
    await page.keyboard.press('Enter');
    await keys.getByRole('checkbox').check();
    await page.keyboard.press('Escape');
    await keys.waitFor({ state: 'detached' });

    await page.keyboard.press('3');
    await expect.poll(() => page.url()).toContain('layers=cabling');
    await page.getByText('Without overlay', { exact: true }).waitFor();
    expect(await page.locator('.react-flow__edge-jacket').count()).toBe(0);
    // The link alone brings the same view.
    await page.reload();
    await node(page, 'devices/fw-ho').waitFor();
    expect(await page.locator('.react-flow__edge-jacket').count()).toBe(0);
    await page.getByRole('button', { name: 'Show everything' }).click();
    await expect.poll(() => page.locator('.react-flow__edge-jacket').count()).toBeGreaterThan(0);

    // Only what one segment uses, from its line in the tray.
    await page.keyboard.press('Control+k');
    await page.getByRole('combobox').fill('CCTV');
    await page.keyboard.press('Enter');
    await page.getByRole('dialog').waitFor({ state: 'detached' });
    await page.keyboard.press('s');
    await page.getByText('Only segment C', { exact: true }).waitFor();
    expect(page.url()).toContain('segment=');
    await page.context().close();
  });

  it('collapses a site and opens it, follows a cord to its far end, and writes a note where it stands', async () => {
    const page = await openDemo('On the quay');
    const ring = node(page, 'endpoints/lo-gul');
    await ring.focus();
    await page.keyboard.press('Enter');
    await page.keyboard.press('Shift+F10');
    await page.getByRole('menu').waitFor();
    await item(page, /^Follow$/).press('ArrowRight');
    await item(page, /to fw-ho$/)
      .first()
      .click();
    const inspector = page.getByRole('complementary', { name: 'Inspector' });
    await inspector.getByText('Loopback endpoint', { exact: true }).waitFor();
    await page.keyboard.press('Escape');

    await node(page, 'devices/fw-gul').focus();
    await page.keyboard.press('Enter');
    await page.keyboard.press('c');
    await expect.poll(async () => (await places(page)).sites['gul']!.collapsed).toBe(true);
    expect(await node(page, 'devices/sw-gul').count()).toBe(0);
    await page.keyboard.press('c');
    await node(page, 'devices/sw-gul').waitFor();

    await page.keyboard.press('Escape');
    await node(page, 'devices/fw-gul').focus();
    await page.keyboard.press('Enter');
    await page.keyboard.press('Shift+N');
    const text = page.getByRole('textbox', { name: 'Text of the note' });
    await text.waitFor();
    await page.keyboard.press('Delete');
    await page.keyboard.press('Enter');
    await page.getByText(/^Text is empty/).waitFor();
    await page.keyboard.type('Short rails only');
    await page.keyboard.press('Enter');
    await text.waitFor({ state: 'detached' });
    const notes = (await storedDesignOnceSaved(page))['notes'] as unknown as Record<
      string,
      { text: string; target?: object }
    >;
    expect(Object.values(notes)).toContainEqual({
      text: 'Short rails only',
      target: { collection: 'devices', id: 'fw-gul' },
    });

    // Who gives up the words of a new note has none.
    await page.keyboard.press('Escape');
    await node(page, 'devices/fw-gul').focus();
    await page.keyboard.press('Enter');
    await page.keyboard.press('Shift+N');
    await text.waitFor();
    await page.keyboard.press('Escape');
    await text.waitFor({ state: 'detached' });
    expect(Object.values((await storedDesignOnceSaved(page))['notes']!)).toHaveLength(
      Object.keys(notes).length,
    );
    await page.context().close();
  });
});

const storedDesignOnceSaved = async (page: Page) => {
  await saved(page);
  return storedDesign(page);
};
