const numberWords = [
  'no',
  'one',
  'two',
  'three',
  'four',
  'five',
  'six',
  'seven',
  'eight',
  'nine',
  'ten',
  'eleven',
  'twelve',
];

/** A count as a sentence reads it aloud: in words up to twelve. */
export const countWord = (count: number): string => numberWords[count] ?? String(count);

/** 'one port', 'six ports'. */
export const counted = (count: number, one: string, several: string): string =>
  `${countWord(count)} ${count === 1 ? one : several}`;

/** 'a', 'a and b', 'a, b and c'. */
export const listed = (items: readonly string[]): string =>
  items.length < 2 ? (items[0] ?? '') : `${items.slice(0, -1).join(', ')} and ${items.at(-1)!}`;

/** Up to three items by name; more of them as a count, so that a sentence stays one. */
export const namedOrCounted = (items: readonly string[], several: string): string =>
  items.length > 3 ? `${countWord(items.length)} ${several}` : listed(items);

/** The sentence with a capital at its start. */
export const sentenceCase = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);
