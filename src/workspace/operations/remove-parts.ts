import type { Design, ElementRef } from '../../engine/model/design.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import { joinPatches, patchAt } from '../../engine/model/merge-patch.ts';
import { nameOf } from './name-of.ts';
import type { Operation } from './operation.ts';

const removal = (design: Design, ref: ElementRef): readonly MergePatch[] => {
  if (ref.port !== undefined && ref.collection === 'devices')
    return [patchAt(['devices', ref.id, 'ports', ref.port], null)];
  const own = patchAt([ref.collection, ref.id], null);
  // An association's tunnels go with it: left behind they would turn into bare ones.
  if (ref.collection === 'associations')
    return [
      own,
      ...Object.entries(design.tunnels)
        .filter(([, tunnel]) => tunnel.association === ref.id)
        .map(([id]) => patchAt(['tunnels', id], null)),
    ];
  return [own];
};

/** Removes elements; whatever needs them goes along (see danglingPatch, which the commit applies). */
export const removeElements = (design: Design, refs: readonly ElementRef[]): Operation => ({
  ok: true,
  label: refs.length === 1 ? `Remove ${nameOf(design, refs[0]!)}` : `Remove ${refs.length} things`,
  patch: joinPatches(
    design,
    refs.flatMap((ref) => removal(design, ref)),
  ),
});
