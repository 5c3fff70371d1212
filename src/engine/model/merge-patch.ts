export type Json = null | boolean | number | string | readonly Json[] | { readonly [key: string]: Json };
/** A JSON Merge Patch (RFC 7396): objects merge, null deletes, everything else replaces. */
export type MergePatch = { readonly [key: string]: Json };

type Bag = { readonly [key: string]: unknown };
const isBag = (value: unknown): value is Bag =>
  typeof value === 'object' && value !== null && !Array.isArray(value);
const own = (bag: Bag, key: string): unknown => (Object.hasOwn(bag, key) ? bag[key] : undefined);

/** True when two JSON values say the same, whatever the order of their keys. */
export const sameJson = (a: unknown, b: unknown): boolean => {
  if (a === b) return true;
  if (Array.isArray(a) && Array.isArray(b))
    return a.length === b.length && a.every((item, i) => sameJson(item, b[i]));
  if (!isBag(a) || !isBag(b)) return false;
  const keys = Object.keys(a);
  return (
    keys.length === Object.keys(b).length &&
    keys.every((key) => Object.hasOwn(b, key) && sameJson(a[key], b[key]))
  );
};

// Object.fromEntries and a spread make own members of any name; a plain assignment to "__proto__" would set the prototype.
const setKey = (bag: Record<string, unknown>, key: string, value: unknown): void => {
  // A plain assignment to "__proto__" would set the prototype instead of a member.
  Object.defineProperty(bag, key, { value, enumerable: true, writable: true, configurable: true });
};

const mergeInto = (target: unknown, patch: unknown): unknown => {
  if (!isBag(patch)) return sameJson(target, patch) ? target : patch;
  const before: Bag = isBag(target) ? target : {};
  // Copied at the first change and once only: a patch may add thousands of entries to one collection.
  let copy: Record<string, unknown> | undefined;
  for (const key of Object.keys(patch)) {
    const change = patch[key];
    if (change === null) {
      if (Object.hasOwn(before, key)) delete (copy ??= { ...before })[key];
      continue;
    }
    const old = own(before, key);
    const now = mergeInto(old, change);
    if (now !== old || !Object.hasOwn(before, key)) setKey((copy ??= { ...before }), key, now);
  }
  return copy ?? before;
};

/**
 * The document after a patch, per RFC 7396 section 2. Untouched entries keep their identity, and a patch that changes
 * nothing returns the document itself, so that caches and screens see exactly what changed.
 */
export const applyPatch = <T extends object>(document: T, patch: MergePatch): T =>
  mergeInto(document, patch) as T;

const undoOf = (before: unknown, patch: unknown): unknown => {
  if (!isBag(before)) return before;
  // An array or a scalar took the object's place: a merge patch onto it starts from nothing, so the whole object comes back.
  if (!isBag(patch)) return before;
  const undo: [string, unknown][] = [];
  for (const key of Object.keys(patch)) {
    const had = Object.hasOwn(before, key);
    const old = before[key];
    if (!had) {
      if (patch[key] !== null) undo.push([key, null]);
    } else if (isBag(old) && isBag(patch[key])) {
      const inner = undoOf(old, patch[key]) as Bag;
      if (Object.keys(inner).length > 0) undo.push([key, inner]);
    } else if (!sameJson(old, patch[key])) {
      undo.push([key, old]);
    }
  }
  return Object.fromEntries(undo);
};

/** The patch that takes `applyPatch(document, patch)` back to `document`. */
export const inversePatch = (document: object, patch: MergePatch): MergePatch =>
  undoOf(document, patch) as MergePatch;

/**
 * The least patch that turns one document into the other; {} when they say the same. Entries that share identity are
 * not looked into. Neither document holds null, as in every design.
 */
export const diffPatch = (before: object, after: object): MergePatch => {
  const patch: [string, unknown][] = [];
  const old = before as Bag;
  const now = after as Bag;
  for (const key of Object.keys(old)) if (!Object.hasOwn(now, key)) patch.push([key, null]);
  for (const key of Object.keys(now)) {
    const was = own(old, key);
    const is = now[key];
    if (was === is) continue;
    if (isBag(was) && isBag(is)) {
      const inner = diffPatch(was, is);
      if (Object.keys(inner).length > 0) patch.push([key, inner]);
    } else if (!sameJson(was, is)) {
      patch.push([key, is]);
    }
  }
  return Object.fromEntries(patch) as MergePatch;
};

/** One patch that does what the given ones do in turn to this document. */
export const joinPatches = <T extends object>(document: T, patches: readonly MergePatch[]): MergePatch =>
  diffPatch(document, patches.reduce<T>(applyPatch, document));

/** True when the patch holds nothing. */
export const isEmptyPatch = (patch: MergePatch): boolean => Object.keys(patch).length === 0;

/** A patch that sets one place, given as a path of keys. */
export const patchAt = (path: readonly string[], value: unknown): MergePatch => {
  let patch: unknown = value === undefined ? null : value;
  for (const key of [...path].reverse()) patch = { [key]: patch };
  return patch as MergePatch;
};
