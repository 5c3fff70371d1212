import type { Point, Rect } from '../../drawing/geometry.ts';
import { around, bottom, right } from '../../drawing/routing/rects.ts';

/** A line that shows with what something is in line. */
export interface Guide {
  readonly from: Point;
  readonly to: Point;
}

export interface Snapped {
  readonly dx: number;
  readonly dy: number;
  readonly guides: readonly Guide[];
}

/** Half the pitch of lanes, so that what stands on the grid leaves room for whole lanes. */
export const gridPx = 8;

type Axis = 'x' | 'y';
const spanOn = (axis: Axis, rect: Rect): readonly [number, number] =>
  axis === 'x' ? [rect.x, right(rect)] : [rect.y, bottom(rect)];

/** The lines of a box that others line up with, the middle first: where all three agree that one is shown. */
const linesOf = ([from, to]: readonly [number, number]): readonly number[] => [(from + to) / 2, from, to];

interface Fit {
  readonly by: number;
  /** Where the shared line lies; absent on the grid. */
  readonly at?: number;
}

/** The nearest line of what stands still; of two equally near ones that of the nearer box, then the earlier in the list. */
const fitOn = (axis: Axis, moving: Rect, still: readonly Rect[], reachPx: number): Fit | undefined => {
  const across: Axis = axis === 'x' ? 'y' : 'x';
  const [from, to] = spanOn(across, moving);
  let best: (Fit & { readonly away: number }) | undefined;
  for (const rect of still) {
    const [start, end] = spanOn(across, rect);
    const away = Math.max(0, start - to, from - end);
    for (const mine of linesOf(spanOn(axis, moving)))
      for (const theirs of linesOf(spanOn(axis, rect))) {
        const by = theirs - mine;
        if (Math.abs(by) > reachPx) continue;
        const isBetter =
          best === undefined ||
          Math.abs(by) < Math.abs(best.by) - 0.01 ||
          (Math.abs(by) < Math.abs(best.by) + 0.01 && away < best.away);
        if (isBetter) best = { by, at: theirs, away };
      }
  }
  return best;
};

const toGrid = (value: number): number => Math.round(value / gridPx) * gridPx - value;

/** The line through all that shares it, a little longer than they are. */
const guideAt = (axis: Axis, at: number, moving: Rect, still: readonly Rect[]): Guide => {
  const shares = still.filter((rect) =>
    linesOf(spanOn(axis, rect)).some((line) => Math.abs(line - at) < 0.3),
  );
  const all = around([moving, ...shares])!;
  const past = 12;
  return axis === 'x'
    ? { from: { x: at, y: all.y - past }, to: { x: at, y: bottom(all) + past } }
    : { from: { x: all.x - past, y: at }, to: { x: right(all) + past, y: at } };
};

/**
 * A drag of `moving` by a distance, drawn to where it lines up with what stands still, and where nothing is within reach
 * to the grid. `moving` is the ground of all that moves, as it was before the drag.
 */
export const snapMove = (
  moving: Rect,
  still: readonly Rect[],
  dx: number,
  dy: number,
  reachPx: number,
): Snapped => {
  const held = { ...moving, x: moving.x + dx, y: moving.y + dy };
  const fitX = fitOn('x', held, still, reachPx);
  const fitY = fitOn('y', held, still, reachPx);
  const by = { x: fitX?.by ?? toGrid(held.x), y: fitY?.by ?? toGrid(held.y) };
  const settled = { ...held, x: held.x + by.x, y: held.y + by.y };
  const guides = [
    ...(fitX?.at === undefined ? [] : [guideAt('x', fitX.at, settled, still)]),
    ...(fitY?.at === undefined ? [] : [guideAt('y', fitY.at, settled, still)]),
  ];
  return { dx: dx + by.x, dy: dy + by.y, guides };
};
