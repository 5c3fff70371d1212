import type { Design } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';

/** A design after an edit, held to the schema. */
export const changed = (design: Design, patch: MergePatch): Design => {
  const parsed = parseDesign(applyPatch(design, patch));
  if (!parsed.ok)
    throw new Error(parsed.problems.map((p) => `${p.path}: ${p.value}, ${p.expected}`).join('\n'));
  return parsed.value;
};
