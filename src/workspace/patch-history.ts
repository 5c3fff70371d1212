import type { MergePatch } from '../engine/model/merge-patch.ts';
import { inversePatch } from '../engine/model/merge-patch.ts';

/** One gesture of this person: what it did and how to take it back. */
export interface Step {
  readonly label: string;
  readonly patch: MergePatch;
  readonly inverse: MergePatch;
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
