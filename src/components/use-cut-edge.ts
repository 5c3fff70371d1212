import { useLayoutEffect, useState, type RefObject } from 'react';

/**
 * How far from a box's right border its content is cut there, in pixels: past its scroll bar. Undefined while all of it is in
 * sight on that side.
 */
export function useCutEdge(box: RefObject<HTMLElement | null>): number | undefined {
  const [cutPx, setCutPx] = useState<number>();
  useLayoutEffect(() => {
    const element = box.current;
    if (element === null) return;
    const measure = (): void => {
      // A pixel may be lost to rounding.
      const isCut = element.scrollLeft + element.clientWidth < element.scrollWidth - 1;
      setCutPx(isCut ? element.offsetWidth - element.clientWidth - element.clientLeft : undefined);
    };
    measure();
    element.addEventListener('scroll', measure, { passive: true });
    const observer = new ResizeObserver(measure);
    observer.observe(element);
    for (const child of element.children) observer.observe(child);
    return () => {
      element.removeEventListener('scroll', measure);
      observer.disconnect();
    };
  }, [box]);
  return cutPx;
}
