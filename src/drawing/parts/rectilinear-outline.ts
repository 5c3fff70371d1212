import type { Point, Rect } from '../geometry.ts';

/** A straight edge of an outline; the inside lies to the right of travel. */
export interface OutlineEdge {
  readonly from: Point;
  readonly to: Point;
}

const key = ({ x, y }: Point): string => `${x} ${y}`;
const sorted = (values: readonly number[]): readonly number[] => [...new Set(values)].sort((a, b) => a - b);

/** Unit edges between covered and uncovered cells of the grid that the rectangles' sides make. */
const cellEdges = (rects: readonly Rect[]): readonly OutlineEdge[] => {
  const xs = sorted(rects.flatMap((r) => [r.x, r.x + r.width]));
  const ys = sorted(rects.flatMap((r) => [r.y, r.y + r.height]));
  const covered = (column: number, row: number): boolean => {
    const [x, y, right, bottom] = [xs[column], ys[row], xs[column + 1], ys[row + 1]];
    if (x === undefined || y === undefined || right === undefined || bottom === undefined) return false;
    const [cx, cy] = [(x + right) / 2, (y + bottom) / 2];
    return rects.some((r) => cx > r.x && cx < r.x + r.width && cy > r.y && cy < r.y + r.height);
  };
  const edges: OutlineEdge[] = [];
  for (let column = 0; column < xs.length - 1; column += 1)
    for (let row = 0; row < ys.length - 1; row += 1) {
      if (!covered(column, row)) continue;
      const [x, y, right, bottom] = [xs[column]!, ys[row]!, xs[column + 1]!, ys[row + 1]!];
      if (!covered(column, row - 1)) edges.push({ from: { x, y }, to: { x: right, y } });
      if (!covered(column + 1, row)) edges.push({ from: { x: right, y }, to: { x: right, y: bottom } });
      if (!covered(column, row + 1)) edges.push({ from: { x: right, y: bottom }, to: { x, y: bottom } });
      if (!covered(column - 1, row)) edges.push({ from: { x, y: bottom }, to: { x, y } });
    }
  return edges;
};

/** The corners of the outline round overlapping or touching rectangles, one closed loop per list, inside to the right of travel. */
export const rectilinearOutline = (rects: readonly Rect[]): readonly (readonly Point[])[] => {
  const edges = cellEdges(rects);
  const byStart = new Map<string, OutlineEdge[]>();
  for (const edge of edges) byStart.set(key(edge.from), [...(byStart.get(key(edge.from)) ?? []), edge]);
  const loops: Point[][] = [];
  for (const edge of edges) {
    const rest = byStart.get(key(edge.from));
    if (rest?.includes(edge) !== true) continue;
    const loop: Point[] = [];
    let current: OutlineEdge | undefined = edge;
    while (current !== undefined) {
      const list: OutlineEdge[] | undefined = byStart.get(key(current.from));
      list?.splice(list.indexOf(current), 1);
      loop.push(current.from);
      current = byStart.get(key(current.to))?.[0];
    }
    loops.push(withoutStraights(loop));
  }
  return loops;
};

const neighbours = <T>(list: readonly T[], i: number): readonly [before: T, after: T] => [
  list[(i + list.length - 1) % list.length]!,
  list[(i + 1) % list.length]!,
];

/** Leaves out points in the middle of a straight edge. */
const withoutStraights = (loop: readonly Point[]): Point[] =>
  loop.filter((point, i) => {
    const [before, after] = neighbours(loop, i);
    return !((before.x === point.x && point.x === after.x) || (before.y === point.y && point.y === after.y));
  });

/** The same loop moved inwards by a distance. */
export const insetLoop = (loop: readonly Point[], byPx: number): readonly Point[] =>
  loop.map((point, i) => {
    const [before, after] = neighbours(loop, i);
    // The inward normal of an edge is its direction turned right (y down): (dx, dy) becomes (-dy, dx).
    const into = (from: Point, to: Point): Point => ({
      x: -Math.sign(to.y - from.y) * byPx,
      y: Math.sign(to.x - from.x) * byPx,
    });
    const [a, b] = [into(before, point), into(point, after)];
    return { x: point.x + a.x + b.x, y: point.y + a.y + b.y };
  });

/** A loop's edges. */
export const loopEdges = (loop: readonly Point[]): readonly OutlineEdge[] =>
  loop.map((from, i) => ({ from, to: neighbours(loop, i)[1] }));
