import { useEffect } from 'react';
import { showToast } from '../components/toast.tsx';
import type { Design, ElementRef } from '../engine/model/design.ts';
import { takesKeys } from '../lib/takes-keys.ts';
import { newEntryId, perform, useOpenDesign } from '../workspace/open-design-context.tsx';
import { copyParts, pasteParts, readParts, type Parts } from '../workspace/operations/copy-parts.ts';
import { removeElements } from '../workspace/operations/remove-parts.ts';
import { setSearching, setTool, startPlacing, useDesk } from './desk-state.ts';
import { standingOf } from './flow-changes-to-patch.ts';
import { useDrawn } from './geometry-context.tsx';
import { useView } from './use-view.ts';

// A paste stands beside its original, so that both can be seen.
const pasteOffsetPx = 36;

const isTyping = (target: EventTarget | null): boolean =>
  target instanceof HTMLElement &&
  (target.isContentEditable || ['INPUT', 'TEXTAREA', 'SELECT'].includes(target.tagName));

const siteOf = (design: Design, ref: ElementRef | undefined): string | undefined =>
  ref?.collection === 'sites'
    ? ref.id
    : ref?.collection === 'devices'
      ? design.devices[ref.id]?.site
      : undefined;

/** The keys that work anywhere on the desk while nobody types, and the clipboard. */
export function useShortcuts(): void {
  const open = useOpenDesign();
  const { settled } = useDrawn();
  const view = useView();
  useEffect(() => {
    const say = (why: string): void => void showToast({ tone: 'failed', text: why });
    const remove = (): void => {
      const { document, selection, editable } = open.store.getState();
      if (selection.length === 0 || !editable) return;
      const done = perform(open, removeElements(document, selection));
      if (done.ok)
        showToast({
          tone: 'done',
          text: `Removed ${selection.length === 1 ? 'it' : `${selection.length} things`}.`,
          action: { label: 'Undo', onSelect: () => open.undo() },
        });
      else say(done.why);
    };
    const copied = (): Parts | undefined => {
      const { document, selection } = open.store.getState();
      return copyParts(document, standingOf(settled), selection);
    };
    const paste = (parts: Parts): void => {
      const { document, selection, editable } = open.store.getState();
      if (!editable) return;
      const done = perform(
        open,
        pasteParts(
          document,
          parts,
          { dx: pasteOffsetPx, dy: pasteOffsetPx },
          siteOf(document, selection[0]),
          newEntryId,
        ),
      );
      if (!done.ok) say(done.why);
    };
    const selectAll = (): void => {
      const { document } = open.store.getState();
      const all = (['sites', 'devices', 'transports', 'notes'] as const).flatMap((collection) =>
        Object.keys(document[collection]).map((id): ElementRef => ({ collection, id })),
      );
      open.select(all);
    };
    const editable = (): boolean => open.store.getState().editable;
    const onKeyDown = (event: KeyboardEvent): void => {
      if (takesKeys(event.target) || event.defaultPrevented) return;
      const mod = event.ctrlKey || event.metaKey;
      const key = event.key.toLowerCase();
      const act = (run: () => void): void => {
        event.preventDefault();
        run();
      };
      if (mod && key === 'a') return act(selectAll);
      if (mod && key === 'd') {
        const parts = copied();
        return act(() =>
          parts === undefined ? say('Select a device, a site or a note to duplicate it.') : paste(parts),
        );
      }
      if (mod || event.altKey) return;
      if (key === 'delete' || key === 'backspace') return act(remove);
      if (key === 'escape') {
        if (useDesk.getState().placing !== undefined) return act(() => startPlacing(undefined));
        return open.select([]);
      }
      if (key === '/') return act(() => setSearching(true));
      if (key === 'v') return act(() => setTool('select'));
      if (key === 'h') return act(() => setTool('pan'));
      if (key === 'n' && editable()) return act(() => startPlacing('note'));
      if (key === '0') return act(() => view.fit(settled.sheet));
      if (key === '+' || key === '=') return act(() => view.zoomBy(1.25));
      if (key === '-') return act(() => view.zoomBy(1 / 1.25));
    };
    const onCopy = (event: ClipboardEvent): void => {
      if (isTyping(event.target) || window.getSelection()?.isCollapsed === false) return;
      const parts = copied();
      if (parts === undefined) return;
      event.preventDefault();
      event.clipboardData?.setData('text/plain', JSON.stringify(parts));
      if (event.type === 'cut') remove();
    };
    const onPaste = (event: ClipboardEvent): void => {
      if (isTyping(event.target)) return;
      const parts = readParts(event.clipboardData?.getData('text/plain') ?? '');
      if (parts === undefined) return;
      event.preventDefault();
      paste(parts);
    };
    document.addEventListener('keydown', onKeyDown);
    document.addEventListener('copy', onCopy);
    document.addEventListener('cut', onCopy);
    document.addEventListener('paste', onPaste);
    return () => {
      document.removeEventListener('keydown', onKeyDown);
      document.removeEventListener('copy', onCopy);
      document.removeEventListener('cut', onCopy);
      document.removeEventListener('paste', onPaste);
    };
  }, [open, settled, view]);
}
