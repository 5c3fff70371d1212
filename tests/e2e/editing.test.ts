import { afterAll, beforeAll, beforeEach, afterEach, describe, expect, it } from 'vitest';
import type { Page } from 'playwright-core';
import { launchBrowser, type TestBrowser } from '../support/browser.ts';
import {
  atRest,
  drag,
  finding,
  middleOf,
  newDesign,
  node,
  nodes,
  saved,
  signInAs,
  storedDesign,
} from './desk.ts';

let browser: TestBrowser;
let page: Page;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());
beforeEach(async () => {
  page = await browser.newPage();
  await signInAs(page, 'architect');
  await newDesign(page, `Editing ${crypto.randomUUID().slice(0, 8)}`, 'Demo');
  await nodes(page, 'ring').first().waitFor();
  await atRest(page);
});
afterEach(() => page.context().close());

type Places = Record<string, { x: number; y: number }>;
const places = async (): Promise<Places> => (await storedDesign(page)).layout!.devices as unknown as Places;
const undo = () => page.getByRole('button', { name: 'Undo', exact: true }).first().click();

describe('gestures on the sheet', () => {
  it('a marquee selects what it encloses, a drag moves all of it, and one undo takes it back', async () => {
    const before = await places();
    // From the paper below the head office up round its three hosts.
    const [top, site] = await Promise.all([
      node(page, 'devices/ticket-1').boundingBox(),
      node(page, 'sites/ho').boundingBox(),
    ]);
    await drag(
      page,
      { x: top!.x - 4, y: site!.y + site!.height + 30 },
      { x: top!.x + top!.width + 12, y: top!.y - 5 },
    );
    const selected = page.locator('.react-flow__node.selected');
    await expect.poll(() => selected.count()).toBe(3);
    // The inspector has opened beside the sheet, which keeps itself fitted: the hand goes where things stand now.
    await page.getByRole('complementary', { name: 'Inspector' }).waitFor();
    await atRest(page);
    const held = await middleOf(node(page, 'devices/ticket-1'));
    await drag(page, held, { x: held.x, y: held.y + 24 });
    await expect
      .poll(async () => (await places())['ticket-1']!.y)
      .toBeGreaterThan(before['ticket-1']!.y + 10);
    const moved = await places();
    const by = (id: string) => moved[id]!.y - before[id]!.y;
    expect([by('berth-1'), by('vms-1')]).toEqual([by('ticket-1'), by('ticket-1')]);
    expect(moved['sw-ho']).toEqual(before['sw-ho']);
    await undo();
    await expect.poll(places).toEqual(before);
  });

  it('a site moves with all that stands in it', async () => {
    const before = await places();
    const site = await node(page, 'sites/ske').boundingBox();
    await drag(
      page,
      { x: site!.x + site!.width - 30, y: site!.y },
      { x: site!.x + site!.width - 30, y: site!.y + 12 },
    );
    await expect.poll(async () => (await places())['fw-ske']!.y).toBeGreaterThan(before['fw-ske']!.y + 4);
    const after = await places();
    for (const id of ['sw-ske', 'gate-ske', 'cam-ske'])
      expect(after[id]!.y - before[id]!.y).toBe(after['fw-ske']!.y - before['fw-ske']!.y);
    expect(after['fw-gul']).toEqual(before['fw-gul']);
  });

  it('a ring docks on the side it is dragged to', async () => {
    const from = await middleOf(node(page, 'endpoints/lo-gul'));
    const wall = await node(page, 'devices/fw-gul').boundingBox();
    await drag(page, from, { x: wall!.x + wall!.width + 30, y: wall!.y + wall!.height / 2 });
    await expect
      .poll(async () => (await storedDesign(page)).layout!.endpoints)
      .toMatchObject({ 'lo-gul': { side: 'right' } });
  });

  it('a refused connection says why and changes nothing', async () => {
    const before = await storedDesign(page);
    await drag(
      page,
      await middleOf(node(page, 'devices/gate-gul').locator('[data-handleid="port:p1"]')),
      await middleOf(node(page, 'devices/berth-gul')),
    );
    // The message is read out as well: it is there twice for a moment.
    await page
      .getByText(/already holds a cable/)
      .first()
      .waitFor();
    expect(await storedDesign(page)).toEqual(before);
  });

  it('copying, pasting and duplicating makes parts with names and numbers of their own', async () => {
    const count = async () => Object.keys((await storedDesign(page)).devices!).length;
    const before = await count();
    await node(page, 'devices/sw-gul').click();
    await page.keyboard.press('Control+d');
    await expect.poll(count).toBe(before + 1);
    const names = Object.values(
      (await storedDesign(page)).devices as unknown as Record<string, { name: string }>,
    ).map((device) => device.name);
    expect(new Set(names).size).toBe(names.length);
    await undo();
    await expect.poll(count).toBe(before);
  });

  it('Tidy puts a sheet that was thrown about back in order, as one step', async () => {
    const before = await places();
    const wall = await middleOf(node(page, 'devices/fw-orr'));
    await drag(page, wall, { x: wall.x - 90, y: wall.y + 40 });
    await expect.poll(async () => (await places())['fw-orr']!.x).toBeLessThan(before['fw-orr']!.x - 20);
    await page.keyboard.press('Escape');
    await page.getByRole('button', { name: 'Tidy' }).click();
    await expect.poll(places, { timeout: 20_000 }).toEqual(before);
    await saved(page);
  });

  it('a fade hides no fault: segments fade and come back without changing the design', async () => {
    const before = await storedDesign(page);
    await page.getByRole('button', { name: 'Fade Ticketing' }).click();
    await page.getByRole('button', { name: 'Show Ticketing' }).click();
    expect(await storedDesign(page)).toEqual(before);
    expect(await finding(page, /./).count()).toBe(0);
  });

  it('zooming out shows less, zooming in shows addresses again', async () => {
    const zoom = page.getByRole('group', { name: 'Zoom' });
    const addresses = page.locator('.react-flow__node-device').getByText('10.110.1.20');
    for (let i = 0; i < 6; i += 1) await zoom.getByRole('button', { name: 'Zoom in' }).click();
    await expect.poll(() => addresses.count()).toBe(1);
    for (let i = 0; i < 8; i += 1) await zoom.getByRole('button', { name: 'Zoom out' }).click();
    await expect.poll(() => addresses.count()).toBe(0);
    await zoom.getByRole('button', { name: 'Fit' }).click();
  });
});
