import type { Pin } from '../../contract/comments.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';

/** What the page around threads can do for them. */
export interface ReviewTools {
  /** Leads to what a thread is about. */
  readonly onShow?: (pin: Pin, threadId: string) => void;
  /** Shows the design as a patch would make it, until undefined comes. */
  readonly onPreview?: (patch: MergePatch | undefined) => void;
}
