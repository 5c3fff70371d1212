import { useLayoutEffect, useState, type RefObject } from 'react';

interface RowWindow {
  /** The rows to draw: from this one, up to but not with that one. */
  readonly from: number;
  readonly to: number;
  /** Room to keep free above and below them. */
  readonly abovePx: number;
  readonly belowPx: number;
}

const spareRows = 12;

/**
 * Which of many rows of one height are to be drawn, as their box is scrolled. `rowPx` is measured from the first row
 * drawn, `boxPx` from the box; until then both are guesses.
 */
export function useRowWindow(box: RefObject<HTMLElement | null>, count: number, isOn: boolean): RowWindow {
  const [{ topPx, boxPx, rowPx }, setMeasures] = useState({ topPx: 0, boxPx: 600, rowPx: 35 });
  useLayoutEffect(() => {
    const element = box.current;
    if (element === null || !isOn) return;
    const measure = (): void => {
      const row = element.querySelector<HTMLElement>('tr[aria-rowindex]')?.offsetHeight ?? 0;
      setMeasures((before) => {
        const next = {
          topPx: element.scrollTop,
          boxPx: element.clientHeight || before.boxPx,
          rowPx: row || before.rowPx,
        };
        return next.topPx === before.topPx && next.boxPx === before.boxPx && next.rowPx === before.rowPx
          ? before
          : next;
      });
    };
    measure();
    element.addEventListener('scroll', measure, { passive: true });
    const observer = new ResizeObserver(measure);
    observer.observe(element);
    return () => {
      element.removeEventListener('scroll', measure);
      observer.disconnect();
    };
  }, [box, isOn, count]);
  if (!isOn) return { from: 0, to: count, abovePx: 0, belowPx: 0 };
  const to = Math.min(count, Math.ceil((topPx + boxPx) / rowPx) + spareRows);
  const from = Math.max(0, Math.min(Math.floor(topPx / rowPx) - spareRows, to - 1));
  return { from, to, abovePx: from * rowPx, belowPx: (count - to) * rowPx };
}
