import type { Design } from '../../engine/model/design.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import { applyPatch } from '../../engine/model/merge-patch.ts';
import type { NewId, Operation } from '../../workspace/operations/operation.ts';
import { placeDemand } from '../../workspace/operations/place-parts.ts';

/** Segments that land at two sites or more, in order of letter. */
export const demandableSegments = (design: Design): readonly string[] =>
  Object.keys(design.segments)
    .filter((id) => Object.keys(design.segments[id]!.sites).length > 1)
    .sort((x, y) => (design.segments[x]!.letter < design.segments[y]!.letter ? -1 : 1));

/** One demand for each segment that can have one, to be said more of; the first is what is shown. */
export const addDemands = (design: Design, newId: NewId): Operation => {
  let patch: MergePatch = {};
  let first: Operation | undefined;
  for (const segment of demandableSegments(design)) {
    const one = placeDemand(design, segment, newId);
    if (!one.ok) return one;
    first ??= one;
    patch = applyPatch(patch, one.patch);
  }
  return first?.ok === true
    ? { ...first, label: 'Add demands', patch }
    : { ok: false, why: 'A demand needs a segment that lands at two sites.' };
};
