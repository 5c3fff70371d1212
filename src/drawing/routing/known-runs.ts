import type { Point, Rect } from '../geometry.ts';
import type { Way } from './ground.ts';
import type { RectIndex } from './rect-index.ts';
import { rectIndex } from './rect-index.ts';
import { runRect } from './rects.ts';

/** A run of a cord that has its way already: crossing it costs, and so does running on top of it where it can't move. */
export interface KnownRun {
  readonly from: Point;
  readonly to: Point;
  readonly width: number;
  readonly fixed: boolean;
}

/** Runs that have their place, found by place. */
export interface KnownRuns {
  readonly all: () => readonly KnownRun[];
  /** Those that come into a rectangle, in the order in which they were added. */
  readonly near: (rect: Rect) => readonly KnownRun[];
}

const groundOf = ({ from, to, width }: KnownRun): Rect => runRect(from, to, width / 2 + 1);

export const runRegister = (
  runs: readonly KnownRun[] = [],
): KnownRuns & { readonly add: (more: readonly KnownRun[]) => void } => {
  const all = [...runs];
  let index: RectIndex<KnownRun> | undefined;
  return {
    all: () => all,
    near: (rect) => (index ??= rectIndex(groundOf, all)).over(rect),
    add: (more) => {
      all.push(...more);
      index?.add(...more);
    },
  };
};

/** The runs of ways found so far; the first and last of each are fixed by their mouths. */
export const runsOfWays = (ways: readonly Way[]): readonly KnownRun[] =>
  ways
    .filter((way) => way.found !== 'none')
    .flatMap(({ cord, corners }) =>
      corners.slice(1).map((to, i) => ({
        from: corners[i]!,
        to,
        width: cord.width,
        fixed: i === 0 || i === corners.length - 2,
      })),
    );
