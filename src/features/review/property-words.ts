import { propertyWords } from '../../engine/diff/property-words.ts';
import type { ElementRef } from '../../engine/model/design.ts';

const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

/** What the differences of revisions call a property of an element; undefined for one that they have no word for. */
const wordsFor = ({ collection, port }: ElementRef, path: readonly string[]): string | undefined => {
  if (port !== undefined) return propertyWords['devices.ports']?.[path.join('.')]?.words;
  const own = propertyWords[collection]?.[path.join('.')]?.words;
  if (own !== undefined) return capital(own);
  const [end = '', ...rest] = path;
  const atEnd = end === 'a' || end === 'b' ? propertyWords[collection]?.[rest.join('.')]?.words : undefined;
  return atEnd === undefined ? undefined : `End ${end.toUpperCase()}: ${atEnd}`;
};

/** A property by the keys that lead to it from its element. */
export const propertyLabel = (ref: ElementRef, path: readonly string[]): string =>
  wordsFor(ref, path) ?? path.join(', ');

const mostDeep = 3;

/** The properties of an element's entry that have a value and a word of their own, with the keys that lead there. */
export const propertiesOf = (
  ref: ElementRef,
  entry: object,
  at: readonly string[] = [],
): readonly { readonly path: readonly string[]; readonly label: string }[] =>
  Object.entries(entry).flatMap(([key, value]: [string, unknown]) => {
    const path = [...at, key];
    const words = wordsFor(ref, path);
    if (words !== undefined) return [{ path, label: words }];
    return typeof value === 'object' && value !== null && !Array.isArray(value) && path.length < mostDeep
      ? propertiesOf(ref, value, path)
      : [];
  });
