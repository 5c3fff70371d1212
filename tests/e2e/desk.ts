import type { Locator, Page } from 'playwright-core';

export type DemoRole = 'owner' | 'architect' | 'reviewer' | 'presales' | 'installer';

/** Signs in as one of the demo's people by one press and lands on the engagements. */
export const signInAs = async (page: Page, role: DemoRole): Promise<void> => {
  await page.goto('/');
  await page.getByRole('button', { name: new RegExp(`^${role}\\b`, 'i') }).click();
  await page.getByRole('heading', { name: 'Engagements' }).waitFor();
};

/** Makes a design of one's own and opens it. */
export const newDesign = async (
  page: Page,
  title: string,
  from: 'Empty sheet' | 'Stretch' | 'Demo' = 'Empty sheet',
): Promise<void> => {
  await page.getByRole('main').getByRole('button', { name: 'New design' }).first().click();
  const dialog = page.getByRole('dialog');
  await dialog.getByText(from, { exact: true }).click();
  await dialog.getByLabel('Title').fill(title);
  await dialog.getByRole('button', { name: 'Create and open' }).click();
  await page.locator('.sheet-canvas').waitFor();
};

export const node = (page: Page, id: string): Locator => page.locator(`.react-flow__node[data-id="${id}"]`);
export const nodes = (page: Page, type: string): Locator => page.locator(`.react-flow__node-${type}`);

export interface Spot {
  readonly x: number;
  readonly y: number;
}

/** The middle of an element on screen. */
export const middleOf = async (target: Locator): Promise<Spot> => {
  const box = await target.boundingBox();
  if (box === null) throw new Error('It is not on screen.');
  return { x: box.x + box.width / 2, y: box.y + box.height / 2 };
};

/** Drags from one place to another in steps, as a hand does. */
export const drag = async (page: Page, from: Spot, to: Spot): Promise<void> => {
  await page.mouse.move(from.x, from.y);
  await page.mouse.down();
  await page.mouse.move((from.x + to.x) / 2, (from.y + to.y) / 2, { steps: 6 });
  await page.mouse.move(to.x, to.y, { steps: 6 });
  await page.mouse.up();
};

/** Puts a part of the tray down at a place of the canvas, given as shares of its width and height. */
export const placePart = async (page: Page, part: string, share: Spot): Promise<void> => {
  const canvas = await page.locator('.sheet-canvas').boundingBox();
  await page
    .getByRole('complementary', { name: 'Parts' })
    .getByRole('button', { name: part, exact: true })
    .click();
  await page.mouse.click(canvas!.x + canvas!.width * share.x, canvas!.y + canvas!.height * share.y);
};

/** Waits until the bar says that everything is saved. */
export const saved = (page: Page): Promise<void> => page.getByText('Saved', { exact: true }).waitFor();

/** Waits until the sheet, which keeps itself fitted to its room, has stopped gliding. */
export const atRest = async (page: Page): Promise<void> => {
  const where = () => page.locator('.react-flow__viewport').getAttribute('style');
  let [before, now] = [await where(), ''];
  for (let quiet = 0; quiet < 3; quiet = now === before ? quiet + 1 : 0) {
    before = now;
    await page.waitForTimeout(150);
    now = (await where()) ?? '';
  }
};

/** Opens the drawer under the sheet unless it stands open. */
export const openDrawer = async (page: Page): Promise<void> => {
  const shut = page.getByRole('button', { name: 'Open the drawer' });
  if ((await shut.count()) === 0) return;
  await shut.click();
  await atRest(page);
};

/** The rows of the findings list that say something. */
export const finding = (page: Page, words: RegExp): Locator =>
  page.getByRole('list', { name: 'Findings' }).getByRole('listitem').filter({ hasText: words });

/** The design as the server has it now. */
export const storedDesign = async (
  page: Page,
): Promise<{ readonly [collection: string]: { readonly [id: string]: never } }> => {
  const id = /\/designs\/([^/?]+)/.exec(page.url())![1]!;
  const answer = await page.request.get(`/api/designs/${id}`);
  return ((await answer.json()) as { document: never }).document;
};
