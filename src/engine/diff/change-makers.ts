import type { MergePatch } from '../model/merge-patch.ts';
import type { Change } from './change.ts';

/** A patch of the log, as far as it says who changed what and when. */
export interface MadePatch {
  readonly by: string | null;
  readonly at: string;
  readonly patch: MergePatch;
}

export interface ChangeMaker {
  /** The person's name; null for who is gone. */
  readonly by: string | null;
  readonly at: string;
}

/**
 * Who made a change, and when, by the patches between the two designs in their order: who added what came, and who wrote last
 * to what changed or went. Undefined where none of the patches touches it, as when one design is no later state of the other.
 */
export const makerOf = (change: Change, patches: readonly MadePatch[]): ChangeMaker | undefined => {
  const touches = ({ patch }: MadePatch): boolean => change.paths.some((path) => isTouched(patch, path));
  const made = change.kind === 'added' ? patches.find(touches) : patches.findLast(touches);
  return made === undefined ? undefined : { by: made.by, at: made.at };
};

/** Whether a patch writes to a place, to something beneath it, or to all that it lies in. */
const isTouched = (patch: unknown, [key, ...rest]: readonly string[]): boolean => {
  if (key === undefined) return true;
  if (typeof patch !== 'object' || patch === null || Array.isArray(patch)) return true;
  return Object.hasOwn(patch, key) && isTouched((patch as Record<string, unknown>)[key], rest);
};
