import type { Side } from '../../engine/model/layout.ts';
import type { Point, Rect } from '../geometry.ts';

export const right = (r: Rect): number => r.x + r.width;
export const bottom = (r: Rect): number => r.y + r.height;
export const centre = (r: Rect): Point => ({ x: r.x + r.width / 2, y: r.y + r.height / 2 });

export const rectBetween = (x0: number, y0: number, x1: number, y1: number): Rect => ({
  x: Math.min(x0, x1),
  y: Math.min(y0, y1),
  width: Math.abs(x1 - x0),
  height: Math.abs(y1 - y0),
});

export const grown = (r: Rect, by: number, byY: number = by): Rect => ({
  x: r.x - by,
  y: r.y - byY,
  width: r.width + 2 * by,
  height: r.height + 2 * byY,
});

/** True when the insides meet; touching edges do not count. */
export const overlap = (a: Rect, b: Rect): boolean =>
  a.x < right(b) && b.x < right(a) && a.y < bottom(b) && b.y < bottom(a);

export const covers = (outer: Rect, inner: Rect): boolean =>
  outer.x <= inner.x && outer.y <= inner.y && right(outer) >= right(inner) && bottom(outer) >= bottom(inner);

export const contains = (r: Rect, p: Point): boolean =>
  p.x >= r.x && p.x <= right(r) && p.y >= r.y && p.y <= bottom(r);

export const around = (rects: readonly Rect[]): Rect | undefined => {
  if (rects.length === 0) return undefined;
  const x = Math.min(...rects.map((r) => r.x));
  const y = Math.min(...rects.map((r) => r.y));
  return {
    x,
    y,
    width: Math.max(...rects.map(right)) - x,
    height: Math.max(...rects.map(bottom)) - y,
  };
};

/** The ground a straight run covers: `half` to either side of it, `past` beyond both its ends. */
export const runRect = (p: Point, q: Point, half: number, past = 0): Rect => {
  const flat = Math.abs(p.x - q.x) >= Math.abs(p.y - q.y);
  return grown(rectBetween(p.x, p.y, q.x, q.y), flat ? past : half, flat ? half : past);
};

/** The four sides of a rectangle as drawn: 2 px wide. */
export const frameLines = ({ x, y, width, height }: Rect): readonly Rect[] => [
  { x, y: y - 1, width, height: 2 },
  { x, y: y + height - 1, width, height: 2 },
  { x: x - 1, y, width: 2, height },
  { x: x + width - 1, y, width: 2, height },
];

/** The unit step away from a plate's side. */
export const outward: { readonly [side in Side]: Point } = {
  left: { x: -1, y: 0 },
  right: { x: 1, y: 0 },
  top: { x: 0, y: -1 },
  bottom: { x: 0, y: 1 },
};

export const opposite: { readonly [side in Side]: Side } = {
  left: 'right',
  right: 'left',
  top: 'bottom',
  bottom: 'top',
};

export const isUpright = (side: Side): boolean => side === 'top' || side === 'bottom';

export const clamp = (value: number, least: number, most: number): number =>
  Math.max(least, Math.min(most, value));

/** Plain order of text, the same on every machine. */
export const byText = (a: string, b: string): number => (a < b ? -1 : a > b ? 1 : 0);
