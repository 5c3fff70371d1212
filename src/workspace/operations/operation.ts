import type { ElementRef } from '../../engine/model/design.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';

/** What an operation on the design comes to: a patch to commit, or the reason why not, in words for the person. */
export type Operation =
  | {
      readonly ok: true;
      readonly label: string;
      readonly patch: MergePatch;
      readonly created?: readonly ElementRef[];
    }
  | { readonly ok: false; readonly why: string };

/** Makes the ids of new entries; random, so that two people who place something at once never share one. */
export type NewId = (prefix: string) => string;

export const refused = (why: string): Operation => ({ ok: false, why });
