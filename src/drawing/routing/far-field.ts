import type { Point, Rect } from '../geometry.ts';
import { costHeap } from './cost-heap.ts';
import { around, bottom, right } from './rects.ts';

/** Ground that costs otherwise than the open sheet; Infinity where there is no passing. */
export interface Region {
  readonly rect: Rect;
  readonly costPerPx: number;
}

/** What ways to one place cost at least, as far as bands decide it: plates and frames in between are not looked at. */
export interface FarField {
  /** Never more than the way from a crossing of these lines costs. */
  readonly leastCostsOver: (
    columns: readonly number[],
    rows: readonly number[],
  ) => (column: number, row: number) => number;
  /** The room that the cheapest way from a place takes; undefined where bands leave none. */
  readonly roomOfWayFrom: (point: Point) => Rect | undefined;
}

const sortedUnique = (values: readonly number[]): readonly number[] =>
  [...new Set(values)].sort((a, b) => a - b);

/** The last of a sorted list's values that is not above one; 0 where all are. */
const indexBelow = (values: readonly number[], value: number): number => {
  let from = 0;
  let to = values.length;
  while (to - from > 1) {
    const middle = (from + to) >> 1;
    if (values[middle]! <= value) from = middle;
    else to = middle;
  }
  return from;
};

/** Costs of the ways to a place over a grid of the edges of regions alone (Dijkstra 1959). */
export const farField = (
  target: Point,
  regions: readonly Region[],
  openCostPerPx: number,
  through: readonly Point[] = [],
): FarField => {
  const rects = regions.map(({ rect }) => rect);
  const xs = sortedUnique(
    [target, ...through].map(({ x }) => x).concat(...rects.map((r) => [r.x, right(r)])),
  );
  const ys = sortedUnique(
    [target, ...through].map(({ y }) => y).concat(...rects.map((r) => [r.y, bottom(r)])),
  );
  const columns = xs.length;
  const rows = ys.length;
  const cells = new Float64Array(columns * rows).fill(openCostPerPx);
  for (const { rect, costPerPx } of regions) {
    const [x0, x1] = [indexBelow(xs, rect.x), indexBelow(xs, right(rect))];
    const [y0, y1] = [indexBelow(ys, rect.y), indexBelow(ys, bottom(rect))];
    for (let row = y0; row < y1; row += 1)
      for (let column = x0; column < x1; column += 1) {
        const at = row * columns + column;
        cells[at] = cells[at] === Infinity ? Infinity : costPerPx;
      }
  }
  const cellCost = (column: number, row: number): number =>
    column < 0 || row < 0 || column >= columns - 1 || row >= rows - 1
      ? openCostPerPx
      : cells[row * columns + column]!;

  const costs = new Float64Array(columns * rows).fill(Infinity);
  const next = new Int32Array(columns * rows).fill(-1);
  const open = costHeap();
  const first = indexBelow(ys, target.y) * columns + indexBelow(xs, target.x);
  costs[first] = 0;
  open.push(0, first);
  const done = new Uint8Array(columns * rows);
  while (!open.isEmpty()) {
    const node = open.pop();
    if (done[node] === 1) continue;
    done[node] = 1;
    const column = node % columns;
    const row = (node - column) / columns;
    const reach = (toColumn: number, toRow: number, perPx: number): void => {
      if (toColumn < 0 || toRow < 0 || toColumn >= columns || toRow >= rows || perPx === Infinity) return;
      const lengthPx = Math.abs(xs[toColumn]! - xs[column]!) + Math.abs(ys[toRow]! - ys[row]!);
      const to = toRow * columns + toColumn;
      const cost = costs[node]! + lengthPx * perPx;
      if (cost >= costs[to]!) return;
      costs[to] = cost;
      next[to] = node;
      open.push(cost, to);
    };
    reach(column + 1, row, Math.min(cellCost(column, row - 1), cellCost(column, row)));
    reach(column - 1, row, Math.min(cellCost(column - 1, row - 1), cellCost(column - 1, row)));
    reach(column, row + 1, Math.min(cellCost(column - 1, row), cellCost(column, row)));
    reach(column, row - 1, Math.min(cellCost(column - 1, row - 1), cellCost(column, row - 1)));
  }

  const pointOf = (node: number): Point => ({ x: xs[node % columns]!, y: ys[Math.floor(node / columns)]! });
  /** The lines on either side of a value; the same one twice outside. */
  const linesAbout = (lines: readonly number[], value: number): readonly [number, number] => {
    const last = lines.length - 1;
    if (value < lines[0]!) return [0, 0];
    if (value > lines[last]!) return [last, last];
    const line = indexBelow(lines, value);
    return [line, Math.min(last, line + 1)];
  };
  const distance = (p: Point, q: Point): number => Math.abs(p.x - q.x) + Math.abs(p.y - q.y);

  return {
    leastCostsOver: (otherXs, otherYs) => {
      const besides = otherXs.map((x) => linesAbout(xs, x));
      const between = otherYs.map((y) => linesAbout(ys, y));
      return (column, row) => {
        const [left, after] = besides[column]!;
        const [above, below] = between[row]!;
        const perPx = left === after || above === below ? openCostPerPx : cells[above * columns + left]!;
        if (perPx === Infinity) return 0;
        const [x, y] = [otherXs[column]!, otherYs[row]!];
        const [fromLeft, toRight] = [Math.abs(x - xs[left]!), Math.abs(xs[after]! - x)];
        const [fromAbove, toBelow] = [Math.abs(y - ys[above]!), Math.abs(ys[below]! - y)];
        const least = Math.max(
          costs[above * columns + left]! - perPx * (fromLeft + fromAbove),
          costs[above * columns + after]! - perPx * (toRight + fromAbove),
          costs[below * columns + left]! - perPx * (fromLeft + toBelow),
          costs[below * columns + after]! - perPx * (toRight + toBelow),
        );
        // Where no way leads the search ends for want of one.
        return least > 0 && least < Infinity ? least : 0;
      };
    },
    roomOfWayFrom: (point) => {
      const start = linesAbout(ys, point.y)
        .flatMap((row) => linesAbout(xs, point.x).map((column) => row * columns + column))
        .filter((node) => costs[node]! < Infinity)
        .sort(
          (a, b) =>
            costs[a]! + distance(pointOf(a), point) - costs[b]! - distance(pointOf(b), point) || a - b,
        )[0];
      if (start === undefined) return undefined;
      const passed: Point[] = [point];
      for (let at = start; at !== -1; at = next[at]!) passed.push(pointOf(at));
      return around(passed.map(({ x, y }) => ({ x, y, width: 0, height: 0 })));
    },
  };
};
