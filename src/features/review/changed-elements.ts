import type { Design, ElementRef } from '../../engine/model/design.ts';
import { collections } from '../../engine/model/design.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';

export interface ChangedElement {
  readonly ref: ElementRef;
  readonly change: 'added' | 'changed' | 'removed';
}

/** The elements that a patch touches, as it finds them in a design. */
export const changedElements = (design: Design, patch: MergePatch): readonly ChangedElement[] =>
  collections.flatMap((collection) =>
    Object.entries((patch[collection] ?? {}) as { readonly [id: string]: unknown }).map(([id, change]) => ({
      ref: { collection, id },
      change:
        change === null ? 'removed' : Object.hasOwn(design[collection], id) ? 'changed' : ('added' as const),
    })),
  );
