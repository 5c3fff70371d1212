import type { EditStorage } from './edit-storage.ts';
import type { OpenDesignServer } from './open-design.ts';

/** Takes every edit and tells nobody: an open design on it is a draft of its own. */
export const draftServer: OpenDesignServer = {
  save: (baseSequence, edits) =>
    Promise.resolve({
      sequence: baseSequence + edits.length,
      patches: edits.map(({ editId, patch }, index) => ({
        sequence: baseSequence + index + 1,
        editId,
        by: null,
        at: new Date(0).toISOString(),
        patch,
        repair: false,
      })),
      counts: { blocking: 0, degrading: 0, advisory: 0 },
    }),
  patchesAfter: (sequence) => Promise.resolve({ sequence, patches: [] }),
};

/** Keeps a draft's edits until they are given up or sent: that the draft took them is no reason to forget them. */
export const draftStorage = (storage: EditStorage): EditStorage & { readonly clear: () => void } => ({
  load: storage.load,
  add: storage.add,
  remove: () => undefined,
  clear: () => storage.remove(storage.load().map(({ editId }) => editId)),
});
