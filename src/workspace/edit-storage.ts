import type { MergePatch } from '../engine/model/merge-patch.ts';

/** An edit on its way to the server. Its id makes sending it twice harmless. */
export interface Edit {
  readonly editId: string;
  readonly patch: MergePatch;
}

/** Where edits wait until the server has acknowledged them. */
export interface EditStorage {
  readonly load: () => readonly Edit[];
  readonly add: (edit: Edit) => void;
  readonly remove: (editIds: readonly string[]) => void;
}

interface Kept {
  readonly at: number;
  readonly patch: MergePatch;
}

/**
 * Keeps each edit under a key of its own in the browser's storage, so that several tabs on one design can't overwrite
 * one another's queue. A tab that opens the design takes over whatever a closed or crashed one left. When the storage
 * is full or forbidden, edits live in memory only and the server still gets them.
 */
export const browserEditStorage = (storage: Storage, designId: string, now: () => number): EditStorage => {
  const prefix = `longpatch.edit.${designId}.`;
  let last = 0;
  return {
    load: () => {
      const found: (Edit & { readonly at: number })[] = [];
      for (let i = 0; i < storage.length; i += 1) {
        const key = storage.key(i);
        if (key === null || !key.startsWith(prefix)) continue;
        try {
          const kept = JSON.parse(storage.getItem(key) ?? '') as Kept;
          found.push({ editId: key.slice(prefix.length), patch: kept.patch, at: kept.at });
        } catch {
          storage.removeItem(key);
        }
      }
      return found
        .sort((a, b) => a.at - b.at || (a.editId < b.editId ? -1 : 1))
        .map(({ editId, patch }) => ({ editId, patch }));
    },
    add: (edit) => {
      last = Math.max(last + 1, now());
      try {
        storage.setItem(prefix + edit.editId, JSON.stringify({ at: last, patch: edit.patch } satisfies Kept));
      } catch {
        // Full or forbidden: the queue in memory still holds it.
      }
    },
    remove: (editIds) => editIds.forEach((editId) => storage.removeItem(prefix + editId)),
  };
};
