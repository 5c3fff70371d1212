import { copyFileSync, readFileSync } from 'node:fs';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { launchBrowser, type TestBrowser } from '../support/browser.ts';
import {
  drag,
  finding,
  middleOf,
  newDesign,
  node,
  nodes,
  openDrawer,
  placePart,
  saved,
  signInAs,
  storedDesign,
} from './desk.ts';

let browser: TestBrowser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

describe('an architect on a real design', () => {
  it('draws a two-site overlay whose VNIs differ, sees the cord cut, mends it, comes back to it and takes the picture away', async () => {
    const page = await browser.newPage();
    await signInAs(page, 'architect');
    await newDesign(page, 'Standby controller');

    // Two sites with a firewall, a switch and a host each, over one transport.
    await placePart(page, 'Transport', { x: 0.5, y: 0.4 });
    await page.getByRole('button', { name: 'Add a segment' }).click();
    for (const x of [0.2, 0.8]) {
      await placePart(page, 'Site', { x, y: 0.45 });
      await placePart(page, 'Firewall', { x, y: 0.36 });
      await placePart(page, 'Switch', { x: x - 0.05, y: 0.54 });
    }
    await expect.poll(() => nodes(page, 'device').count()).toBe(4);
    const firewalls = nodes(page, 'device').filter({ has: page.locator('[data-handleid^="port:wan1"]') });
    const switches = nodes(page, 'device').filter({ has: page.locator('[data-handleid="port:p6"]') });
    const band = await middleOf(nodes(page, 'band'));
    for (const i of [0, 1]) {
      await drag(
        page,
        await middleOf(switches.nth(i).locator('[data-handleid="port:p1"]')),
        await middleOf(firewalls.nth(i)),
      );
      await drag(page, await middleOf(firewalls.nth(i).locator('[data-handleid="port:wan1"]')), {
        x: band.x,
        y: band.y - 40 + 80 * i,
      });
    }
    await expect.poll(async () => Object.keys((await storedDesign(page)).links!).length).toBe(4);

    // A ring on each, and a tunnel pulled from ring to ring.
    const [left, right] = [await middleOf(firewalls.nth(0)), await middleOf(firewalls.nth(1))];
    const tray = page.getByRole('complementary', { name: 'Parts' });
    for (const at of [left, right]) {
      await tray.getByRole('button', { name: 'Endpoint', exact: true }).click();
      await page.mouse.click(at.x, at.y);
    }
    await expect.poll(() => nodes(page, 'ring').count()).toBe(2);
    await drag(page, await middleOf(nodes(page, 'ring').nth(0)), await middleOf(nodes(page, 'ring').nth(1)));
    const dialog = page.getByRole('dialog', { name: 'Pull a tunnel' });
    // From the workspace's pool, and such as no other design has.
    const proposed = () => dialog.getByLabel(/^VNI/).inputValue();
    await expect.poll(proposed).toMatch(/^10[1-8]\d\d$/);
    const vni = await proposed();
    const other = '10011';
    await dialog.getByRole('button', { name: 'Pull the tunnel' }).click();
    await dialog.waitFor({ state: 'detached' });

    // One end gets a VNI that differs by a digit.
    await openDrawer(page);
    const inspector = page.getByRole('complementary', { name: 'Inspector' });
    const far = inspector.getByLabel('VNI').last();
    await far.fill(other);
    await far.press('Enter');
    await expect.poll(() => finding(page, new RegExp(`VNI ${vni} at .*${other}`)).count()).toBe(1);
    await expect
      .poll(() => page.locator('.react-flow__node-marks').getByText('VNIs differ').count())
      .toBeGreaterThan(0);
    await page.locator('[data-part="cut"]').first().waitFor({ state: 'attached' });

    // The offered fix makes it whole.
    await finding(page, new RegExp(`VNI ${vni}`))
      .getByRole('button', { name: new RegExp(`VNI ${vni}`) })
      .click();
    await finding(page, new RegExp(`VNI ${vni}`))
      .getByRole('button', { name: new RegExp(`^Set Site \\d to ${vni}$`) })
      // The row offers what its details explain.
      .first()
      .click();
    await expect.poll(() => finding(page, new RegExp(`VNI ${vni} at`)).count()).toBe(0);
    await expect.poll(() => page.locator('[data-part="cut"]').count()).toBe(0);
    await saved(page);
    const before = await storedDesign(page);
    const address = page.url();
    const session = await page.context().storageState();
    await page.context().close();

    // The browser is opened again: everything is there.
    const later = await browser.newPage({ storageState: session });
    await later.goto(address);
    await later.locator('.sheet-canvas').waitFor();
    await expect.poll(() => nodes(later, 'ring').count()).toBe(2);
    await expect.poll(() => later.locator('.react-flow__edge-jacket').count()).toBe(1);
    expect(await storedDesign(later)).toEqual(before);

    // And the picture is taken away.
    await later.getByRole('button', { name: 'Export', exact: true }).click();
    const leaving = later.getByRole('dialog', { name: 'Export the sheet' });
    await leaving.getByText('PNG', { exact: true }).click();
    const [picture] = await Promise.all([
      later.waitForEvent('download'),
      leaving.getByRole('button', { name: 'Export PNG' }).click(),
    ]);
    expect(picture.suggestedFilename()).toBe('standby-controller.png');
    const png = readFileSync((await picture.path())!);
    expect(png.subarray(1, 4).toString('latin1')).toBe('PNG');
    // A3 with the line of caution under it and margins beside it, at two pixels per pixel of the sheet.
    expect([png.readUInt32BE(16), png.readUInt32BE(20)]).toEqual([2628, 1858]);
    if (process.env['KEEP_PICTURE'] !== undefined)
      copyFileSync((await picture.path())!, process.env['KEEP_PICTURE']);
    expect(png.length).toBeGreaterThan(50_000);

    await later.getByRole('button', { name: 'Export', exact: true }).click();
    await leaving.getByText('JSON', { exact: true }).click();
    const [file] = await Promise.all([
      later.waitForEvent('download'),
      leaving.getByRole('button', { name: 'Export JSON' }).click(),
    ]);
    expect(JSON.parse(readFileSync((await file.path())!, 'utf8'))).toEqual(before);
    expect(await node(later, 'sheet').count()).toBe(1);
  });
});
