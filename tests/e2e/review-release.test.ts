import { afterAll, beforeAll, expect, it } from 'vitest';
import { launchBrowser, type TestBrowser } from '../support/browser.ts';
import { newDesign, placePart, saved, signInAs } from './desk.ts';

let browser: TestBrowser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

it('a draft is put to review, sent back without a reason never, approved by another, and its next revision tells what changed', async () => {
  const architect = await browser.newPage();
  await signInAs(architect, 'architect');
  await newDesign(architect, 'Reviewed', 'Demo');
  const path = new URL(architect.url()).pathname;
  await architect.getByRole('button', { name: 'What to do with this revision' }).click();
  await architect.getByRole('menuitem', { name: 'Ask for review…' }).click();
  const ask = architect.getByRole('dialog', { name: 'Ask for review' });
  await ask.getByLabel('Message to the reviewers').fill('Please look at the berths');
  await ask.getByRole('button', { name: 'Ask for review' }).click();
  await architect.getByText(/^Revision C is in review, asked for by Rosa Halloran/).waitFor();
  await architect.getByText('Read only').waitFor();

  const reviewer = await browser.newPage();
  await signInAs(reviewer, 'reviewer');
  await reviewer.goto(path);
  await reviewer.getByRole('button', { name: 'Send back…' }).click();
  const back = reviewer.getByRole('dialog', { name: 'Send revision C back' });
  await back.getByRole('button', { name: 'Send back', exact: true }).click();
  await back.getByText('Reason is empty. Say what has to be mended.').waitFor();
  await back.getByRole('button', { name: 'Cancel' }).click();
  await reviewer.getByRole('button', { name: 'Approve…' }).click();
  const approve = reviewer.getByRole('dialog', { name: 'Approve revision C' });
  await approve.getByLabel('Note').fill('Fine');
  await approve.getByRole('button', { name: 'Approve', exact: true }).click();
  await reviewer.getByText(/^Revision C was approved by Noor Okafor\./).waitFor();

  // The other window is told, and goes on with the next revision.
  await architect.getByRole('button', { name: 'Start the next revision' }).click();
  await placePart(architect, 'Switch', { x: 0.5, y: 0.2 });
  await saved(architect);
  await architect.goto(`${path}/history`);
  await architect.getByRole('button', { name: 'What changed since revision C' }).click();
  await architect.getByRole('button', { name: /Added: Switch .* added/ }).waitFor();
  expect(new URL(architect.url()).search).toBe('?from=revision-C&to=now');
  await architect.goto(`${path}/history?from=revision-Q&to=now`);
  await architect
    .getByText(/‘from’ in the address is revision-Q, which is no revision of this design/)
    .waitFor();
  await architect.getByRole('button', { name: 'Back to the history' }).click();
  await architect.getByRole('link', { name: 'Open revision C' }).click();
  await architect.getByText(/^Revision C\. Approved by Noor Okafor/).waitFor();
  await architect.locator('.sheet-canvas').waitFor();
});
