import { useEffect, useLayoutEffect, useRef } from 'react';

/**
 * When what had the focus leaves the page with a change of `list`, the page's content takes it, so that the keyboard
 * goes on from there and not from the top of the window.
 */
export function useKeptFocus(list: unknown): void {
  const lastFocused = useRef<EventTarget | null>(null);
  useEffect(() => {
    const remember = ({ target }: FocusEvent): void => {
      lastFocused.current = target;
    };
    document.addEventListener('focusin', remember);
    return () => document.removeEventListener('focusin', remember);
  }, []);
  useLayoutEffect(() => {
    const last = lastFocused.current;
    if (!(last instanceof Element) || last.isConnected) return;
    if (document.activeElement === document.body) document.getElementById('main')?.focus();
  }, [list]);
}
