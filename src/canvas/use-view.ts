import { useReactFlow, useStore } from '@xyflow/react';
import { useCallback, useMemo, useRef } from 'react';
import type { Point, Rect, SheetFrame } from '../drawing/geometry.ts';
import { setFitted } from './desk-state.ts';

export const zoomLimits = { least: 0.1, most: 3 } as const;
// 10 to 14 px of desk show round a fitted sheet.
const deskPx = 12;
const panMs = 240;
const zoomMs = 120;

const still = (): boolean => window.matchMedia('(prefers-reduced-motion: reduce)').matches;

export interface View {
  readonly zoom: number;
  /** Zooms by a factor; presses that come while it still glides add up. */
  readonly zoomBy: (factor: number) => void;
  readonly fit: (sheet: SheetFrame, animated?: boolean) => void;
  /** Brings a point of the sheet to the middle unless it is well in view already. */
  readonly showPoint: (at: Point) => void;
  readonly middle: () => Point;
  /** Brings a part of the sheet to fill most of the view. */
  readonly fitRect: (rect: Rect) => void;
  /** Where a point of the sheet is on the screen; undefined outside the view. */
  readonly onScreen: (at: Point) => Point | undefined;
  readonly fromScreen: (at: Point) => Point;
}

/** Moves over the sheet. Fits are computed from the model, never measured. */
export function useView(): View {
  const flow = useReactFlow();
  const aim = useRef({ zoom: 1, until: 0 });
  const zoom = useStore((state) => state.transform[2]);
  const width = useStore((state) => state.width);
  const height = useStore((state) => state.height);
  const fit = useCallback(
    (sheet: SheetFrame, animated = true) => {
      if (width === 0 || height === 0) return;
      setFitted(true);
      const next = Math.min((width - 2 * deskPx) / sheet.width, (height - 2 * deskPx) / sheet.height, 1.2);
      const x = (width - sheet.width * next) / 2;
      const y = (height - sheet.height * next) / 2;
      void flow.setViewport({ x, y, zoom: next }, { duration: animated && !still() ? panMs : 0 });
    },
    [flow, width, height],
  );
  return useMemo(
    () => ({
      zoom,
      zoomBy: (factor) => {
        setFitted(false);
        const from = performance.now() < aim.current.until ? aim.current.zoom : flow.getViewport().zoom;
        const next = Math.min(zoomLimits.most, Math.max(zoomLimits.least, from * factor));
        aim.current = { zoom: next, until: performance.now() + 2 * zoomMs };
        void flow.zoomTo(next, { duration: still() ? 0 : zoomMs });
      },
      fit,
      showPoint: (at) => {
        const viewport = flow.getViewport();
        const screen = { x: at.x * viewport.zoom + viewport.x, y: at.y * viewport.zoom + viewport.y };
        const margin = 60;
        if (screen.x > margin && screen.y > margin && screen.x < width - margin && screen.y < height - margin)
          return;
        setFitted(false);
        void flow.setCenter(at.x, at.y, { zoom: viewport.zoom, duration: still() ? 0 : panMs });
      },
      fitRect: (rect) => {
        if (width === 0 || height === 0) return;
        setFitted(false);
        const next = Math.max(
          zoomLimits.least,
          Math.min((0.7 * width) / rect.width, (0.7 * height) / rect.height, 1.5),
        );
        void flow.setViewport(
          {
            x: width / 2 - (rect.x + rect.width / 2) * next,
            y: height / 2 - (rect.y + rect.height / 2) * next,
            zoom: next,
          },
          { duration: still() ? 0 : panMs },
        );
      },
      onScreen: (at) => {
        const viewport = flow.getViewport();
        const inView = { x: at.x * viewport.zoom + viewport.x, y: at.y * viewport.zoom + viewport.y };
        return inView.x < 0 || inView.y < 0 || inView.x > width || inView.y > height
          ? undefined
          : flow.flowToScreenPosition(at);
      },
      fromScreen: (at) => flow.screenToFlowPosition(at),
      middle: () => {
        const viewport = flow.getViewport();
        return { x: (width / 2 - viewport.x) / viewport.zoom, y: (height / 2 - viewport.y) / viewport.zoom };
      },
    }),
    [flow, zoom, fit, width, height],
  );
}
