import type { Design } from './design.ts';
import type { MergePatch } from './merge-patch.ts';
import { applyPatch } from './merge-patch.ts';
import { changedProblems } from './parse-design.ts';

type Path = readonly string[];
type Bag = { readonly [key: string]: unknown };
const isBag = (value: unknown): value is Bag =>
  typeof value === 'object' && value !== null && !Array.isArray(value);

const valueAt = (root: unknown, path: Path): unknown =>
  path.reduce<unknown>((at, key) => (isBag(at) && Object.hasOwn(at, key) ? at[key] : undefined), root);

const deletionsIn = (patch: unknown, path: Path = []): readonly Path[] => {
  if (patch === null) return [path];
  return isBag(patch) ? Object.keys(patch).flatMap((key) => deletionsIn(patch[key], [...path, key])) : [];
};

/** The patch without what it says at `path`, where it says something; what becomes empty goes as well. */
const without = (patch: Bag, path: Path): Bag => {
  const [key, ...deeper] = path as [string, ...string[]];
  const { [key]: inner, ...rest } = patch;
  if (deeper.length === 0 || !isBag(inner)) return rest;
  const less = without(inner, deeper);
  return Object.keys(less).length === 0 ? rest : { ...rest, [key]: less };
};

/** True when one place lies in the other. Paths of problems are joined by dots, which ids may hold too. */
const isInOneLine = (a: string, b: string): boolean =>
  a === b || a.startsWith(`${b}.`) || b.startsWith(`${a}.`);

/**
 * What is left of an edit after others, meanwhile, deleted things that it changes: an edit to a part of something that
 * is gone would bring back a fragment of it, so that part of the edit lapses. So does a property that an entry can no
 * longer have, because others made another kind of thing of it. `document` already holds the others' patches,
 * `concurrent` lists them. An edit that makes the whole thing anew stands.
 */
export const settlePatch = (
  document: Design,
  patch: MergePatch,
  concurrent: readonly MergePatch[],
): MergePatch => {
  let settled: Bag = patch;
  let gone: readonly Path[] | undefined;
  for (;;) {
    const problems = changedProblems(document, applyPatch(document, settled as MergePatch));
    if (problems.length === 0) return settled as MergePatch;
    gone ??= concurrent
      .flatMap((each) => deletionsIn(each))
      .filter((path) => valueAt(document, path) === undefined)
      .sort((a, b) => a.length - b.length);
    const lapsed = gone.find(
      (path) =>
        (valueAt(settled, path) ?? null) !== null &&
        problems.some((problem) => isInOneLine(problem.path, path.join('.'))),
    );
    if (lapsed === undefined) return settled as MergePatch;
    settled = without(settled, lapsed);
  }
};
