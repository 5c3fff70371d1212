import type { Point, Rect } from '../geometry.ts';
import type { Direction } from './a-star.ts';
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

/** How many of a sorted list's first values a condition holds for; it holds for none after the first it fails for. */
const countWhile = (length: number, holds: (index: number) => boolean): number => {
  let from = 0;
  let to = length;
  while (from < to) {
    const middle = (from + to) >> 1;
    if (holds(middle)) from = middle + 1;
    else to = middle;
  }
  return from;
};

interface Range {
  readonly from: number;
  /** Exclusive. */
  readonly to: number;
}

/** The lines strictly between two coordinates. */
const linesInside = (lines: readonly number[], from: number, to: number): Range => ({
  from: countWhile(lines.length, (i) => lines[i]! <= from),
  to: countWhile(lines.length, (i) => lines[i]! < to),
});
/** The steps from line to line whose middle lies strictly between two coordinates. */
const stepsCentred = (lines: readonly number[], from: number, to: number): Range => ({
  from: countWhile(lines.length - 1, (i) => (lines[i]! + lines[i + 1]!) / 2 <= from),
  to: countWhile(lines.length - 1, (i) => (lines[i]! + lines[i + 1]!) / 2 < to),
});
/** The steps from line to line that come between two coordinates anywhere. */
const stepsTouching = (lines: readonly number[], from: number, to: number): Range => ({
  from: countWhile(lines.length - 1, (i) => lines[i + 1]! <= from),
  to: countWhile(lines.length - 1, (i) => lines[i]! < to),
});

export const gridCosts = (xs: readonly number[], ys: readonly number[], perPx: number): GridCosts => {
  const columns = xs.length;
  const level = new Float64Array(columns * ys.length);
  const upright = new Float64Array(columns * ys.length);
  for (let row = 0; row < ys.length; row += 1) {
    const y = ys[row]!;
    const down = ((ys[row + 1] ?? y) - y) * perPx;
    for (let column = 0; column < columns; column += 1) {
      const x = xs[column]!;
      level[row * columns + column] = ((xs[column + 1] ?? x) - x) * perPx;
      upright[row * columns + column] = down;
    }
  }

  const paint = (
    rect: Rect,
    stepsOf: typeof stepsCentred,
    change: (costs: Float64Array, from: number, to: number) => void,
  ): void => {
    const inX = linesInside(xs, rect.x, right(rect));
    const inY = linesInside(ys, rect.y, bottom(rect));
    const alongX = stepsOf(xs, rect.x, right(rect));
    const alongY = stepsOf(ys, rect.y, bottom(rect));
    for (let row = inY.from; row < inY.to; row += 1)
      change(level, row * columns + alongX.from, row * columns + alongX.to);
    for (let row = alongY.from; row < alongY.to; row += 1)
      change(upright, row * columns + inX.from, row * columns + inX.to);
  };

  return {
    weigh: (rect, factor) =>
      paint(rect, stepsCentred, (costs, from, to) => {
        for (let at = from; at < to; at += 1) costs[at]! *= factor;
      }),
    close: (rect) =>
      paint(rect, stepsTouching, (costs, from, to) => {
        if (from < to) costs.fill(Infinity, from, to);
      }),
    cross: (from, to, cost) => {
      const isLevel = isLevelRun(from, to);
      const [lines, across] = isLevel ? [xs, ys] : [ys, xs];
      const [at, start, end] = isLevel ? [from.y, from.x, to.x] : [from.x, from.y, to.y];
      const step = countWhile(across.length, (i) => across[i]! < at) - 1;
      if (step < 0 || step + 1 >= across.length) return;
      const crossed = linesInside(lines, Math.min(start, end), Math.max(start, end));
      for (let i = crossed.from; i < crossed.to; i += 1)
        if (isLevel) upright[step * columns + i]! += cost;
        else level[i * columns + step]! += cost;
    },
    of: (column, row, direction) => {
      switch (direction) {
        case 0:
          return level[row * columns + column]!;
        case 1:
          return upright[row * columns + column]!;
        case 2:
          return level[row * columns + column - 1]!;
        case 3:
          return upright[(row - 1) * columns + column]!;
      }
    },
  };
};
