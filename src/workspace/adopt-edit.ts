import type { Design } from '../engine/model/design.ts';
import type { MergePatch } from '../engine/model/merge-patch.ts';
import type { OpenDesign } from './open-design.ts';
import { record } from './patch-history.ts';

/**
 * Takes an edit that the server made for this person into their history, so that undo takes it back like any other. `before`
 * is the document as it was without it.
 */
export const adoptEdit = (open: OpenDesign, before: Design, label: string, patch: MergePatch): void =>
  open.store.setState(({ history }) => ({ history: record(history, before, label, patch) }));
