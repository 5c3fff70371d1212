import type { Rect } from '../geometry.ts';
import { bottom, overlap, right } from './rects.ts';

const cellPx = 256;
/** A rectangle over more cells than this is looked at each time. */
const mostCells = 512;

/** Things that lie somewhere on a sheet, found by place. */
export interface RectIndex<T> {
  readonly add: (...items: readonly T[]) => void;
  /** What overlaps a rectangle, in the order in which it was added. */
  readonly over: (rect: Rect) => readonly T[];
  readonly isAny: (rect: Rect, test?: (item: T) => boolean) => boolean;
}

/** Finds what overlaps a place without a look at all that lies elsewhere. */
export const rectIndex = <T>(rectOf: (item: T) => Rect, items: readonly T[] = []): RectIndex<T> => {
  const all: T[] = [];
  const rects: Rect[] = [];
  const everywhere: number[] = [];
  const cells = new Map<number, number[]>();
  /** The last look that came upon each item: one that lies in several cells is looked at once. */
  const seen: number[] = [];
  let looks = 0;
  const reach = { x0: Infinity, y0: Infinity, x1: -Infinity, y1: -Infinity };
  const cell = (value: number): number => Math.floor(value / cellPx);

  const add = (item: T): void => {
    const rect = rectOf(item);
    const id = all.push(item) - 1;
    rects.push(rect);
    seen.push(0);
    const [x0, y0, x1, y1] = [cell(rect.x), cell(rect.y), cell(right(rect)), cell(bottom(rect))];
    if (!((x1 - x0 + 1) * (y1 - y0 + 1) <= mostCells)) {
      everywhere.push(id);
      return;
    }
    reach.x0 = Math.min(reach.x0, x0);
    reach.y0 = Math.min(reach.y0, y0);
    reach.x1 = Math.max(reach.x1, x1);
    reach.y1 = Math.max(reach.y1, y1);
    for (let y = y0; y <= y1; y += 1)
      for (let x = x0; x <= x1; x += 1) {
        const key = y * 0x10000 + x;
        const here = cells.get(key);
        if (here === undefined) cells.set(key, [id]);
        else here.push(id);
      }
  };
  items.forEach(add);

  /** Calls back with the number of each item over a rectangle until it answers true. */
  const look = (rect: Rect, stop: (id: number) => boolean): boolean => {
    looks += 1;
    const isOver = (id: number): boolean => {
      if (seen[id] === looks) return false;
      seen[id] = looks;
      return overlap(rects[id]!, rect) && stop(id);
    };
    if (everywhere.some(isOver)) return true;
    const x0 = Math.max(reach.x0, cell(rect.x));
    const x1 = Math.min(reach.x1, cell(right(rect)));
    const y1 = Math.min(reach.y1, cell(bottom(rect)));
    for (let y = Math.max(reach.y0, cell(rect.y)); y <= y1; y += 1)
      for (let x = x0; x <= x1; x += 1) if (cells.get(y * 0x10000 + x)?.some(isOver) === true) return true;
    return false;
  };

  return {
    add: (...more) => more.forEach(add),
    over: (rect) => {
      const ids: number[] = [];
      look(rect, (id) => {
        ids.push(id);
        return false;
      });
      return ids.sort((a, b) => a - b).map((id) => all[id]!);
    },
    isAny: (rect, test) => look(rect, (id) => test === undefined || test(all[id]!)),
  };
};
