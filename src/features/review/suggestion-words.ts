import type { Suggestion } from '../../contract/comments.ts';
import { compareDesigns } from '../../engine/diff/compare-designs.ts';
import type { Design } from '../../engine/model/design.ts';
import { collections } from '../../engine/model/design.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import { applyPatch } from '../../engine/model/merge-patch.ts';
import type { Drift } from '../../engine/model/patch-drift.ts';
import { changedProblems } from '../../engine/model/parse-design.ts';

/** What turns one design into the other, a sentence for each change; undefined where one of them is none. */
const between = (design: Design, before: Design, after: Design): readonly string[] | undefined =>
  [before, after].every((each) => changedProblems(design, each).length === 0)
    ? compareDesigns(before, after).changes.map(({ sentence }) => sentence)
    : undefined;

/** What a patch does to a design that it was made on. */
export const patchWords = (design: Design, patch: MergePatch): readonly string[] =>
  between(design, design, applyPatch(design, patch)) ?? [];

/** The entries that are gone, out of a patch: onto nothing it would leave fragments of them. */
const without = (patch: MergePatch, gone: readonly Drift[]): MergePatch => {
  const paths = new Set(gone.map(({ path }) => path.join('/')));
  return Object.fromEntries(
    Object.entries(patch).map(([collection, entries]) => [
      collection,
      typeof entries === 'object' && entries !== null && !Array.isArray(entries)
        ? Object.fromEntries(Object.entries(entries).filter(([id]) => !paths.has(`${collection}/${id}`)))
        : entries,
    ]),
  );
};

const wholeEntry = ({ path: [collection = '', ...deeper], now }: Drift): boolean =>
  now === undefined && deeper.length === 1 && collections.some((each) => each === collection);

/** What a suggestion does, told on the design as it would be without it, leaving aside what is gone. */
export const suggestionWords = (
  design: Design,
  { patch, before }: Pick<Suggestion, 'patch' | 'before'>,
  drift: readonly Drift[],
): readonly string[] => {
  const gone = drift.filter(wholeEntry);
  const base = applyPatch(design, without(before, gone));
  const lines = between(design, base, applyPatch(base, without(patch, gone)));
  return lines === undefined || lines.length === 0 ? ['Changes what is no longer in the design'] : lines;
};

const kinds = {
  sites: 'A site',
  devices: 'A device',
  transports: 'A transport',
  links: 'A cable or landing',
  endpoints: 'An endpoint',
  associations: 'An association',
  tunnels: 'A tunnel',
  forwarders: 'A forwarder',
  segments: 'A segment',
  demands: 'A demand',
  profiles: 'An equipment profile',
  notes: 'A note',
} as const;

/** Where the design has moved on from what a suggestion was made on, a sentence for each place. */
export const driftWords = (
  design: Design,
  { before }: Pick<Suggestion, 'before'>,
  drift: readonly Drift[],
): readonly string[] => {
  const gone = drift.filter(wholeEntry);
  const removed = gone.map(
    ({ path: [collection = ''] }) => `${kinds[collection as 'sites']} that it changes is gone`,
  );
  const changed = between(design, applyPatch(design, without(before, gone)), design) ?? [];
  const lines = [...removed, ...changed];
  return lines.length === 0 ? ['What it changes is no longer what it was'] : lines;
};
