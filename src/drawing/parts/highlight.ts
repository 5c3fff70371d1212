import type { Rect } from '../geometry.ts';
import type { Shape } from '../shape.ts';
import { group, shape } from '../shape.ts';
import { textWidth } from '../text-width.ts';
import { paint } from '../theme/paint.ts';
import { grown } from './outlines.ts';
import { centredLine } from './text-shape.ts';

const off = 6;

/** Blue wash behind what is selected. */
export const selectionWash = (rect: Rect): Shape => ({
  ...shape('rect', { ...grown(rect, off), fill: paint('blue-soft'), fillOpacity: 0.45 }),
  key: 'wash',
});

/** Pencil ticks at the corners of what is selected. */
export const cornerTicks = (rect: Rect): Shape => {
  const { x, y, width, height } = grown(rect, off);
  const [right, bottom] = [x + width, y + height];
  const tick = 8;
  return {
    ...shape('path', {
      d:
        `M${x} ${y + tick}V${y}H${x + tick}M${right - tick} ${y}H${right}V${y + tick}` +
        `M${right} ${bottom - tick}V${bottom}H${right - tick}M${x + tick} ${bottom}H${x}V${bottom - tick}`,
      fill: 'none',
      stroke: paint('blue'),
      strokeWidth: 2.4,
    }),
    key: 'ticks',
  };
};

/** A soft halo with an edge round a ferrule or a ring's box. */
export const boxHalo = (rect: Rect, lit: boolean): Shape => ({
  ...shape('rect', {
    ...grown(rect, 5),
    rx: 6,
    fill: paint(lit ? 'lamp' : 'blue-soft'),
    stroke: paint(lit ? 'lamp-line' : 'blue'),
    strokeWidth: lit ? 1.3 : 1.5,
  }),
  key: 'halo',
});

/** Dashed frame and name flag of somebody else who holds an element. */
export const heldFrame = (rect: Rect, name: string): Shape => {
  const frame = grown(rect, 6);
  const width = textWidth(name, 12.5, 600) + 16;
  return group([
    shape('rect', {
      ...frame,
      fill: 'none',
      stroke: paint('blue'),
      strokeWidth: 1.8,
      strokeDasharray: '6 4',
    }),
    shape('rect', { x: frame.x, y: frame.y - 20, width, height: 20, fill: paint('blue') }),
    centredLine(name, frame.x + 8, frame.y - 10, { sizePx: 12.5, weight: 600, fill: paint('blue-ink') }),
  ]);
};
