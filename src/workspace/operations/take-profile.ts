import { copyIdOf, type EquipmentProfile } from '../../contract/profiles.ts';
import type { Design } from '../../engine/model/design.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import { diffPatch, patchAt, sameJson } from '../../engine/model/merge-patch.ts';
import type { Operation } from './operation.ts';

type Original = Pick<EquipmentProfile, 'id' | 'profile'>;

/** Whether a design holds a copy of a workspace's profile that says something else than the profile does now. */
export const isCopyOlder = (design: Design, { id, profile }: Original): boolean => {
  const copy = design.profiles[copyIdOf(id)];
  return copy !== undefined && !sameJson(copy, profile);
};

const copyPatch = (design: Design, { id, profile }: Original): MergePatch => {
  const copyId = copyIdOf(id);
  const copy = design.profiles[copyId];
  return patchAt(['profiles', copyId], copy === undefined ? profile : diffPatch(copy, profile));
};

/** Puts what a workspace's profile says now into the design's copy of it. */
export const takeNewerProfile = (design: Design, original: Original): Operation => ({
  ok: true,
  label: `Newer version of ${original.profile.name}`,
  patch: copyPatch(design, original),
});

/** Gives a device a profile of the workspace; the design takes a copy unless it has one, which stays as it is. */
export const giveProfile = (design: Design, device: string, original: Original): Operation => {
  const copyId = copyIdOf(original.id);
  const isHeld = Object.hasOwn(design.profiles, copyId);
  return {
    ok: true,
    label: `Equipment profile of ${design.devices[device]?.name ?? device}`,
    patch: {
      ...(isHeld ? {} : copyPatch(design, original)),
      ...patchAt(['devices', device, 'profile'], copyId),
    },
  };
};
