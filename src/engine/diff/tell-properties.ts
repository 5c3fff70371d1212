import type { Design } from '../model/design.ts';
import { sameJson } from '../model/merge-patch.ts';
import type { PropertyWords } from './property-words.ts';
import { propertyWords } from './property-words.ts';

type Bag = Readonly<Record<string, unknown>>;
const isBag = (value: unknown): value is Bag =>
  typeof value === 'object' && value !== null && !Array.isArray(value);

export interface Compared {
  readonly before: Design;
  readonly after: Design;
  /** Whose words: a collection, or a part of one such as `devices.ports`. */
  readonly place: string;
  /** Keys from the document's root to the two values. */
  readonly path: readonly string[];
  readonly was: unknown;
  readonly is: unknown;
  /** The entries that hold them, where a value is said by what its entry names. */
  readonly wasIn?: unknown;
  readonly isIn?: unknown;
  /** Properties that are told of elsewhere. */
  readonly without?: readonly string[];
}

/** One property that differs. */
export interface Told {
  readonly path: readonly string[];
  /** The property below the entry, such as `nat.forwarded`. */
  readonly property: string;
  readonly words: string;
  /** '10110 → 10120', 'set to 10120', 'no longer given, it was 10110'. */
  readonly said: string;
}

// Something is there or it isn't, whatever it holds.
const presences = ['nat', 'gateway', 'gateway.redundancy'];

/** Each property that differs between two values of one place of the model, with what became of it. */
export const tellProperties = (compared: Compared): readonly Told[] => {
  const { before, after, place, path, was, is, wasIn = was, isIn = is, without = [] } = compared;
  const table = propertyWords[place]!;
  const told: Told[] = [];
  const walk = (old: Bag, now: Bag, keys: readonly string[]): void => {
    for (const key of [...new Set([...Object.keys(old), ...Object.keys(now)])].sort()) {
      const [from, to] = [old[key], now[key]];
      const at = [...keys, key];
      const property = at.join('.');
      if (sameJson(from, to) || (keys.length === 0 && without.includes(key))) continue;
      const words = table[property];
      if (words === undefined) throw new Error(`no words for ${place}.${property}`);
      const tell = (said: string): void => {
        told.push({ path: [...path, ...at], property, words: words.words, said });
      };
      const isGroup = (isBag(from) || isBag(to)) && hasProperties(table, property);
      if (!isGroup) {
        tell(
          whatBecame(words, from, to, (value, isAfter) =>
            words.write(value, isAfter ? after : before, isAfter ? isIn : wasIn),
          ),
        );
        continue;
      }
      const isNew = from === undefined;
      const comesOrGoes = isNew || to === undefined;
      const isLeafless = Object.keys((isNew ? to : from) as Bag).length === 0;
      if (comesOrGoes && (isLeafless || presences.includes(property)))
        tell(isNew ? 'given' : 'no longer given');
      walk(isBag(from) ? from : {}, isBag(to) ? to : {}, at);
    }
  };
  walk(isBag(was) ? was : {}, isBag(is) ? is : {}, []);
  return told;
};

const hasProperties = (table: { readonly [property: string]: PropertyWords }, property: string): boolean =>
  Object.keys(table).some((other) => other.startsWith(`${property}.`));

/** What became of a value, in words that follow on the property's. */
export const whatBecame = (
  { isText = false }: Pick<PropertyWords, 'isText'>,
  was: unknown,
  is: unknown,
  write: (value: unknown, isAfter: boolean) => string,
): string => {
  if (was === undefined) return `set to ${write(is, true)}`;
  if (is === undefined) return `no longer given, it was ${write(was, false)}`;
  const [from, to] = [write(was, false), write(is, true)];
  if (from !== to) return `${from} → ${to}`;
  return isText ? 'rewritten' : 'put in another order';
};

/** The sentence with a capital at its start. */
export const sentenceCase = (sentence: string): string =>
  sentence.charAt(0).toUpperCase() + sentence.slice(1);
