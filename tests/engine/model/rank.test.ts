import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { firstRanks, inRankOrder, rankAtEnd, rankBetween } from '#engine/model/rank.ts';
import { rankSchema } from '#engine/model/scalars.ts';

describe('ranks', () => {
  it('come out in order and fit the schema', () => {
    const ranks = firstRanks(50);
    expect([...ranks].sort()).toEqual(ranks);
    for (const rank of ranks) expect(rankSchema.safeParse(rank).success).toBe(true);
  });

  it('leave room between any two, again and again', () => {
    fc.assert(
      fc.property(fc.array(fc.nat({ max: 100 }), { maxLength: 60 }), (places) => {
        const list = [...firstRanks(2)];
        for (const place of places) {
          const i = place % (list.length + 1);
          list.splice(i, 0, rankBetween(list[i - 1], list[i]));
        }
        expect([...list].sort()).toEqual(list);
        expect(new Set(list).size).toBe(list.length);
      }),
    );
  });

  it('still give a place when two people made the neighbours equal', () => {
    expect(rankBetween('a1', 'a1') > 'a1').toBe(true);
  });

  it('find a place beside any text that the schema lets through', () => {
    const text = fc.stringMatching(/^[0-9A-Za-z]{1,6}$/);
    fc.assert(
      fc.property(
        fc.option(text, { nil: undefined }),
        fc.option(text, { nil: undefined }),
        (before, after) => {
          const rank = rankBetween(before, after);
          expect(rankSchema.safeParse(rank).success).toBe(true);
          if (before !== undefined) expect(rank > before).toBe(true);
          else if (after !== undefined && after !== '0') expect(rank < after).toBe(true);
        },
      ),
    );
    expect(rankBetween('z1', 'z2') < 'z2').toBe(true);
  });

  it('order a map by rank, then by id', () => {
    const map = { x: { rank: 'a1' }, b: { rank: 'a0' }, a: { rank: 'a1' } };
    expect(inRankOrder(map).map(([id]) => id)).toEqual(['b', 'a', 'x']);
    expect(rankAtEnd(map) > 'a1').toBe(true);
    expect(inRankOrder(undefined)).toEqual([]);
  });
});
