import { generateKeyBetween, generateNKeysBetween } from 'fractional-indexing';

const digits = [...'0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz'];
const middleDigit = 'V';

// The schema lets texts through that are no keys of this ranking, as an imported design may hold. They keep their order as text.
const isKey = (rank: string | undefined): boolean => {
  if (rank === undefined) return true;
  try {
    generateKeyBetween(rank, null);
    return true;
  } catch {
    return false;
  }
};

const textAfter = (before: string, after: string | undefined): string => {
  // Whatever extends a text comes after it; zeros keep it near.
  const nearby = ['', '0', '00', '000'].map((zeros) => `${before}${zeros}${middleDigit}`);
  return nearby.find((rank) => after === undefined || rank < after) ?? nearby[0]!;
};

const textBefore = (after: string): string => {
  // A text comes before what extends it.
  if (after.length > 1) return after.slice(0, -1);
  const below = digits[digits.indexOf(after) - 1];
  return below === undefined ? after : `${below}${middleDigit}`;
};

/** A rank between two neighbours; undefined stands for the open end. Two people may have made the neighbours equal: then just after them. */
export const rankBetween = (before: string | undefined, after: string | undefined): string => {
  if (before !== undefined && !(isKey(before) && isKey(after))) return textAfter(before, after);
  if (before === undefined && after !== undefined && !isKey(after)) return textBefore(after);
  return generateKeyBetween(
    before ?? null,
    before !== undefined && after !== undefined && before >= after ? null : (after ?? null),
  );
};

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
