import type { Collection, Entry } from '../model/design.ts';
import { collections } from '../model/design.ts';
import { sameJson } from '../model/merge-patch.ts';
import type { Id } from '../model/scalars.ts';
import type { DesignFacts } from './network.ts';
import { perObject } from './network.ts';

/** An entry that is not the same object in two versions of a design; absent where the version doesn't hold it. */
export interface EntryChange<E> {
  readonly id: Id;
  readonly before?: E;
  readonly now?: E;
}
export type Changes = { readonly [C in Collection]: readonly EntryChange<Entry<C>>[] };

type Entries = { readonly [id: Id]: object };

const idsOf = perObject((entries: Entries): readonly Id[] => Object.keys(entries));
const valuesOf = perObject((entries: Entries): readonly object[] => Object.values(entries));

const changesOf = (before: Entries, now: Entries): readonly EntryChange<object>[] => {
  if (before === now) return [];
  const changes: EntryChange<object>[] = [];
  const ids = idsOf(before);
  const idsNow = idsOf(now);
  const values = valuesOf(before);
  const valuesNow = valuesOf(now);
  let kept = 0;
  for (let i = 0; i < idsNow.length; i += 1) {
    const id = idsNow[i]!;
    const entry = valuesNow[i]!;
    // A patch leaves entries in their places, so that most need not be looked up.
    const old = ids[i] === id ? values[i] : before[id];
    if (old === entry) kept += 1;
    else if (old === undefined) changes.push({ id, now: entry });
    else {
      kept += 1;
      changes.push({ id, before: old, now: entry });
    }
  }
  if (kept < ids.length)
    for (const id of ids) if (now[id] === undefined) changes.push({ id, before: before[id]! });
  return changes;
};

const known = new WeakMap<DesignFacts, { readonly before: DesignFacts; readonly changes: Changes }>();

/** What differs between two versions of a design, by the identity of entries: what a patch leaves alone is the same object. */
export const changesBetween = (before: DesignFacts, now: DesignFacts): Changes => {
  const last = known.get(now);
  if (last?.before === before) return last.changes;
  const changes = Object.fromEntries(
    collections.map((collection) => [collection, changesOf(before[collection], now[collection])]),
  ) as unknown as Changes;
  known.set(now, { before, changes });
  return changes;
};

type Names<E> = readonly (E extends unknown ? keyof E : never)[];

/** Whether an entry is in both versions and says the same under these names, whatever else it says now. */
export const agreeIn = <E extends object>(
  before: E | undefined,
  now: E | undefined,
  ...names: Names<E>
): boolean =>
  before === now ||
  (before !== undefined &&
    now !== undefined &&
    names.every((name) => sameJson((before as never)[name], (now as never)[name])));

/** Whether an entry is in both versions and says the same except under these names. */
export const agreeApartFrom = <E extends object>(
  before: E | undefined,
  now: E | undefined,
  ...names: Names<E>
): boolean => {
  if (before === now) return true;
  if (before === undefined || now === undefined) return false;
  const others = new Set([...Object.keys(before), ...Object.keys(now)]);
  for (const name of names) others.delete(name as string);
  return [...others].every((name) => sameJson((before as never)[name], (now as never)[name]));
};

/** Whether all changed entries are in both versions and say the same under these names. */
export const allAgreeIn = <E extends object>(
  changes: readonly EntryChange<E>[],
  ...names: Names<E>
): boolean => changes.every(({ before, now }) => agreeIn(before, now, ...names));
