import { useCallback, useEffect, useRef } from 'react';
import { showToast } from '../components/toast.tsx';
import type { ElementRef } from '../engine/model/design.ts';
import type { MergePatch } from '../engine/model/merge-patch.ts';
import { isEmptyPatch } from '../engine/model/merge-patch.ts';
import { currentSheet } from '../workspace/current-sheet.ts';
import { useOpenDesign } from '../workspace/open-design-context.tsx';
import { isLocked, moveElements } from '../workspace/operations/move-parts.ts';
import { nameOf } from '../workspace/operations/name-of.ts';
import { designOnSheet, patchOnSheet } from '../workspace/operations/on-sheet.ts';
import { dropToPatch, standingOf } from './flow-changes-to-patch.ts';
import { useDrawn } from './geometry-context.tsx';

// A key that repeats is one gesture: the move is committed once it has been quiet for so long.
const quietMs = 400;

interface Held {
  readonly dx: number;
  readonly dy: number;
  readonly refs: readonly ElementRef[];
  readonly patch: MergePatch;
  readonly timer: ReturnType<typeof setTimeout>;
}

/** Moves what is selected a little; presses in a row are one step to undo. */
export function useNudge(): (dx: number, dy: number) => void {
  const open = useOpenDesign();
  const { settled, setDrag } = useDrawn();
  const latest = useRef({ settled, setDrag });
  const held = useRef<Held>(undefined);
  useEffect(() => {
    latest.current = { settled, setDrag };
  });
  return useCallback(
    (dx, dy) => {
      const { document, selection, editable } = open.store.getState();
      const refs = held.current?.refs ?? selection.filter((ref) => ref.port === undefined);
      if (!editable || refs.length === 0) return;
      const [first] = refs;
      if (first !== undefined && refs.every((ref) => isLocked(document, ref))) {
        const what = refs.length === 1 ? `${nameOf(document, first)} is` : 'All of these are';
        return void showToast({ tone: 'failed', text: `${what} locked in place. Free it to move it.` });
      }
      const drop = (): void => {
        const move = held.current;
        held.current = undefined;
        latest.current.setDrag(undefined);
        if (move === undefined || isEmptyPatch(move.patch)) return;
        const now = open.store.getState().document;
        const done = open.commit(
          'Move',
          patchOnSheet(now, dropToPatch(now, latest.current.settled, move.patch, move.refs), currentSheet()),
        );
        if (!done.ok)
          showToast({ tone: 'failed', text: done.problems.map((problem) => problem.expected).join('; ') });
      };
      const before = held.current;
      if (before !== undefined) clearTimeout(before.timer);
      const by = { dx: (before?.dx ?? 0) + dx, dy: (before?.dy ?? 0) + dy };
      const operation = moveElements(
        designOnSheet(document, currentSheet()),
        standingOf(latest.current.settled),
        refs,
        by.dx,
        by.dy,
      );
      if (!operation.ok) return;
      held.current = { ...by, refs, patch: operation.patch, timer: setTimeout(drop, quietMs) };
      latest.current.setDrag(operation.patch);
    },
    [open],
  );
}
