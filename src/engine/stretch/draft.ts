import type { Collection, Design, Entry } from '../model/design.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import { diffPatch } from '../model/merge-patch.ts';
import { unusedId } from '../rules/unused-id.ts';

/** Makes the id of a new entry from a readable stem; random in a browser, so that two people's entries never share one. */
export type NewId = (stem: string) => string;

/** A design to which entries are being added. */
export interface Draft {
  readonly entries: <C extends Collection>(collection: C) => { readonly [id: string]: Entry<C> };
  readonly add: <C extends Collection>(collection: C, stem: string, entry: Entry<C>) => string;
  readonly set: <C extends Collection>(collection: C, id: string, entry: Entry<C>) => void;
  /** The first of `base`, `base-2` … that nothing in the collection is called. */
  readonly freeName: (collection: Exclude<Collection, 'notes'>, base: string) => string;
  readonly design: () => Design;
  /** What was added and changed, as one patch on the design that it began with. */
  readonly patch: () => MergePatch;
}

/** Starts from a design; ids are unique within their collection, whatever `newId` answers. */
export const draftOf = (start: Design, newId: NewId): Draft => {
  const bags: { [C in Collection]?: { [id: string]: Entry<C> } } = {};
  // What was handed out as a design stays as it is: caches know a collection by its identity.
  const own = new Set<Collection>();
  const bagOf = <C extends Collection>(collection: C): { readonly [id: string]: Entry<C> } =>
    (bags[collection] ?? start[collection]) as { readonly [id: string]: Entry<C> };
  const put = <C extends Collection>(collection: C, id: string, entry: Entry<C>): void => {
    if (!own.has(collection)) Object.assign(bags, { [collection]: { ...bagOf(collection) } });
    own.add(collection);
    (bags[collection] as { [id: string]: Entry<C> })[id] = entry;
  };
  const design = (): Design => {
    own.clear();
    return { ...start, ...bags };
  };
  return {
    entries: bagOf,
    add: (collection, stem, entry) => {
      const id = unusedId(bagOf(collection), newId(stem));
      put(collection, id, entry);
      return id;
    },
    set: put,
    freeName: (collection, base) => {
      const names = new Set(Object.values(bagOf(collection)).map(({ name }) => name?.trim().toLowerCase()));
      let name = base;
      for (let n = 2; names.has(name.toLowerCase()); n += 1) name = `${base}-${n}`;
      return name;
    },
    design,
    patch: () => diffPatch(start, design()),
  };
};
