import { useLayoutEffect, useRef, useState, type RefObject } from 'react';

/** How wide an element is, kept up to date; `initialPx` until it was measured. */
export function useWidth<T extends HTMLElement>(
  initialPx: number,
): { readonly ref: RefObject<T | null>; readonly widthPx: number } {
  const ref = useRef<T>(null);
  const [widthPx, setWidthPx] = useState(initialPx);
  useLayoutEffect(() => {
    const element = ref.current;
    if (element === null) return;
    const measure = (): void => {
      // Nothing is laid out in a page that isn't shown.
      if (element.clientWidth > 0) setWidthPx(element.clientWidth);
    };
    measure();
    const observer = new ResizeObserver(measure);
    observer.observe(element);
    return () => observer.disconnect();
  }, []);
  return { ref, widthPx };
}
