import { useSyncExternalStore } from 'react';

export const themeChoices = ['paper', 'slate', 'system'] as const;
export type ThemeChoice = (typeof themeChoices)[number];
export type Theme = 'paper' | 'slate';

// public/theme-before-paint.js reads the same key.
const storageKey = 'longpatch.theme';
const listeners = new Set<() => void>();
// Chosen in this page while the browser keeps nothing.
let unkeptChoice: ThemeChoice = 'system';

const prefersDark = (): MediaQueryList => window.matchMedia('(prefers-color-scheme: dark)');

function readChoice(): ThemeChoice {
  try {
    const kept = window.localStorage.getItem(storageKey);
    return themeChoices.find((choice) => choice === kept) ?? 'system';
  } catch {
    return unkeptChoice;
  }
}

function themeNow(): Theme {
  const choice = readChoice();
  if (choice !== 'system') return choice;
  return prefersDark().matches ? 'slate' : 'paper';
}

function applyTheme(): void {
  document.documentElement.dataset.theme = themeNow();
  for (const listener of listeners) listener();
}

/** Keeps the choice in this browser and shows it at once, in this tab and the others. */
export function chooseTheme(choice: ThemeChoice): void {
  unkeptChoice = choice;
  try {
    window.localStorage.setItem(storageKey, choice);
  } catch {
    // Without storage the choice holds for this page only.
  }
  applyTheme();
}

/** Follows the system's theme and other tabs' choices until the returned function is called. */
export function followTheme(): () => void {
  const media = prefersDark();
  const onStorage = (event: StorageEvent): void => {
    if (event.key === storageKey || event.key === null) applyTheme();
  };
  media.addEventListener('change', applyTheme);
  window.addEventListener('storage', onStorage);
  applyTheme();
  return () => {
    media.removeEventListener('change', applyTheme);
    window.removeEventListener('storage', onStorage);
  };
}

function subscribe(listener: () => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

/** What the reader chose, 'system' included. */
export const useThemeChoice = (): ThemeChoice => useSyncExternalStore(subscribe, readChoice);

/** What is shown: paper or slate. */
export const useTheme = (): Theme => useSyncExternalStore(subscribe, themeNow);
