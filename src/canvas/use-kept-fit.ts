import { useStore } from '@xyflow/react';
import { useEffect, useRef } from 'react';
import type { SheetFrame } from '../drawing/geometry.ts';
import { useDesk } from './desk-state.ts';
import type { View } from './use-view.ts';

/** Fits the sheet when it is opened, and again when the room for it changes while nobody has moved over it. */
export const useKeptFit = (sheet: SheetFrame, view: View): void => {
  const width = useStore((state) => state.width);
  const height = useStore((state) => state.height);
  // What a menu was opened on stays beneath it.
  const hasMenu = useDesk((state) => state.menu !== undefined);
  const latest = useRef({ sheet, view });
  const fittedBefore = useRef(false);
  useEffect(() => {
    latest.current = { sheet, view };
  });
  useEffect(() => {
    if (width === 0 || height === 0 || hasMenu || !useDesk.getState().fitted) return;
    const fit = (): void => {
      if (!useDesk.getState().fitted) return;
      latest.current.view.fit(latest.current.sheet, fittedBefore.current);
      fittedBefore.current = true;
    };
    // Not under a hand that drags something, or a marquee: what it encloses would move away under it.
    const held =
      document.querySelector(
        '.react-flow__node.dragging, .react-flow__connection, .react-flow__selection',
      ) !== null;
    if (!held) return fit();
    window.addEventListener('pointerup', fit, { once: true });
    return () => window.removeEventListener('pointerup', fit);
  }, [width, height, sheet.width, sheet.height, hasMenu]);
};
