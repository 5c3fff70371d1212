import fc from 'fast-check';
import { describe, expect, it, vi } from 'vitest';
import type { Rect } from '#drawing/geometry.ts';
import { farField } from '#drawing/routing/far-field.ts';
import { rectIndex } from '#drawing/routing/rect-index.ts';
import { overlap } from '#drawing/routing/rects.ts';
import { route, routeWhileDragging } from '#drawing/routing/route.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { hubDesign } from '../../support/designs.ts';
import { crookedRuns, overPlates } from './sheet-checks.ts';

vi.setConfig({ testTimeout: 60_000 });

const rect = fc.record({
  x: fc.integer({ min: -2_000, max: 9_000 }),
  y: fc.integer({ min: -2_000, max: 9_000 }),
  width: fc.integer({ min: 0, max: 40_000 }),
  height: fc.integer({ min: 0, max: 3_000 }),
});

describe('what lies at a place', () => {
  it('is what a look at every rectangle finds, in the same order', () => {
    fc.assert(
      fc.property(
        fc.array(rect, { maxLength: 40 }),
        fc.array(rect, { maxLength: 10 }),
        rect,
        (some, more, place) => {
          const index = rectIndex((each: Rect) => each, some);
          index.add(...more);
          const expected = [...some, ...more].filter((each) => overlap(each, place));
          expect(index.over(place)).toEqual(expected);
          expect(index.isAny(place)).toBe(expected.length > 0);
        },
      ),
    );
  });
});

describe('a look ahead between bands', () => {
  const wall = { rect: { x: 100, y: -1_000, width: 50, height: 1_500 }, costPerPx: Infinity };
  const target = { x: 400, y: 0 };

  it('tells the way round a band that must not be crossed', () => {
    const field = farField(target, [wall], 2, [{ x: 0, y: 0 }]);
    // Down to the wall's end, along under it and up again: 500 + 400 + 500 px.
    expect(field.leastCostsOver([0], [0])(0, 0)).toBe(2 * 1_400);
    expect(field.roomOfWayFrom({ x: 0, y: 0 })).toEqual({ x: 0, y: 0, width: 400, height: 500 });
  });
  it('never tells more than the distance costs where nothing stands between', () => {
    fc.assert(
      fc.property(fc.integer({ min: 160, max: 900 }), fc.integer({ min: -900, max: 900 }), (x, y) => {
        const told = farField(target, [wall], 2).leastCostsOver([x], [y])(0, 0);
        expect(told).toBeLessThanOrEqual(2 * (Math.abs(x - target.x) + Math.abs(y - target.y)));
      }),
    );
  });
  it('finds no way to a place that bands enclose', () => {
    const ring = { rect: { x: 300, y: -100, width: 200, height: 200 }, costPerPx: Infinity };
    expect(farField(target, [ring], 1).roomOfWayFrom({ x: 0, y: 0 })).toBeUndefined();
  });
});

describe('a sheet of a hundred devices and more', () => {
  const bare = hubDesign(60, { segments: ['a', 'b'] });
  const design = applyPatch(bare, tidy(bare));

  it('holds clear ways, and the hub or a site can be dragged without a cord over a plate', () => {
    expect(overPlates(route(design))).toEqual([]);
    expect(crookedRuns(route(design))).toEqual([]);
    for (const id of ['fw-s0', 'fw-s7']) {
      const { x, y } = design.layout.devices![id]!;
      for (const step of [1, 4, 9]) {
        const moved = applyPatch(design, {
          layout: { devices: { [id]: { x: x + 30 * step, y: y + 8 * step } } },
        });
        expect(overPlates(routeWhileDragging(moved, design))).toEqual([]);
      }
    }
  });
});
