import AxeBuilder from '@axe-core/playwright';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { launchBrowser, type TestBrowser } from '../support/browser.ts';
import { newDesign, nodes, placePart, saved, signInAs } from './desk.ts';

let browser: TestBrowser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

it('two people see one another at work, and a guest sees what they froze until the link is revoked', async () => {
  const architect = await browser.newPage();
  await signInAs(architect, 'architect');
  await newDesign(architect, 'Worked on together', 'Demo');
  const path = new URL(architect.url()).pathname;
  const owner = await browser.newPage();
  await signInAs(owner, 'owner');
  await owner.goto(path);
  await nodes(owner, 'device').first().waitFor();
  const devices = await nodes(owner, 'device').count();

  // Who is there, and what they do, without anybody asking for it.
  await architect
    .getByRole('list', { name: 'Also here' })
    .getByRole('button', { name: /^Mara Tadese/ })
    .waitFor();
  await placePart(architect, 'Switch', { x: 0.5, y: 0.2 });
  await expect.poll(() => nodes(owner, 'device').count()).toBe(devices + 1);
  const tag = owner.getByRole('list', { name: 'Also here' }).getByRole('button', { name: /^Rosa Halloran/ });
  await expect.poll(() => tag.getAttribute('aria-label')).toMatch(/on the sheet, at /);
  await tag.click();
  await owner.getByRole('menuitem', { name: 'Follow their view' }).click();
  await owner.getByRole('button', { name: 'Stop following' }).waitFor();
  await saved(architect);
  await architect.getByRole('link', { name: 'Segments', exact: true }).click();
  await owner.getByRole('heading', { name: 'Segments' }).first().waitFor();
  // What one did is not the other's to undo.
  await expect.poll(() => owner.getByRole('button', { name: 'Undo' }).isDisabled()).toBe(true);
  await owner.context().close();

  await architect.getByRole('link', { name: 'Sheet', exact: true }).click();
  await architect.getByRole('button', { name: 'What to do with this revision' }).click();
  await architect.getByRole('menuitem', { name: 'Ask for review…' }).click();
  await architect.getByRole('dialog').getByRole('button', { name: 'Ask for review' }).click();
  await architect.getByText(/is in review, asked for by Rosa Halloran/).waitFor();
  await architect.goto(`${path}/shares`);
  await architect.getByRole('button', { name: 'New link' }).click();
  const dialog = architect.getByRole('dialog', { name: 'New link' });
  await dialog.getByRole('button', { name: 'Make the link' }).click();
  await dialog.getByText('For is empty. Say who the link is for, such as the customer.').waitFor();
  await dialog.getByLabel('For', { exact: true }).fill('Saltmarsh Ferries');
  await dialog.getByRole('button', { name: 'Make the link' }).click();
  const link = await architect.getByText(/\/share\/[\w-]{43}$/).innerText();

  const guest = await browser.newPage({ viewport: { width: 390, height: 844 } });
  await guest.goto(link);
  await guest.getByRole('heading', { name: 'Worked on together' }).waitFor();
  await guest.getByText('nobody has approved it, and nothing is to be built from it').waitFor();
  const sheet = guest.getByRole('img', { name: 'Sheet 1 of Worked on together' });
  await sheet.waitFor();
  await expect
    .poll(() => sheet.evaluate((image: HTMLImageElement) => image.naturalWidth))
    .toBeGreaterThan(500);
  const axe = await new AxeBuilder({ page: guest }).analyze();
  expect(axe.violations.filter(({ impact }) => impact === 'serious' || impact === 'critical')).toEqual([]);

  await architect.getByRole('button', { name: 'Revoke the link for Saltmarsh Ferries' }).click();
  await architect.getByText(/revoked by Rosa Halloran/).waitFor();
  await guest.reload();
  await guest.getByText('This link opens nothing any more').waitFor();
});
