import { screen, within } from '@testing-library/react';
import { beforeEach, expect, test } from 'vitest';
import { ruleReference } from '#engine/rules/rule-reference.ts';
import { fakeApi, json, sessionOf } from '../support/fake-api.ts';
import { renderRoute } from '../support/render-route.tsx';

beforeEach(() => void fakeApi({ 'GET /api/session': json(sessionOf('reviewer')) }));
const mismatch = ruleReference().find(({ id }) => id === 'tunnel-vni-mismatch');
// Looked up without roles: working those out for every part of a long page takes seconds.
const shown = () => [...document.querySelectorAll('article h2')].map(({ textContent }) => textContent);

test('every check of the engine is listed with what it is for and on what it rests', async () => {
  renderRoute('/checks');
  await screen.findByRole('heading', { level: 1 });
  expect(shown()).toEqual(ruleReference().map(({ title }) => title));
  const one = within(document.getElementById('tunnel-vni-mismatch') ?? document.body);
  expect(one.getByText('Blocking')).toBeVisible();
  expect(one.getByText(mismatch?.why ?? '–')).toBeVisible();
  expect(one.getByText(mismatch?.seen ?? '–')).toBeVisible();
  expect(one.getAllByText(/^RFC 7348/)[0]).toBeVisible();
});

test('severity and words are taken from the address and written into it', async () => {
  const { user, address } = renderRoute('/checks?severity=blocking&q=vni');
  await screen.findByRole('heading', { level: 1 });
  const before = shown();
  expect(before).toContain(mismatch?.title);
  expect(before.length).toBeLessThan(ruleReference().length);
  await user.click(screen.getByRole('radio', { name: /^All/ }));
  expect(address()).toBe('/checks?q=vni');
  expect(shown().length).toBeGreaterThanOrEqual(before.length);
});

test('words that no check speaks of say so and can be taken back', async () => {
  const { user, address } = renderRoute('/checks?severity=blocking&q=toaster');
  expect(await screen.findByText('No check speaks of this')).toBeVisible();
  await user.click(screen.getByRole('button', { name: 'Show all checks' }));
  expect(address()).toBe('/checks');
  expect(shown()).toHaveLength(ruleReference().length);
});

test('a severity that is none counts as no filter', async () => {
  renderRoute('/checks?severity=toaster');
  await screen.findByRole('heading', { level: 1 });
  expect(screen.getByRole('radio', { name: /^All/ })).toBeChecked();
  expect(shown()).toHaveLength(ruleReference().length);
});
