import { useReactFlow, useStore } from '@xyflow/react';
import { useCallback } from 'react';
import type { Point } from '../drawing/geometry.ts';
import { setFitted } from './desk-state.ts';

const marginPx = 48;
const panMs = 240;

/** Brings all of these points into view: pans if they fit at this zoom, else zooms out as far as it takes. */
export function useShowAll(): (points: readonly Point[]) => void {
  const flow = useReactFlow();
  const width = useStore((state) => state.width);
  const height = useStore((state) => state.height);
  return useCallback(
    (points) => {
      if (points.length === 0 || width === 0 || height === 0) return;
      const [xs, ys] = [points.map(({ x }) => x), points.map(({ y }) => y)];
      const [left, right] = [Math.min(...xs), Math.max(...xs)];
      const [top, bottom] = [Math.min(...ys), Math.max(...ys)];
      const { x, y, zoom } = flow.getViewport();
      const isInView =
        left * zoom + x >= marginPx / 2 &&
        right * zoom + x <= width - marginPx / 2 &&
        top * zoom + y >= marginPx / 2 &&
        bottom * zoom + y <= height - marginPx / 2;
      if (isInView) return;
      const most = Math.min(
        (width - 2 * marginPx) / Math.max(1, right - left),
        (height - 2 * marginPx) / Math.max(1, bottom - top),
      );
      const isStill = window.matchMedia('(prefers-reduced-motion: reduce)').matches;
      setFitted(false);
      void flow.setCenter((left + right) / 2, (top + bottom) / 2, {
        zoom: Math.min(zoom, most),
        duration: isStill ? 0 : panMs,
      });
    },
    [flow, width, height],
  );
}
