import type { Design } from './design.ts';
import type { MergePatch } from './merge-patch.ts';
import { applyPatch } from './merge-patch.ts';
import { changedProblems } from './parse-design.ts';

type Bag = { readonly [key: string]: unknown };
const isBag = (value: unknown): value is Bag =>
  typeof value === 'object' && value !== null && !Array.isArray(value);

/** The shortest start of `path` that one of the patches deletes. */
const deletedPart = (
  patches: readonly MergePatch[],
  path: readonly string[],
): readonly string[] | undefined => {
  let shortest: readonly string[] | undefined;
  for (const patch of patches) {
    let at: unknown = patch;
    for (const [depth, key] of path.entries()) {
      if (!isBag(at) || !Object.hasOwn(at, key)) break;
      at = at[key];
      if (at === null && (shortest === undefined || depth + 1 < shortest.length))
        shortest = path.slice(0, depth + 1);
    }
  }
  return shortest;
};

/** The patch without what it says at `path`; undefined when it says nothing there. */
const without = (patch: Bag, path: readonly string[]): Bag | undefined => {
  const [key, ...deeper] = path;
  if (key === undefined || !Object.hasOwn(patch, key)) return undefined;
  const { [key]: inner, ...rest } = patch;
  if (deeper.length === 0) return rest;
  if (!isBag(inner)) return undefined;
  const less = without(inner, deeper);
  if (less === undefined) return undefined;
  return Object.keys(less).length === 0 ? rest : { ...rest, [key]: less };
};

/**
 * What is left of an edit after others, meanwhile, deleted things that it changes: an edit to a part of something that
 * is gone would bring back a fragment of it, so that part of the edit lapses. `document` already holds the others'
 * patches, `concurrent` lists them. An edit that makes the whole thing anew stands.
 */
export const settlePatch = (
  document: Design,
  patch: MergePatch,
  concurrent: readonly MergePatch[],
): MergePatch => {
  let settled: Bag = patch;
  for (;;) {
    const problems = changedProblems(document, applyPatch(document, settled as MergePatch));
    const lapsed = problems
      .map((problem) => deletedPart(concurrent, problem.path.split('.')))
      .map((path) => (path === undefined ? undefined : without(settled, path)))
      .find((less) => less !== undefined);
    if (lapsed === undefined) return settled as MergePatch;
    settled = lapsed;
  }
};
