import { generateKeyBetween, generateNKeysBetween } from 'fractional-indexing';

/** A rank between two neighbours; undefined stands for the open end. Two people may have made the neighbours equal: then just after them. */
export const rankBetween = (before: string | undefined, after: string | undefined): string =>
  generateKeyBetween(
    before ?? null,
    before !== undefined && after !== undefined && before >= after ? null : (after ?? null),
  );

/** `count` ranks in order, for a fresh list. */
export const firstRanks = (count: number): readonly string[] => generateNKeysBetween(null, null, count);

/** Entries of a ranked map in their order; equal ranks (two people inserted at one place) fall back to the id. */
export const inRankOrder = <E extends { readonly rank: string }>(
  map: { readonly [id: string]: E } | undefined,
): readonly (readonly [id: string, entry: E])[] =>
  Object.entries(map ?? {}).sort(([idA, a], [idB, b]) =>
    a.rank < b.rank ? -1 : a.rank > b.rank ? 1 : idA < idB ? -1 : idA > idB ? 1 : 0,
  );

/** The rank that puts a new entry last. */
export const rankAtEnd = (map: { readonly [id: string]: { readonly rank: string } } | undefined): string =>
  rankBetween(inRankOrder(map).at(-1)?.[1].rank, undefined);
