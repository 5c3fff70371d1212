import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Path } from '#drawing/geometry.ts';
import {
  joinPaths,
  longestRun,
  nearestAlong,
  offsetPath,
  pathAt,
  pathData,
  pathLength,
  reversePath,
  subPath,
} from '#drawing/path-geometry.ts';

// 100 px right, a quarter turn down with radius 50, 60 px down, then a short S to the left.
const path: Path = [
  { kind: 'move', to: { x: 0, y: 0 } },
  { kind: 'line', to: { x: 100, y: 0 } },
  { kind: 'arc', to: { x: 150, y: 50 }, radius: 50, clockwise: true },
  { kind: 'line', to: { x: 150, y: 110 } },
  { kind: 'curve', c1: { x: 150, y: 130 }, c2: { x: 140, y: 130 }, to: { x: 140, y: 150 } },
];
const quarter = (Math.PI / 2) * 50;

describe('a path', () => {
  it('measures lines and arcs exactly and places points on them', () => {
    const straight = subPath(path, 0, 160 + quarter);
    expect(pathLength(straight)).toBeCloseTo(160 + quarter, 6);
    expect(pathAt(path, 40)).toMatchObject({ x: 40, y: 0, angle: 0 });
    const middle = pathAt(path, 100 + quarter / 2);
    expect(Math.hypot(middle.x - 100, middle.y - 50)).toBeCloseTo(50, 6);
    expect(middle.angle).toBeCloseTo(Math.PI / 4, 6);
    expect(pathAt(path, 100 + quarter + 10)).toMatchObject({ x: 150, y: 60 });
  });

  it('holds places beyond its ends at its ends', () => {
    expect(pathAt(path, -5)).toMatchObject({ x: 0, y: 0 });
    expect(pathAt(path, 1e6)).toMatchObject({ x: 140, y: 150 });
  });

  it('keeps arcs concentric when it is moved to the right of travel', () => {
    const [, , arc] = offsetPath(path, 8);
    expect(arc).toMatchObject({ kind: 'arc', radius: 42 });
    const [, , outer] = offsetPath(path, -8);
    expect(outer).toMatchObject({ kind: 'arc', radius: 58 });
    expect(pathAt(offsetPath(path, 8), 0)).toMatchObject({ x: 0, y: 8 });
  });

  it('is cut into pieces whose lengths add up, wherever it is cut', () => {
    const length = pathLength(path);
    fc.assert(
      fc.property(fc.double({ min: 0, max: 1, noNaN: true }), (share) => {
        const cut = share * length;
        const [before, after] = [subPath(path, 0, cut), subPath(path, cut, length)];
        expect(pathLength(before) + pathLength(after)).toBeCloseTo(length, 0);
        const { x, y } = pathAt(path, cut);
        if (before.length > 1) {
          const end = pathAt(before, 1e6);
          expect(Math.hypot(end.x - x, end.y - y)).toBeLessThan(0.5);
        }
      }),
    );
  });

  it('ends where it began when it is reversed, and joins with its reverse to a way there and back', () => {
    const back = reversePath(path);
    expect(pathAt(back, 0)).toMatchObject({ x: 140, y: 150 });
    expect(pathLength(back)).toBeCloseTo(pathLength(path), 6);
    const both = joinPaths(path, back);
    expect(pathLength(both)).toBeCloseTo(2 * pathLength(path), 6);
    expect(pathAt(both, 1e6)).toMatchObject({ x: 0, y: 0 });
  });

  it('finds its nearest place to a point and its longest straight run', () => {
    expect(nearestAlong(path, { x: 30, y: -20 })).toBeCloseTo(30, 6);
    expect(nearestAlong(path, { x: 160, y: 80 })).toBeCloseTo(100 + quarter + 30, 6);
    expect(longestRun(path)).toEqual({ from: 0, to: 100 });
  });

  it('writes itself as SVG path data', () => {
    expect(pathData(path)).toBe('M0 0L100 0A50 50 0 0 1 150 50L150 110C150 130 140 130 140 150');
  });
});
