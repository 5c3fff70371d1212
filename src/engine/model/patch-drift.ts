import type { Json, MergePatch } from './merge-patch.ts';
import { sameJson } from './merge-patch.ts';

type Bag = { readonly [key: string]: unknown };
const isBag = (value: unknown): value is Bag =>
  typeof value === 'object' && value !== null && !Array.isArray(value);

/** A place that a patch changes and in which the document no longer holds what it held. Undefined stands for nothing there. */
export interface Drift {
  readonly path: readonly string[];
  readonly was: Json | undefined;
  readonly now: Json | undefined;
  /** What the patch would put there. */
  readonly wanted: Json | undefined;
}

const valueOf = (value: unknown): Json | undefined =>
  value === null ? undefined : (value as Json | undefined);

/**
 * Where a document has moved on from the one that a patch was made on, in what the patch changes. `before` is the patch that
 * would have taken it back there (`inversePatch`). In the order of the patch's keys; empty where the patch fits as it was
 * meant to.
 */
export const patchDrift = (document: object, patch: MergePatch, before: MergePatch): readonly Drift[] => {
  const drifts: Drift[] = [];
  const compare = (now: unknown, change: unknown, was: unknown, path: readonly string[]): void => {
    if (isBag(change) && isBag(was) && isBag(now)) {
      for (const key of Object.keys(change)) {
        // What the patch did not change when it was made can't have moved away from it.
        if (!Object.hasOwn(was, key)) continue;
        compare(Object.hasOwn(now, key) ? now[key] : undefined, change[key], was[key], [...path, key]);
      }
    } else if (!sameJson(now ?? null, was)) {
      drifts.push({ path, was: valueOf(was), now: valueOf(now), wanted: valueOf(change) });
    }
  };
  compare(document, patch, before, []);
  return drifts;
};
