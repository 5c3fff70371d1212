import AxeBuilder from '@axe-core/playwright';
import type { Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { launchBrowser, type TestBrowser } from '../support/browser.ts';
import { node, signInAs } from './desk.ts';

let browser: TestBrowser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

/** Findings of axe-core (WCAG 2.2 A and AA, or single rules of it) that are serious or critical, in words. */
const seriousFindings = async (page: Page, rules?: string[]): Promise<readonly string[]> => {
  const axe = new AxeBuilder({ page });
  const result = await (
    rules === undefined
      ? axe.withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'])
      : axe.withRules(rules)
  ).analyze();
  return result.violations
    .filter((violation) => violation.impact === 'serious' || violation.impact === 'critical')
    .map(
      (violation) =>
        `${violation.id}: ${violation.help} (${violation.nodes
          .map((at) => at.target.join(' '))
          .slice(0, 3)
          .join('; ')})`,
    );
};

const openSheet = async (page: Page, title: string): Promise<void> => {
  await page
    .getByRole('link', { name: new RegExp(title) })
    .first()
    .click();
  await node(page, 'sheet').waitFor();
};

/** Goes from a design's sheet to another of its pages. */
const goToPage = (page: Page, name: string) => page.goto(`${new URL(page.url()).pathname}/${name}`);

const pages: readonly (readonly [string, (page: Page) => Promise<void>])[] = [
  ['sign-in', async (page) => void (await page.goto('/'))],
  [
    'the wire calculator before sign-in',
    async (page) => {
      await page.goto('/wire');
      await page.getByRole('heading', { name: 'Padding around the limit' }).waitFor();
      for (const table of await page.getByText('The same in a table').all()) await table.click();
    },
  ],
  [
    'the wire calculator with inputs that cannot be',
    async (page) => {
      await page.goto('/wire?mtu=67&tags=1&vxlan=none');
      await page.getByText('Nothing is computed until this is mended.').waitFor();
    },
  ],
  [
    'what changed since a revision',
    async (page) => {
      await signInAs(page, 'reviewer');
      await openSheet(page, 'Skerry standby controller');
      await goToPage(page, 'history?from=revision-A&to=now');
      await page.getByRole('list', { name: 'Legend' }).waitFor();
      await node(page, 'sheet').waitFor();
    },
  ],
  [
    'a frozen revision',
    async (page) => {
      await signInAs(page, 'installer');
      await page.getByRole('link', { name: 'Revision A approved' }).click();
      await node(page, 'sheet').waitFor();
    },
  ],
  [
    'the HTTP API',
    async (page) => {
      await signInAs(page, 'architect');
      await page.goto('/http-api#postDesignsByDesignIdPatches');
      const opened = page.locator('#postDesignsByDesignIdPatches');
      await opened.getByText('Answers these roles').waitFor();
    },
  ],
  ['engagements', (page) => signInAs(page, 'architect')],
  [
    'a new design',
    async (page) => {
      await signInAs(page, 'architect');
      await page.getByRole('main').getByRole('button', { name: 'New design' }).first().click();
      await page.getByRole('dialog').waitFor();
    },
  ],
  [
    'a sheet with faults and a selection',
    async (page) => {
      await signInAs(page, 'architect');
      await openSheet(page, 'with planted faults');
      await page.getByRole('list', { name: 'Findings' }).getByRole('button').first().click();
    },
  ],
  [
    'the outline of a sheet with a selection',
    async (page) => {
      await signInAs(page, 'architect');
      await openSheet(page, 'with planted faults');
      await page.getByRole('tab', { name: 'Outline' }).click();
      await page.getByRole('treeitem', { name: /^Site Gullhaven/ }).click();
    },
  ],
  [
    'a frame followed beside another, to a hop where it does not fit',
    async (page) => {
      await signInAs(page, 'reviewer');
      await openSheet(page, 'phase 1');
      const { pathname } = new URL(page.url());
      await page.goto(
        `${pathname}?drawer=trace&from=sw-ske/p2&to=ticket-1&send=tcp-full-size&bytes=1500&vs-bytes=1396`,
      );
      await page.getByText('Dropped at fw-ske without a word.').waitFor();
    },
  ],
  [
    'a sheet that may only be read',
    async (page) => {
      await signInAs(page, 'reviewer');
      await openSheet(page, 'phase 1');
    },
  ],
  [
    'segments, where they land and their demands',
    async (page) => {
      await signInAs(page, 'architect');
      await openSheet(page, 'with planted faults');
      await goToPage(page, 'segments');
      await page
        .getByRole('row', { name: /Ticketing/ })
        .first()
        .click();
      await page.getByRole('complementary', { name: 'Inspector' }).waitFor();
    },
  ],
  [
    'numbering with clashes',
    async (page) => {
      await signInAs(page, 'architect');
      await openSheet(page, 'with planted faults');
      await goToPage(page, 'numbering');
      await page.getByRole('heading', { name: 'Pools' }).waitFor();
    },
  ],
  [
    'the inventory as tables',
    async (page) => {
      await signInAs(page, 'architect');
      await openSheet(page, 'phase 1');
      await goToPage(page, 'segments');
      await page.getByRole('button', { name: 'Inventory as tables' }).click();
      await page.getByRole('dialog').waitFor();
      // A phone takes tables out only.
      if ((await page.getByLabel('CSV files').count()) === 0) return;
      await page.getByLabel('CSV files').setInputFiles({
        name: 'ports.csv',
        mimeType: 'text/csv',
        buffer: Buffer.from('Device,Port,MTU\nfw-gul,1,60\n'),
      });
      await page.getByRole('table', { name: 'Cells that can’t be taken' }).waitFor();
    },
  ],
  [
    'the checks of a design, with a finding open and its waiver being written',
    async (page) => {
      await signInAs(page, 'owner');
      await openSheet(page, 'with planted faults');
      await goToPage(page, 'checks');
      await page.getByRole('button', { name: /VNI 10120 at Head office/ }).click();
      await page.getByRole('button', { name: 'Waive…' }).click();
      await page.getByRole('dialog').getByRole('button', { name: 'Waive', exact: true }).click();
      await page.getByText(/^Reason is empty/).waitFor();
    },
  ],
  [
    'the checks of a design by element',
    async (page) => {
      await signInAs(page, 'architect');
      await openSheet(page, 'with planted faults');
      await goToPage(page, 'checks?group=element');
      await page.getByRole('heading', { name: 'tn-ho-gul-b' }).waitFor();
    },
  ],
  [
    'the review of a design, with a comment being written',
    async (page) => {
      await signInAs(page, 'reviewer');
      await openSheet(page, 'with planted faults');
      await goToPage(page, 'review');
      await page.getByRole('button', { name: 'Comment on the design…' }).click();
      await page.getByRole('textbox', { name: 'Comment' }).pressSequentially('See @');
      await page.getByRole('option', { name: /Rosa Halloran/ }).waitFor();
    },
  ],
  [
    'equipment profiles',
    async (page) => {
      await signInAs(page, 'owner');
      await page.getByRole('link', { name: 'Equipment' }).click();
      await page.getByRole('heading', { name: 'Pair of small gateways' }).waitFor();
    },
  ],
  [
    'the people of a workspace',
    async (page) => {
      await signInAs(page, 'owner');
      await page.getByRole('link', { name: 'People' }).click();
      await page.getByRole('table', { name: 'People' }).waitFor();
    },
  ],
  [
    'the activity of a workspace',
    async (page) => {
      await signInAs(page, 'owner');
      await page.getByRole('link', { name: 'Activity' }).click();
      await page.getByRole('table', { name: 'Activity' }).waitFor();
    },
  ],
  [
    'the settings of a workspace',
    async (page) => {
      await signInAs(page, 'owner');
      await page.getByRole('link', { name: 'Settings' }).click();
      await page.getByLabel('Name of the workspace').waitFor();
    },
  ],
  [
    'an API token being made',
    async (page) => {
      await signInAs(page, 'reviewer');
      await page.goto('/account/tokens');
      await page.getByRole('button', { name: 'New token' }).click();
      await page.getByRole('button', { name: 'Make the token' }).click();
      await page.getByText(/^Name is empty/).waitFor();
    },
  ],
  [
    'the sessions of an account',
    async (page) => {
      await signInAs(page, 'reviewer');
      await page.goto('/account/sessions');
      await page.getByRole('table', { name: 'Your sessions' }).waitFor();
    },
  ],
  [
    'load with a limit chosen',
    async (page) => {
      await signInAs(page, 'architect');
      await openSheet(page, 'phase 1');
      await goToPage(page, '?drawer=load');
      await page.getByRole('table', { name: 'Load in its limits' }).waitFor();
    },
  ],
  [
    'an outage',
    async (page) => {
      await signInAs(page, 'reviewer');
      await openSheet(page, 'phase 1');
      await goToPage(page, '?drawer=outage&failed=devices%2Ffw-ske');
      await page
        .getByText(/parted in \d/)
        .first()
        .waitFor();
    },
  ],
  [
    'the export of a sheet',
    async (page) => {
      await signInAs(page, 'presales');
      await openSheet(page, 'phase 1');
      await page.getByRole('button', { name: 'Export', exact: true }).click();
      await page.getByRole('img', { name: /^Preview of the sheet/ }).waitFor();
    },
  ],
  [
    'the reference of checks',
    async (page) => {
      await signInAs(page, 'reviewer');
      await page.goto('/checks');
      await page.getByRole('heading', { name: 'Reference of checks' }).first().waitFor();
    },
  ],
  [
    'a page that does not exist',
    async (page) => {
      await signInAs(page, 'reviewer');
      await page.goto('/nowhere');
      await page.getByRole('heading').first().waitFor();
    },
  ],
];

describe('on paper and on slate', () => {
  it.each(pages)('%s has no serious accessibility finding', async (_name, open) => {
    const page = await browser.newPage();
    await open(page);
    expect(await seriousFindings(page)).toEqual([]);
    // The same page in the other theme: nothing differs but its colours.
    await page.emulateMedia({ colorScheme: 'dark' });
    await page.locator('html[data-theme=slate]').waitFor();
    expect(await seriousFindings(page, ['color-contrast'])).toEqual([]);
    await page.context().close();
  });
});

describe('on a phone of 390 px', () => {
  it.each(pages)('%s shows nothing wider than the screen', async (_name, open) => {
    const page = await browser.newPage({ viewport: { width: 390, height: 844 } });
    await open(page);
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(390);
    await page.context().close();
  });
});
