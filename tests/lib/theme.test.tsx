import { act, render, screen } from '@testing-library/react';
import { readFileSync } from 'node:fs';
import { afterEach, beforeEach, expect, test, vi } from 'vitest';
import { chooseTheme, followTheme, useTheme, useThemeChoice } from '../../src/lib/theme.ts';

let dark = false;
let systemChanged: () => void = () => undefined;
let stop: () => void = () => undefined;

beforeEach(() => {
  dark = false;
  vi.spyOn(window, 'matchMedia').mockImplementation(
    (media) =>
      ({
        media,
        get matches() {
          return dark;
        },
        addEventListener: (_: string, listener: () => void) => {
          systemChanged = listener;
        },
        removeEventListener: () => {
          systemChanged = () => undefined;
        },
      }) as unknown as MediaQueryList,
  );
  stop = followTheme();
});
afterEach(() => {
  stop();
  vi.restoreAllMocks();
});

function Shown() {
  return `${useThemeChoice()} ${useTheme()}`;
}
const shownOnPage = (): string | undefined => document.documentElement.dataset.theme;

test('without a choice the system decides, also when it changes its mind', () => {
  render(<Shown />);
  expect(screen.getByText('system paper')).toBeVisible();
  dark = true;
  act(() => systemChanged());
  expect(screen.getByText('system slate')).toBeVisible();
  expect(shownOnPage()).toBe('slate');
});

test('a choice stands whatever the system says, and is kept for the next visit', () => {
  render(<Shown />);
  act(() => chooseTheme('slate'));
  expect(screen.getByText('slate slate')).toBeVisible();
  expect(window.localStorage.getItem('longpatch.theme')).toBe('slate');
  act(() => systemChanged());
  expect(shownOnPage()).toBe('slate');
});

test('a choice made in another tab is followed', () => {
  window.localStorage.setItem('longpatch.theme', 'slate');
  window.dispatchEvent(new StorageEvent('storage', { key: 'longpatch.theme' }));
  expect(shownOnPage()).toBe('slate');
});

test('something odd in the storage counts as no choice', () => {
  window.localStorage.setItem('longpatch.theme', 'pink');
  render(<Shown />);
  expect(screen.getByText('system paper')).toBeVisible();
});

test('without storage the choice still holds for this page', () => {
  vi.spyOn(Storage.prototype, 'setItem').mockImplementation(() => {
    throw new Error('storage is off');
  });
  vi.spyOn(Storage.prototype, 'getItem').mockImplementation(() => {
    throw new Error('storage is off');
  });
  chooseTheme('slate');
  expect(shownOnPage()).toBe('slate');
  chooseTheme('system');
});

test.each([
  ['slate', false, 'slate'],
  ['paper', true, 'paper'],
  ['system', true, 'slate'],
  [null, true, 'slate'],
  [null, false, 'paper'],
] as const)(
  'before the first paint a choice of %s on a system that is dark: %s gives %s',
  (kept, systemDark, theme) => {
    dark = systemDark;
    if (kept !== null) window.localStorage.setItem('longpatch.theme', kept);
    delete document.documentElement.dataset.theme;
    const script = readFileSync('public/theme-before-paint.js', 'utf8');
    new Function(script)();
    expect(shownOnPage()).toBe(theme);
  },
);
