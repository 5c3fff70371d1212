import type { DesignFacts } from '../network/network.ts';

const lettersOf = (n: number): string =>
  n < 26 ? String.fromCharCode(65 + n) : lettersOf(Math.floor(n / 26) - 1) + lettersOf(n % 26);

/** A, B … Z, then AA, AB …: the first ones, as many as are wanted, that no segment has. */
export const freeLetters = (design: DesignFacts, count: number): readonly string[] => {
  const taken = new Set(Object.values(design.segments).map(({ letter }) => letter));
  const letters: string[] = [];
  for (let n = 0; letters.length < count; n += 1) if (!taken.has(lettersOf(n))) letters.push(lettersOf(n));
  return letters;
};
