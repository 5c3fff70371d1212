import type { MergePatch } from '../engine/model/merge-patch.ts';
import { inversePatch, isEmptyPatch } from '../engine/model/merge-patch.ts';
import { overlapWith, withoutOverlap } from './overlapping-edits.ts';

/** One gesture of this person: what it did and how to take it back. */
export interface Step {
  readonly label: string;
  readonly patch: MergePatch;
  readonly inverse: MergePatch;
  /** Who has since changed all that it did, so that there is nothing left to take back. */
  readonly takenOverBy?: string;
}
export interface PatchHistory {
  readonly done: readonly Step[];
  readonly undone: readonly Step[];
}

export const emptyHistory: PatchHistory = { done: [], undone: [] };

// Enough for a long day's work; older steps stay in the server's log.
const stepsKept = 500;

/** The history after a new gesture on `document`; what had been undone can no longer be redone. */
export const record = (
  history: PatchHistory,
  document: object,
  label: string,
  patch: MergePatch,
): PatchHistory => ({
  done: [...history.done, { label, patch, inverse: inversePatch(document, patch) }].slice(-stepsKept),
  undone: [],
});

export interface Travel {
  readonly history: PatchHistory;
  readonly step: Step;
  /** What to apply to the document now. */
  readonly patch: MergePatch;
}

/**
 * Takes the last gesture back. Only this person's own gestures stand in the history, and a patch touches only the
 * properties that the gesture changed, so that what others did elsewhere stays.
 */
export const undo = (history: PatchHistory, document: object): Travel | undefined => {
  const step = history.done.at(-1);
  if (step === undefined) return undefined;
  const again = inversePatch(document, step.inverse);
  return {
    history: { done: history.done.slice(0, -1), undone: [...history.undone, { ...step, patch: again }] },
    step,
    patch: step.inverse,
  };
};

/** Does the last undone gesture again. */
export const redo = (history: PatchHistory, document: object): Travel | undefined => {
  const step = history.undone.at(-1);
  if (step === undefined) return undefined;
  const back = inversePatch(document, step.patch);
  return {
    history: { done: [...history.done, { ...step, inverse: back }], undone: history.undone.slice(0, -1) },
    step,
    patch: step.patch,
  };
};

/**
 * The history after somebody else's edit: what they changed is theirs, and no step takes it back any more. The last
 * `laterSteps` steps that change the same came after it, and go back to what it left.
 */
export const leaveToOthers = (
  history: PatchHistory,
  theirs: MergePatch,
  by: string,
  laterSteps: number,
): PatchHistory => {
  let met = 0;
  const left = (step: Step): Step => {
    const shared = overlapWith(step.inverse, theirs);
    if (isEmptyPatch(shared) && isEmptyPatch(overlapWith(step.patch, theirs))) return step;
    met += 1;
    if (met < laterSteps) return step;
    if (met === laterSteps)
      return { ...step, inverse: backToTheirs(step.inverse, overlapWith(theirs, step.inverse)) };
    const patch = withoutOverlap(step.patch, theirs);
    const inverse = withoutOverlap(step.inverse, theirs);
    const isEmpty = isEmptyPatch(patch) || isEmptyPatch(inverse);
    return { ...step, patch, inverse, ...(isEmpty ? { takenOverBy: by } : {}) };
  };
  const done = history.done.map((_, i) => left(history.done.at(-1 - i)!)).reverse();
  met = laterSteps;
  const undone = history.undone.map(left);
  const isSame =
    done.every((step, i) => step === history.done[i]) &&
    undone.every((step, i) => step === history.undone[i]);
  return isSame ? history : { done, undone };
};

// Patches are documents like any other to a merge, but for null, which they must keep.
const backToTheirs = (inverse: MergePatch, theirs: MergePatch): MergePatch =>
  Object.fromEntries([
    ...Object.entries(inverse),
    ...Object.entries(theirs).map(([key, value]) => {
      const mine = inverse[key];
      return [key, isBag(mine) && isBag(value) ? backToTheirs(mine, value) : value] as const;
    }),
  ]);
const isBag = (value: unknown): value is MergePatch =>
  typeof value === 'object' && value !== null && !Array.isArray(value);
