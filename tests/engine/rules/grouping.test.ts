import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { sharedSets } from '#engine/rules/grouping.ts';

/** The same by repeated merging, until nothing changes. */
const slowSets = (marked: readonly (readonly [string, string])[]): string[][] => {
  let sets = [...new Set(marked.map(([, item]) => item))].map((item) => new Set([item]));
  for (const [mark, item] of marked)
    for (const [otherMark, other] of marked) {
      if (mark !== otherMark) continue;
      const mine = sets.find((set) => set.has(item))!;
      const theirs = sets.find((set) => set.has(other))!;
      if (mine === theirs) continue;
      sets = [...sets.filter((set) => set !== mine && set !== theirs), new Set([...mine, ...theirs])];
    }
  return sets
    .filter((set) => set.size > 1)
    .map((set) => [...set].sort())
    .sort((x, y) => (x[0]! < y[0]! ? -1 : 1));
};

describe('sharedSets', () => {
  it('agrees with merging one pair after the other', () => {
    const pair = fc.tuple(fc.constantFrom('x', 'y', 'z', 'w'), fc.constantFrom('a', 'b', 'c', 'd', 'e', 'f'));
    fc.assert(
      fc.property(fc.array(pair, { maxLength: 12 }), (marked) => {
        expect(sharedSets(marked)).toEqual(slowSets(marked));
      }),
    );
  });

  it('leaves out what shares nothing', () => {
    expect(
      sharedSets([
        ['x', 'a'],
        ['y', 'b'],
      ]),
    ).toEqual([]);
  });
});
