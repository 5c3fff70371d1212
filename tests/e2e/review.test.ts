import AxeBuilder from '@axe-core/playwright';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { launchBrowser, type TestBrowser } from '../support/browser.ts';
import { newDesign, nodes, placePart, saved, signInAs, storedDesign } from './desk.ts';

let browser: TestBrowser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

it('a reviewer draws what should be otherwise and calls the architect, who looks at it and applies it', async () => {
  const architect = await browser.newPage();
  await signInAs(architect, 'architect');
  await newDesign(architect, 'Under review');
  await placePart(architect, 'Firewall', { x: 0.4, y: 0.4 });
  await saved(architect);

  const reviewer = await browser.newPage();
  await signInAs(reviewer, 'reviewer');
  await reviewer.goto(new URL(architect.url()).pathname);
  await nodes(reviewer, 'device').waitFor();
  await reviewer.getByRole('button', { name: 'Suggest a change' }).first().click();
  const bar = reviewer.getByRole('region', { name: 'Suggestion' });
  await nodes(reviewer, 'device').click();
  const name = reviewer
    .getByRole('complementary', { name: 'Inspector' })
    .getByRole('textbox', { name: 'Name' });
  await name.fill('fw-quay');
  await name.press('Enter');
  await bar.getByText('1 change, kept in this browser').waitFor();
  await bar.getByRole('button', { name: 'Send as suggestion…' }).click();
  const dialog = reviewer.getByRole('dialog', { name: 'Send as suggestion' });
  await dialog.getByRole('button', { name: 'Send', exact: true }).click();
  await dialog.getByText(/There are no words yet/).waitFor();
  await dialog.getByRole('textbox', { name: 'Why' }).pressSequentially('The name on the rack, @ros');
  await reviewer.getByRole('option', { name: /Rosa Halloran/ }).waitFor();
  await reviewer.keyboard.press('Enter');
  await reviewer.keyboard.press('Control+Enter');
  await bar.waitFor({ state: 'detached' });
  expect(Object.values(await storedDesign(reviewer).then(({ devices }) => devices!))).not.toContainEqual(
    expect.objectContaining({ name: 'fw-quay' }),
  );

  await architect.getByRole('navigation', { name: 'Design' }).getByRole('link', { name: 'Review' }).click();
  const thread = architect.getByRole('article', { name: /^Thread on Firewall/ });
  await thread.getByText('@Rosa Halloran').waitFor();
  const axe = await new AxeBuilder({ page: architect }).withTags(['wcag2a', 'wcag2aa', 'wcag22aa']).analyze();
  expect(axe.violations.map(({ id }) => id)).toEqual([]);
  await thread.getByRole('button', { name: 'Show' }).click();
  await architect.getByRole('button', { name: 'Show on the sheet' }).click();
  await architect.locator('.sheet-canvas').getByText('fw-quay').waitFor();
  await architect.getByRole('button', { name: 'Apply', exact: true }).click();
  await architect.getByText('The suggestion is part of the design now.', { exact: true }).waitFor();
  await architect.getByRole('tab', { name: 'Comments 0' }).waitFor();
  const names = Object.values((await storedDesign(architect))['devices']!).map(({ name: each }) => each);
  expect(names).toEqual(['fw-quay']);
});
