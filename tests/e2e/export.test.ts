import { readFileSync } from 'node:fs';
import AxeBuilder from '@axe-core/playwright';
import { getDocument } from 'pdfjs-dist/legacy/build/pdf.mjs';
import type { Download, Locator, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { launchBrowser, type TestBrowser } from '../support/browser.ts';
import { node, signInAs } from './desk.ts';

let browser: TestBrowser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

const openDialog = async (page: Page): Promise<Locator> => {
  await page.getByRole('button', { name: 'Export', exact: true }).click();
  const dialog = page.getByRole('dialog', { name: 'Export the sheet' });
  await dialog.waitFor();
  return dialog;
};

const exported = async (page: Page, dialog: Locator, format: string): Promise<Download> => {
  const [file] = await Promise.all([
    page.waitForEvent('download'),
    dialog.getByRole('button', { name: `Export ${format}` }).click(),
  ]);
  await dialog.waitFor({ state: 'detached' });
  return file;
};

const bytesOf = async (file: Download): Promise<Buffer> => readFileSync((await file.path())!);

const openSheet = async (page: Page, title: RegExp): Promise<void> => {
  await signInAs(page, 'presales');
  await page.getByRole('link', { name: title }).first().click();
  await node(page, 'sheet').waitFor();
};

const wordsOf = async (
  pdf: Buffer,
): Promise<{ readonly pages: number; readonly words: readonly string[] }> => {
  const document = await getDocument({ data: new Uint8Array(pdf), verbosity: 0 }).promise;
  const { items } = await (await document.getPage(1)).getTextContent();
  return { pages: document.numPages, words: items.flatMap((item) => ('str' in item ? [item.str] : [])) };
};

describe('a sheet that leaves', () => {
  it('is previewed, goes out in every format under a name of its own, and the choice is remembered', async () => {
    const page = await browser.newPage();
    await openSheet(page, /with planted faults/);

    let dialog = await openDialog(page);
    await dialog.getByRole('img', { name: /Preview of the sheet/ }).waitFor();
    const axe = await new AxeBuilder({ page }).include('[role=dialog]').analyze();
    expect(axe.violations.map(({ id }) => id)).toEqual([]);

    const pdf = await exported(page, dialog, 'PDF');
    expect(pdf.suggestedFilename()).toMatch(/^smf-l2-\d+-terminals-stretch-with-planted-faults\.pdf$/);
    const { pages, words } = await wordsOf(await bytesOf(pdf));
    expect(pages).toBe(1);
    expect(words).toContain('10.255.0.1');
    expect(words).not.toContain('VNIs differ');

    dialog = await openDialog(page);
    await dialog.getByText('SVG', { exact: true }).click();
    await dialog.getByRole('checkbox', { name: 'Findings' }).check();
    await dialog.getByRole('checkbox', { name: 'Cabling' }).uncheck();
    await dialog.getByLabel('Look').selectOption('Black on white');
    const svg = (await bytesOf(await exported(page, dialog, 'SVG'))).toString('utf8');
    expect(svg).toContain('VNIs differ');
    expect(svg).toContain('Shows underlay and overlay only');
    expect(svg).not.toContain('#0072b2');

    await page.reload();
    dialog = await openDialog(page);
    expect(await dialog.getByRole('checkbox', { name: 'Findings' }).isChecked()).toBe(true);
    // Layers are those on screen.
    expect(await dialog.getByRole('checkbox', { name: 'Cabling' }).isChecked()).toBe(true);
    await dialog.getByText('PNG', { exact: true }).click();
    await dialog.getByText('3×', { exact: true }).click();
    await dialog.getByText('3,942 × 2,787 px').waitFor();
    const png = await bytesOf(await exported(page, dialog, 'PNG'));
    expect([png.readUInt32BE(16), png.readUInt32BE(20)]).toEqual([3942, 2787]);
  });

  it('says why no PDF came, stops drawing one on request, and takes what is on screen', async () => {
    const page = await browser.newPage();
    await openSheet(page, /standby controller/);
    const dialog = await openDialog(page);
    await page.route('**/sheet.pdf*', (route) =>
      route.fulfill({
        status: 503,
        json: { code: 'unavailable', message: 'Many sheets are being drawn just now.', requestId: 'r' },
      }),
    );
    await dialog.getByRole('button', { name: 'Export PDF' }).click();
    await dialog.getByRole('alert').getByText('Many sheets are being drawn just now.').waitFor();

    // An answer that does not come.
    await page.route('**/sheet.pdf*', () => undefined);
    await dialog.getByRole('button', { name: 'Export PDF' }).click();
    await dialog.getByText('Drawing the PDF…').waitFor();
    await dialog.getByRole('button', { name: 'Cancel' }).click();
    await dialog.getByRole('button', { name: 'Close', exact: true }).last().waitFor();
    expect(await dialog.getByRole('alert').count()).toBe(0);

    // What is on screen, with the strip of caution under it.
    await dialog.getByText('PNG', { exact: true }).click();
    await dialog.getByText('As on screen', { exact: true }).click();
    await dialog.getByText('1×', { exact: true }).click();
    const canvas = (await page.locator('.sheet-canvas .react-flow').boundingBox())!;
    const seen = await bytesOf(await exported(page, dialog, 'PNG'));
    expect([seen.readUInt32BE(16), seen.readUInt32BE(20)]).toEqual([canvas.width, canvas.height + 24]);
    expect(seen.length).toBeGreaterThan(20_000);
  });

  it('is printed alone, black on white, on one page', async () => {
    const page = await browser.newPage({ theme: 'dark' });
    await openSheet(page, /with planted faults/);
    const printed = await page.pdf({ preferCSSPageSize: true, printBackground: true });
    const { pages, words } = await wordsOf(printed);
    expect(pages).toBe(1);
    expect(words.join(' ')).toContain('verify on your equipment');
    expect(words).toContain('Gullhaven');
    for (const onScreen of ['Export', 'Checks', 'VNIs differ']) expect(words).not.toContain(onScreen);
    await node(page, 'sheet').waitFor();
    expect(await page.locator('.printed-sheet').count()).toBe(0);
  });
});
