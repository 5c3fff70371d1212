import type { Collection, Design, ElementRef, Entry } from '../model/design.ts';
import { collections } from '../model/design.ts';
import type { MergePatch } from '../model/merge-patch.ts';
import { diffPatch, sameJson } from '../model/merge-patch.ts';
import type { Change } from './change.ts';
import { compareGroups, groupOf, titleGroup } from './change.ts';
import { compareEntries } from './compare-entries.ts';
import { compareLayouts } from './compare-layouts.ts';
import { elementWords } from './element-names.ts';
import { sentenceCase, tellProperties } from './tell-properties.ts';

/** Two designs told apart: the patch from one to the other, and what it does in sentences. */
export interface Comparison {
  readonly patch: MergePatch;
  /** In the order of their groups; none where the designs say the same. */
  readonly changes: readonly Change[];
}

/** What differs between two designs, in the trade's words: what was added, removed or changed since the first. */
export const compareDesigns = (before: Design, after: Design): Comparison => {
  const patch = diffPatch(before, after);
  const placed = new Map<string, Change>();
  const found: Change[] = [];
  for (const collection of collections)
    for (const ref of refsIn(before, after, collection)) {
      const was = entryOf(before, ref);
      const is = entryOf(after, ref);
      if (was !== undefined && is !== undefined) {
        if (!sameJson(was, is)) found.push(...compareEntries(before, after, ref));
        continue;
      }
      const [design, kind] = is === undefined ? ([before, 'removed'] as const) : ([after, 'added'] as const);
      const change: Change = {
        kind,
        ref,
        sentence: sentenceCase(`${elementWords(design, collection, ref.id)} ${kind}`),
        group: groupOf(design, ref),
        // Where it stands on the sheet comes and goes with it.
        paths: [[collection, ref.id]],
      };
      placed.set(`${collection}/${ref.id}`, change);
    }
  const { own, others } = compareLayouts(before, after, placed);
  const changes = [
    ...[...placed.values()].map((change) => ({
      ...change,
      paths: [...change.paths, ...(own.get(change) ?? [])],
    })),
    ...found,
    ...titleChanges(before, after),
    ...others,
  ];
  return { patch, changes: inOrder(changes) };
};

const entryOf = (design: Design, { collection, id }: ElementRef): Entry<Collection> | undefined =>
  (design[collection] as { readonly [id: string]: Entry<Collection> })[id];

const refsIn = (before: Design, after: Design, collection: Collection): readonly ElementRef[] =>
  [...new Set([...Object.keys(before[collection]), ...Object.keys(after[collection])])]
    .sort()
    .map((id) => ({ collection, id }));

const titleChanges = (before: Design, after: Design): readonly Change[] =>
  tellProperties({ before, after, place: 'meta', path: ['meta'], was: before.meta, is: after.meta }).map(
    ({ path, words, said }) => ({
      kind: 'changed' as const,
      ref: null,
      sentence: `${words} in the title block ${said}`,
      group: titleGroup,
      paths: [path],
    }),
  );

const inOrder = (changes: readonly Change[]): readonly Change[] =>
  changes
    .map((change, index) => ({ change, index }))
    .sort((a, b) => compareGroups(a.change.group, b.change.group) || a.index - b.index)
    .map(({ change }) => change);
