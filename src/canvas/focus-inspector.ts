import { flushSync } from 'react-dom';
import { setInspecting } from './desk-state.ts';

const inInspector = (selector: string): HTMLElement | null =>
  document.querySelector('aside[aria-label="Inspector"]')?.querySelector<HTMLElement>(selector) ?? null;

/** The field of the element's name takes the focus, or the first field of what the inspector shows, or its first button. */
export const focusInspector = (named = false): void => {
  flushSync(() => setInspecting(true));
  const field =
    (named ? inInspector('input[aria-label="Name"], textarea') : null) ??
    inInspector('input, select, textarea') ??
    inInspector('button');
  field?.focus();
  if (named && field instanceof HTMLInputElement) field.select();
};
