import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { launchBrowser, type TestBrowser } from '../support/browser.ts';
import {
  drag,
  finding,
  middleOf,
  newDesign,
  node,
  openDrawer,
  saved,
  signInAs,
  storedDesign,
} from './desk.ts';

let browser: TestBrowser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

const openDemo = async (title: string) => {
  const page = await browser.newPage();
  await signInAs(page, 'architect');
  await newDesign(page, title, 'Demo');
  await expect
    .poll(() => page.getByText(/All \d+ checks pass/).count(), { timeout: 15_000 })
    .toBeGreaterThan(0);
  await openDrawer(page);
  return page;
};

describe('faults drawn into a sound design and mended where they show', () => {
  it('a third ticketing tunnel closes a loop: chevrons go round it, and the fix stops them', async () => {
    const page = await openDemo('Loop');
    await drag(
      page,
      await middleOf(node(page, 'endpoints/lo-orr-ring')),
      await middleOf(node(page, 'endpoints/lo-ske-ring')),
    );
    const dialog = page.getByRole('dialog', { name: 'Pull a tunnel' });
    await dialog.getByLabel('Carries').selectOption({ label: 'A  Ticketing' });
    await dialog.getByRole('button', { name: 'Pull the tunnel' }).click();

    const loop = finding(page, /loop|broadcast/i);
    await expect.poll(() => loop.count()).toBe(1);
    await page.locator('.chevron').first().waitFor({ state: 'attached' });
    expect(await page.locator('.chevron').count()).toBeGreaterThan(9);
    expect(await loop.textContent()).toMatch(/Blocking/);
    await loop
      .getByRole('button', { name: /Isolate|Remove/ })
      .first()
      .click();
    await expect.poll(() => page.locator('.chevron').count()).toBe(0);
    await expect.poll(() => page.getByText(/All \d+ checks pass/).count()).toBeGreaterThan(0);
    await saved(page);
    await page.context().close();
  });

  it('a host on one member of the pair: the missing cable is a ghost, and accepting it moves the host', async () => {
    const page = await openDemo('One member');
    // The recorder loses its cable to the switch and is plugged into the first member instead.
    const stored = await storedDesign(page);
    const cable = Object.entries(
      stored.links as Record<string, { kind: string; a: { device: string } }>,
    ).find(([, link]) => link.kind === 'cable' && link.a.device === 'vms-1')![0];
    await page.locator(`.react-flow__edge[data-id="links/${cable}"] .reach`).click({ force: true });
    await page.keyboard.press('Delete');
    await expect.poll(async () => (await storedDesign(page)).links![cable]).toBeUndefined();
    await drag(
      page,
      await middleOf(node(page, 'devices/vms-1').locator('[data-handleid="port:p1"]')),
      await middleOf(node(page, 'devices/fw-ho').locator('[data-handleid="port:lan2@1"]')),
    );
    const single = finding(page, /vms-1/).filter({ hasText: /Blocking/ });
    await expect.poll(() => single.count()).toBe(1);
    const ghost = page.locator('.ghost-button');
    await expect.poll(() => ghost.count()).toBe(1);
    await ghost.focus();
    await page.keyboard.press('Enter');
    await expect.poll(() => ghost.count()).toBe(0);
    await expect.poll(() => single.count()).toBe(0);
    await saved(page);
    const links = Object.values(
      (await storedDesign(page)).links as Record<
        string,
        { kind: string; a: { device: string }; b: { device: string } }
      >,
    );
    expect(
      links.some(
        (link) =>
          link.kind === 'cable' &&
          [link.a.device, link.b.device].includes('vms-1') &&
          [link.a.device, link.b.device].includes('sw-ho'),
      ),
    ).toBe(true);
    await page.context().close();
  });

  it('a VNI that differs at one end: the cord is cut with both numbers shown, and undo of the fix cuts it again', async () => {
    const page = await openDemo('VNI');
    await page.locator('.react-flow__edge-cord .reach').first().click({ force: true });
    const inspector = page.getByRole('complementary', { name: 'Inspector' });
    const far = inspector.getByLabel('VNI').last();
    const was = Number(await far.inputValue());
    await far.fill(String(was + 900));
    await far.press('Enter');
    const differs = finding(page, new RegExp(`VNI ${was} at .*${was + 900}|VNI ${was + 900} at .*${was}`));
    await expect.poll(() => differs.count()).toBe(1);
    await page.locator('[data-part="cut"]').first().waitFor({ state: 'attached' });
    await differs
      .getByRole('button', { name: new RegExp(`Set .* to ${was}$`) })
      .first()
      .click();
    await expect.poll(() => page.locator('[data-part="cut"]').count()).toBe(0);
    await page.getByRole('button', { name: 'Undo', exact: true }).first().click();
    await expect.poll(() => page.locator('[data-part="cut"]').count()).toBeGreaterThan(0);
    await page.context().close();
  });
});
