/** A node of the search: a crossing of two grid lines, entered in one direction, before or after the goal's condition held. */
export interface GridSearch {
  readonly xs: readonly number[];
  readonly ys: readonly number[];
  readonly start: { readonly column: number; readonly row: number; readonly direction: Direction };
  /** Where the way has to end, and the direction in which it goes on from there; it may still turn at the end. */
  readonly goal: { readonly column: number; readonly row: number; readonly direction: Direction };
  /** Cost of the step from a crossing in a direction, Infinity where there is no passing. */
  readonly cost: (column: number, row: number, direction: Direction) => number;
  /** Whether that step fulfils what the way must have fulfilled before its end. */
  readonly fulfils: (column: number, row: number, direction: Direction) => boolean;
  readonly bendCost: number;
  readonly leastCostPerPx: number;
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

/**
 * The cheapest way over a sparse orthogonal grid by A* (Hart, Nilsson and Raphael 1968), bends counted. Among equals the
 * lower node number wins, so the answer depends on the grid alone. Undefined where there is no way.
 */
export const searchGrid = (
  search: GridSearch,
): readonly { readonly column: number; readonly row: number }[] | undefined => {
  const { xs, ys, start, goal } = search;
  const columns = xs.length;
  const size = columns * ys.length * 8;
  const best = new Float64Array(size).fill(Infinity);
  const from = new Int32Array(size).fill(-1);
  const done = new Uint8Array(size);
  const number = (column: number, row: number, direction: Direction, fulfilled: number): number =>
    ((row * columns + column) * 4 + direction) * 2 + fulfilled;

  // Binary heap of (estimate, node); the node number breaks ties.
  const heapCost: number[] = [];
  const heapNode: number[] = [];
  const before = (i: number, j: number): boolean =>
    heapCost[i]! < heapCost[j]! || (heapCost[i]! === heapCost[j]! && heapNode[i]! < heapNode[j]!);
  const swap = (i: number, j: number): void => {
    [heapCost[i], heapCost[j]] = [heapCost[j]!, heapCost[i]!];
    [heapNode[i], heapNode[j]] = [heapNode[j]!, heapNode[i]!];
  };
  const push = (cost: number, node: number): void => {
    heapCost.push(cost);
    heapNode.push(node);
    let i = heapCost.length - 1;
    while (i > 0) {
      const parent = (i - 1) >> 1;
      if (!before(i, parent)) break;
      swap(i, parent);
      i = parent;
    }
  };
  const pop = (): number => {
    const node = heapNode[0]!;
    const cost = heapCost.pop()!;
    const last = heapNode.pop()!;
    if (heapCost.length > 0) {
      heapCost[0] = cost;
      heapNode[0] = last;
      let i = 0;
      for (;;) {
        const left = 2 * i + 1;
        if (left >= heapCost.length) break;
        const child = left + 1 < heapCost.length && before(left + 1, left) ? left + 1 : left;
        if (!before(child, i)) break;
        swap(i, child);
        i = child;
      }
    }
    return node;
  };

  const goalX = xs[goal.column]!;
  const goalY = ys[goal.row]!;
  const estimate = (column: number, row: number): number =>
    (Math.abs(xs[column]! - goalX) + Math.abs(ys[row]! - goalY)) * search.leastCostPerPx;

  const first = number(start.column, start.row, start.direction, 0);
  best[first] = 0;
  push(estimate(start.column, start.row), first);
  while (heapNode.length > 0) {
    const node = pop();
    if (done[node] === 1) continue;
    done[node] = 1;
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
      if (toColumn < 0 || toRow < 0 || toColumn >= columns || toRow >= ys.length) continue;
      const step = search.cost(column, row, next);
      if (step === Infinity) continue;
      const endsAskew = toColumn === goal.column && toRow === goal.row && next !== goal.direction;
      const now = fulfilled === 1 || search.fulfils(column, row, next) ? 1 : 0;
      const arrived = number(toColumn, toRow, next, now);
      const cost =
        best[node]! + step + (next === direction ? 0 : search.bendCost) + (endsAskew ? search.bendCost : 0);
      if (cost >= best[arrived]! - 1e-9) continue;
      best[arrived] = cost;
      from[arrived] = node;
      push(cost + estimate(toColumn, toRow), arrived);
    }
  }
  return undefined;
};
