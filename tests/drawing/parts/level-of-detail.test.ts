import { describe, expect, it } from 'vitest';
import { drawnJacketWidth, levelOf, measures } from '#drawing/parts/level-of-detail.ts';

describe('the level of detail', () => {
  it.each([
    [1.2, 'near'],
    [0.85, 'near'],
    [0.84, 'work'],
    [0.6, 'work'],
    [0.59, 'plan'],
    [0.35, 'plan'],
    [0.34, 'far'],
    [0.02, 'far'],
  ] as const)('at a zoom of %f is %s', (zoom, level) => {
    expect(levelOf(zoom)).toBe(level);
  });

  it('stays within 3 % of a threshold and changes beyond', () => {
    expect(levelOf(0.83, 'near')).toBe('near');
    expect(levelOf(0.82, 'near')).toBe('work');
    expect(levelOf(0.87, 'work')).toBe('work');
    expect(levelOf(0.88, 'work')).toBe('near');
    expect(levelOf(0.345, 'plan')).toBe('plan');
  });

  it('is not held back by a level that is further away', () => {
    expect(levelOf(0.86, 'far')).toBe('near');
    expect(levelOf(0.345, 'near')).toBe('far');
  });

  it('keeps lines and cords visible at the least zoom of each level', () => {
    const least = { near: 0.85, work: 0.6, plan: 0.35 } as const;
    for (const [level, zoom] of Object.entries(least) as [keyof typeof least, number][]) {
      expect(measures[level].cablePx * zoom, level).toBeGreaterThanOrEqual(0.9);
      expect(measures[level].outlinePx * zoom, level).toBeGreaterThanOrEqual(0.8);
      expect(measures[level].casingPx * zoom, level).toBeGreaterThanOrEqual(3.5);
      expect(drawnJacketWidth(20, 1, level) * zoom, level).toBeGreaterThanOrEqual(7);
    }
    // A thumbnail shows an A3 sheet at about 0.17.
    expect(drawnJacketWidth(36, 2, 'far') * 0.17).toBeGreaterThanOrEqual(7);
  });

  it('leaves paper between neighbours where there are many of them', () => {
    // Mouths of single tunnels stand 39 apart on a comb, runs in a band 16 and a jacket’s width.
    expect(drawnJacketWidth(20, 1, 'far', 28)).toBeLessThan(36);
    expect(drawnJacketWidth(20, 1, 'near', 28)).toBe(20);
  });
});
