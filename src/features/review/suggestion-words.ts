import type { Suggestion } from '../../contract/comments.ts';
import type { Design } from '../../engine/model/design.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import { applyPatch } from '../../engine/model/merge-patch.ts';
import type { Drift } from '../../engine/model/patch-drift.ts';
import { parseDesign } from '../../engine/model/parse-design.ts';
import { kindOf, nameOf } from '../../workspace/operations/name-of.ts';
import { changedElements } from './changed-elements.ts';
import { propertyWords } from './property-words.ts';

const verbs = { added: 'Adds', changed: 'Changes', removed: 'Removes' } as const;

/** What a patch would do to a design, a line for each element. */
export const patchWords = (design: Design, patch: MergePatch): readonly string[] => {
  const after = applyPatch(design, patch);
  const lines = changedElements(design, patch).map(({ ref, change }) => {
    const known = change === 'added' ? after : design;
    return `${verbs[change]} ${kindOf(known, ref).toLowerCase()} ${nameOf(known, ref)}`;
  });
  return [
    ...(patch['meta'] === undefined ? [] : ['Changes the title block']),
    ...lines,
    ...(patch['layout'] === undefined ? [] : ['Moves what is drawn']),
  ];
};

/** What a suggestion does, told on the design that it was made for, as far as that can be had again. */
export const suggestionWords = (design: Design, { patch, before }: Suggestion): readonly string[] => {
  const made = applyPatch(design, before);
  return patchWords(parseDesign(made).ok ? made : design, patch);
};

const written = (value: unknown): string =>
  value === undefined
    ? 'nothing'
    : typeof value === 'object'
      ? 'something else'
      : typeof value === 'string'
        ? `“${value}”`
        : String(value);

/** Where the design has moved on from a suggestion, a line for each place. */
export const driftWords = (design: Design, drift: readonly Drift[]): readonly string[] =>
  drift.map(({ path: [collection = '', id = '', ...deeper], was, now, wanted }) => {
    const ref = { collection: collection as 'devices', id };
    const isElement = collection !== 'meta' && collection !== 'layout';
    const isThere = isElement && Object.hasOwn(design[ref.collection] ?? {}, id);
    const name = !isElement
      ? propertyWords([collection, ...(id === '' ? [] : [id])])
      : isThere
        ? `${kindOf(design, ref)} ${nameOf(design, ref)}`
        : `${collection} ${id}`;
    const place = deeper.length === 0 ? name : `${name}, ${propertyWords(deeper)}`;
    if (now === undefined && was !== undefined) return `${place}: is gone`;
    if (JSON.stringify(now) === JSON.stringify(wanted)) return `${place}: is ${written(now)} already`;
    return `${place}: is ${written(now)} now, was ${written(was)}`;
  });
