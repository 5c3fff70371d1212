import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { launchBrowser, type TestBrowser } from '../support/browser.ts';
import { newDesign, nodes, saved, signInAs, storedDesign } from './desk.ts';

let browser: TestBrowser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

describe('with the keyboard alone', () => {
  it('places two sites and connects them with cables, landings and a tunnel', async () => {
    const page = await browser.newPage();
    await signInAs(page, 'architect');
    await newDesign(page, 'By keyboard');
    // From here on no mouse.
    const tray = page.getByRole('complementary', { name: 'Parts' });
    const press = async (name: string): Promise<void> => {
      await tray.getByRole('button', { name, exact: true }).focus();
      await page.keyboard.press('Enter');
    };
    const count = async (collection: string): Promise<number> =>
      Object.keys((await storedDesign(page))[collection]!).length;

    await press('Transport');
    for (const i of [1, 2]) {
      await press('Site');
      await press('Firewall');
      await press('Switch');
      await press('Endpoint');
      await expect.poll(() => count('endpoints')).toBe(i);
      await page.keyboard.press('Escape');
    }
    expect(await count('sites')).toBe(2);
    expect(await count('devices')).toBe(4);

    const dialogFor = async (part: string) => {
      await press(part);
      return page.getByRole('dialog');
    };
    const choose = async (label: string, option: RegExp): Promise<void> => {
      const select = page.getByRole('dialog').getByLabel(label, { exact: true });
      const value = await select
        .locator('option')
        .evaluateAll(
          (all, [source]) =>
            all.map((o) => o as HTMLOptionElement).find((o) => new RegExp(source!).test(o.textContent!))
              ?.value,
          [option.source],
        );
      await select.focus();
      await select.selectOption(value!);
    };
    for (const i of [1, 2]) {
      await dialogFor('Cable');
      await choose('From', new RegExp(`^sw-${i}, port 1$`));
      await choose('To', new RegExp(`^fw-${i}, port lan2$`));
      await page.getByRole('dialog').getByRole('button', { name: 'Pull the cable' }).focus();
      await page.keyboard.press('Enter');
      await expect.poll(() => count('links')).toBe(2 * i - 1);
      // A landing starts from the port itself, in the inspector.
      const firewall = nodes(page, 'device')
        .filter({ has: page.locator('[data-handleid="port:wan1"]') })
        .nth(i - 1);
      await firewall.focus();
      await page.keyboard.press('Enter');
      await page
        .getByRole('complementary', { name: 'Inspector' })
        .getByRole('button', { name: /^Land/ })
        .first()
        .focus();
      await page.keyboard.press('Enter');
      await choose('Transport', /^Transport 1$/);
      await page.getByRole('dialog').getByRole('button', { name: 'Land it' }).focus();
      await page.keyboard.press('Enter');
      await expect.poll(() => count('links')).toBe(2 * i);
    }
    await dialogFor('Tunnel');
    await choose('From', /fw-1/);
    await choose('To', /fw-2/);
    await page.getByRole('dialog').getByRole('button', { name: 'Pull the tunnel' }).focus();
    await page.keyboard.press('Enter');
    await expect.poll(() => count('tunnels')).toBe(1);
    await expect.poll(() => count('associations')).toBe(1);

    // Arrow keys move what has the focus, as one step however long they are held.
    const before = (await storedDesign(page)).layout as unknown as { devices: Record<string, { x: number }> };
    const node = nodes(page, 'device').first();
    const id = (await node.getAttribute('data-id'))!.split('/')[1]!;
    await node.focus();
    await page.keyboard.press('Enter');
    for (let i = 0; i < 4; i += 1) await page.keyboard.press('ArrowRight');
    await expect
      .poll(
        async () =>
          ((await storedDesign(page)).layout as unknown as { devices: Record<string, { x: number }> })
            .devices[id]!.x,
      )
      .toBeGreaterThan(before.devices[id]!.x + 10);
    await page.keyboard.press('Control+z');
    await expect
      .poll(
        async () =>
          ((await storedDesign(page)).layout as unknown as { devices: Record<string, { x: number }> })
            .devices[id]!.x,
      )
      .toBe(before.devices[id]!.x);

    // Find by name and jump, remove and undo.
    await page.keyboard.press('Escape');
    await page.keyboard.press('/');
    await page.keyboard.type('sw-2');
    await page.keyboard.press('Enter');
    await expect
      .poll(() =>
        page.getByRole('complementary', { name: 'Inspector' }).getByText('Switch', { exact: true }).count(),
      )
      .toBeGreaterThan(0);
    await page.keyboard.press('Delete');
    await expect.poll(() => count('devices')).toBe(3);
    await page.keyboard.press('Control+z');
    await expect.poll(() => count('devices')).toBe(4);
    expect(await count('links')).toBe(4);
    await saved(page);
    await page.context().close();
  });
});
