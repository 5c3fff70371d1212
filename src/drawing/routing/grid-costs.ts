import type { Point, Rect } from '../geometry.ts';
import type { Direction } from './a-star.ts';
import { stepOf } from './a-star.ts';
import { isLevelRun } from './ground.ts';
import { bottom, right } from './rects.ts';

/** What every step between neighbouring crossings of a grid costs; painted rectangle by rectangle. */
export interface GridCosts {
  /** Multiplies the steps whose middle lies in a rectangle. */
  readonly weigh: (rect: Rect, factor: number) => void;
  /** Closes every step that comes into a rectangle. */
  readonly close: (rect: Rect) => void;
  /** Adds to each step that crosses a run. */
  readonly cross: (from: Point, to: Point, cost: number) => void;
  readonly of: (column: number, row: number, direction: Direction) => number;
}

export const gridCosts = (xs: readonly number[], ys: readonly number[], perPx: number): GridCosts => {
  const columns = xs.length;
  const level = new Float64Array(columns * ys.length);
  const upright = new Float64Array(columns * ys.length);
  ys.forEach((y, row) =>
    xs.forEach((x, column) => {
      level[row * columns + column] = ((xs[column + 1] ?? x) - x) * perPx;
      upright[row * columns + column] = ((ys[row + 1] ?? y) - y) * perPx;
    }),
  );
  const inside = (value: number, from: number, to: number): boolean => value > from && value < to;

  const paint = (
    rect: Rect,
    covers: (a: number, b: number, from: number, to: number) => boolean,
    change: (costs: Float64Array, at: number) => void,
  ): void => {
    for (let row = 0; row < ys.length; row += 1) {
      const y = ys[row]!;
      const next = ys[row + 1];
      const levelHere = inside(y, rect.y, bottom(rect));
      const uprightHere = next !== undefined && covers(y, next, rect.y, bottom(rect));
      if (!levelHere && !uprightHere) continue;
      for (let column = 0; column < columns; column += 1) {
        const x = xs[column]!;
        const beside = xs[column + 1];
        const at = row * columns + column;
        if (levelHere && beside !== undefined && covers(x, beside, rect.x, right(rect))) change(level, at);
        if (uprightHere && inside(x, rect.x, right(rect))) change(upright, at);
      }
    }
  };

  return {
    weigh: (rect, factor) =>
      paint(
        rect,
        (a, b, from, to) => inside((a + b) / 2, from, to),
        (costs, at) => {
          costs[at]! *= factor;
        },
      ),
    close: (rect) =>
      paint(
        rect,
        (a, b, from, to) => a < to && b > from,
        (costs, at) => {
          costs[at] = Infinity;
        },
      ),
    cross: (from, to, cost) => {
      const isLevel = isLevelRun(from, to);
      const [lines, across, costs] = isLevel ? [xs, ys, upright] : [ys, xs, level];
      const [at, start, end] = isLevel ? [from.y, from.x, to.x] : [from.x, from.y, to.y];
      const step = across.findIndex((value, i) => value < at && (across[i + 1] ?? -Infinity) >= at);
      if (step < 0) return;
      lines.forEach((value, i) => {
        if (value <= Math.min(start, end) || value >= Math.max(start, end)) return;
        costs[isLevel ? step * columns + i : i * columns + step]! += cost;
      });
    },
    of: (column, row, direction) => {
      const [dx, dy] = stepOf[direction];
      const at = (row + Math.min(0, dy)) * columns + column + Math.min(0, dx);
      return dx === 0 ? upright[at]! : level[at]!;
    },
  };
};
