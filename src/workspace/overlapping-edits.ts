import type { Json, MergePatch } from '../engine/model/merge-patch.ts';

type Bag = { readonly [key: string]: Json };
const isBag = (value: Json | undefined): value is Bag =>
  typeof value === 'object' && value !== null && !Array.isArray(value);

/**
 * What of a patch speaks of the same properties as another: the same value, one that lies within, or one around it. {} when
 * they speak of different things.
 */
export const overlapWith = (patch: MergePatch, other: MergePatch): MergePatch => {
  const common: [string, Json][] = [];
  for (const key of Object.keys(patch)) {
    if (!Object.hasOwn(other, key)) continue;
    const mine = patch[key] as Json;
    const theirs = other[key] as Json;
    if (!isBag(mine) || !isBag(theirs)) common.push([key, mine]);
    else {
      const inner = overlapWith(mine, theirs);
      if (Object.keys(inner).length > 0) common.push([key, inner]);
    }
  }
  return Object.fromEntries(common);
};

/** The patch without all that another speaks of as well. */
export const withoutOverlap = (patch: MergePatch, other: MergePatch): MergePatch => {
  const rest: [string, Json][] = [];
  let isWhole = true;
  for (const key of Object.keys(patch)) {
    const mine = patch[key] as Json;
    const theirs = Object.hasOwn(other, key) ? (other[key] as Json) : undefined;
    if (theirs === undefined) rest.push([key, mine]);
    else if (!isBag(mine) || !isBag(theirs)) isWhole = false;
    else {
      const inner = withoutOverlap(mine, theirs);
      if (inner !== mine) isWhole = false;
      if (Object.keys(inner).length > 0) rest.push([key, inner]);
    }
  }
  return isWhole ? patch : Object.fromEntries(rest);
};
