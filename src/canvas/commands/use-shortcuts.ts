import { useEffect } from 'react';
import { takesKeys } from '../../lib/takes-keys.ts';
import { useOpenDesign } from '../../workspace/open-design-context.tsx';
import { readParts } from '../../workspace/operations/copy-parts.ts';
import { keepParts } from '../actions/clipboard.ts';
import { areCharacterKeysOn } from './character-keys.ts';
import { commandFor, isPossible, type CommandId } from './shortcuts.ts';
import type { Commands } from './use-commands.ts';

const isTyping = (target: EventTarget | null): boolean =>
  target instanceof HTMLElement &&
  (target.isContentEditable || ['INPUT', 'TEXTAREA', 'SELECT'].includes(target.tagName));

/** Undo and redo are the whole design's, on every page of it. */
const elsewhere: readonly CommandId[] = ['undo', 'redo'];
/** The canvas library has meanings of its own for these on its nodes, which are not wanted. */
const beforeTheCanvas = /^(nudge|push)/;

/** Elsewhere arrow keys belong to what has the focus. */
const isOnSheet = (target: EventTarget | null): boolean =>
  target instanceof Element && (target.matches('body, #main') || target.closest('.sheet-canvas') !== null);

/** The keys that work anywhere on the desk while nobody types, and the clipboard. */
export function useShortcuts({ run, actions, paste }: Commands): void {
  const open = useOpenDesign();
  useEffect(() => {
    const wanted = (event: KeyboardEvent): CommandId | undefined => {
      if (takesKeys(event.target) || event.defaultPrevented) return undefined;
      const command = commandFor(event, areCharacterKeysOn());
      const { editable, selection } = open.store.getState();
      return command !== undefined && isPossible(command, { editable, anySelected: selection.length > 0 })
        ? command
        : undefined;
    };
    const does = (event: KeyboardEvent, command: CommandId): void => {
      event.preventDefault();
      run[command]();
    };
    const onKeyDown = (event: KeyboardEvent): void => {
      const command = wanted(event);
      if (command === undefined || elsewhere.includes(command) || beforeTheCanvas.test(command)) return;
      does(event, command);
    };
    const onKeyDownFirst = (event: KeyboardEvent): void => {
      if (!isOnSheet(event.target)) return;
      const command = wanted(event);
      if (command === undefined || !beforeTheCanvas.test(command)) return;
      event.stopPropagation();
      does(event, command);
    };
    const onCopy = (event: ClipboardEvent): void => {
      if (isTyping(event.target) || window.getSelection()?.isCollapsed === false) return;
      const { selection, editable } = open.store.getState();
      const parts = actions.copied(selection);
      if (parts === undefined) return;
      event.preventDefault();
      event.clipboardData?.setData('text/plain', JSON.stringify(parts));
      keepParts(parts);
      if (event.type === 'cut' && editable) run.remove();
    };
    const onPaste = (event: ClipboardEvent): void => {
      if (isTyping(event.target) || !open.store.getState().editable) return;
      const parts = readParts(event.clipboardData?.getData('text/plain') ?? '');
      if (parts === undefined) return;
      event.preventDefault();
      paste(parts);
    };
    document.addEventListener('keydown', onKeyDownFirst, { capture: true });
    document.addEventListener('keydown', onKeyDown);
    document.addEventListener('copy', onCopy);
    document.addEventListener('cut', onCopy);
    document.addEventListener('paste', onPaste);
    return () => {
      document.removeEventListener('keydown', onKeyDownFirst, { capture: true });
      document.removeEventListener('keydown', onKeyDown);
      document.removeEventListener('copy', onCopy);
      document.removeEventListener('cut', onCopy);
      document.removeEventListener('paste', onPaste);
    };
  }, [open, run, actions, paste]);
}
