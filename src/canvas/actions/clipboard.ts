import { create } from 'zustand';
import type { Parts } from '../../workspace/operations/copy-parts.ts';

interface Clipboard {
  readonly parts: Parts | undefined;
}

/**
 * What was copied last in this tab. The keys use the system's clipboard; a menu may not read that everywhere, so it pastes
 * from here.
 */
export const useClipboard = create<Clipboard>(() => ({ parts: undefined }));

export const keepParts = (parts: Parts): void => useClipboard.setState({ parts });

/** Keeps parts here and hands them to the system's clipboard where the page may write to it. */
export const copyToClipboard = (parts: Parts): void => {
  keepParts(parts);
  // Only there over HTTPS or on this machine; refused, the tab's own copy is what a paste takes.
  void navigator.clipboard?.writeText(JSON.stringify(parts)).catch(() => undefined);
};
