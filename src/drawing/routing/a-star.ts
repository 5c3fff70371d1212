import { costHeap } from './cost-heap.ts';

/** A node of the search: a crossing of two grid lines, entered in one direction, before or after the goal's condition held. */
export interface GridSearch {
  readonly xs: readonly number[];
  readonly ys: readonly number[];
  readonly start: { readonly column: number; readonly row: number; readonly direction: Direction };
  /** Where the way has to end, and the direction in which it goes on from there; it may still turn at the end. */
  readonly goal: { readonly column: number; readonly row: number; readonly direction: Direction };
  /** Cost of the step from a crossing in a direction, Infinity where there is no passing. */
  readonly cost: (column: number, row: number, direction: Direction) => number;
  /** Whether that step fulfils what the way must have fulfilled before its end; absent: nothing has to be. */
  readonly fulfils?: (column: number, row: number, direction: Direction) => boolean;
  readonly bendCost: number;
  readonly leastCostPerPx: number;
  /** Never more than what the way from a crossing to the goal costs; absent: the distance at the least cost. */
  readonly leastCostFrom?: (column: number, row: number) => number;
  /** After so many crossings without an end the search is given up; absent: never. */
  readonly mostLookedAt?: number;
}

/** 0 right, 1 down, 2 left, 3 up. */
export type Direction = 0 | 1 | 2 | 3;
export const directions = [0, 1, 2, 3] as const;
export const stepOf: { readonly [direction in Direction]: readonly [number, number] } = {
  0: [1, 0],
  1: [0, 1],
  2: [-1, 0],
  3: [0, -1],
};

// A sheet takes many searches, and clearing lists of their size would cost more than most of them: what an earlier search left
// is told by its number.
const open = costHeap();
let lastSearch = 0;
let searchOf = new Int32Array(0);
let best = new Float64Array(0);
let from = new Int32Array(0);
let done = new Uint8Array(0);

const beginSearch = (size: number): number => {
  if (searchOf.length < size) {
    const room = Math.max(size, 2 * searchOf.length);
    [searchOf, best] = [new Int32Array(room), new Float64Array(room)];
    [from, done] = [new Int32Array(room), new Uint8Array(room)];
    lastSearch = 0;
  }
  open.clear();
  return (lastSearch += 1);
};

/**
 * The cheapest way over a sparse orthogonal grid by A* (Hart, Nilsson and Raphael 1968), bends counted. Among equals the
 * lower node number wins, so the answer depends on the grid alone. Undefined where there is no way.
 */
export const searchGrid = (
  search: GridSearch,
): readonly { readonly column: number; readonly row: number }[] | undefined => {
  const { xs, ys, start, goal, bendCost, fulfils } = search;
  const columns = xs.length;
  const rows = ys.length;
  const now = beginSearch(columns * rows * 8);
  const number = (column: number, row: number, direction: Direction, fulfilled: number): number =>
    ((row * columns + column) * 4 + direction) * 2 + fulfilled;

  const goalX = xs[goal.column]!;
  const goalY = ys[goal.row]!;
  const estimate =
    search.leastCostFrom ??
    ((column: number, row: number): number =>
      (Math.abs(xs[column]! - goalX) + Math.abs(ys[row]! - goalY)) * search.leastCostPerPx);
  const reach = (node: number, cost: number, before: number): void => {
    if (searchOf[node] !== now) done[node] = 0;
    searchOf[node] = now;
    best[node] = cost;
    from[node] = before;
  };

  const first = number(start.column, start.row, start.direction, 0);
  reach(first, 0, -1);
  open.push(estimate(start.column, start.row), first);
  let lookedAt = 0;
  while (!open.isEmpty() && lookedAt < (search.mostLookedAt ?? Infinity)) {
    const node = open.pop();
    if (done[node] === 1) continue;
    done[node] = 1;
    lookedAt += 1;
    const fulfilled = node & 1;
    const direction = ((node >> 1) & 3) as Direction;
    const cell = node >> 3;
    const column = cell % columns;
    const row = (cell - column) / columns;
    if (
      column === goal.column &&
      row === goal.row &&
      fulfilled === 1 &&
      (direction + 2) % 4 !== goal.direction
    ) {
      const way: { column: number; row: number }[] = [];
      for (let at = node; at !== -1; at = from[at]!) {
        const place = at >> 3;
        way.push({ column: place % columns, row: Math.floor(place / columns) });
      }
      return way.reverse();
    }
    for (const next of directions) {
      if ((next + 2) % 4 === direction) continue;
      const [dx, dy] = stepOf[next];
      const toColumn = column + dx;
      const toRow = row + dy;
      if (toColumn < 0 || toRow < 0 || toColumn >= columns || toRow >= rows) continue;
      const step = search.cost(column, row, next);
      if (step === Infinity) continue;
      const endsAskew = toColumn === goal.column && toRow === goal.row && next !== goal.direction;
      const held = fulfilled === 1 || fulfils === undefined || fulfils(column, row, next) ? 1 : 0;
      const arrived = number(toColumn, toRow, next, held);
      const cost = best[node]! + step + (next === direction ? 0 : bendCost) + (endsAskew ? bendCost : 0);
      if (searchOf[arrived] === now && cost >= best[arrived]! - 1e-9) continue;
      reach(arrived, cost, node);
      open.push(cost + estimate(toColumn, toRow), arrived);
    }
  }
  return undefined;
};

let marks = new Int32Array(0);
let lastMark = 0;
const frontiers = [new Int32Array(0), new Int32Array(0)] as [Int32Array, Int32Array];

/**
 * Whether any way leads from start to goal, bends and what it has to fulfil aside. Both ends spread by turns, so an end that is
 * walled in shows by a look at its own surroundings.
 */
export const isReachable = ({ xs, ys, start, goal, cost }: GridSearch): boolean => {
  const columns = xs.length;
  const rows = ys.length;
  if (marks.length < columns * rows) {
    const room = Math.max(columns * rows, 2 * marks.length);
    marks = new Int32Array(room);
    frontiers[0] = new Int32Array(room);
    frontiers[1] = new Int32Array(room);
    lastMark = 0;
  }
  const mine = [lastMark + 1, lastMark + 2] as const;
  lastMark += 2;
  const next = [0, 0] as [number, number];
  const size = [1, 1] as [number, number];
  [start, goal].forEach(({ column, row }, end) => {
    frontiers[end as 0 | 1][0] = row * columns + column;
  });
  if (frontiers[0][0] === frontiers[1][0]) return true;
  marks[frontiers[0][0]!] = mine[0];
  marks[frontiers[1][0]!] = mine[1];
  for (;;)
    for (const end of [0, 1] as const) {
      const frontier = frontiers[end];
      if (next[end] === size[end]) return false;
      const cell = frontier[next[end]]!;
      next[end] += 1;
      const column = cell % columns;
      const row = (cell - column) / columns;
      for (const direction of directions) {
        const [dx, dy] = stepOf[direction];
        const toColumn = column + dx;
        const toRow = row + dy;
        if (toColumn < 0 || toRow < 0 || toColumn >= columns || toRow >= rows) continue;
        const to = toRow * columns + toColumn;
        if (marks[to] === mine[end] || cost(column, row, direction) === Infinity) continue;
        if (marks[to] === mine[1 - end]) return true;
        marks[to] = mine[end];
        frontier[size[end]] = to;
        size[end] += 1;
      }
    }
};
