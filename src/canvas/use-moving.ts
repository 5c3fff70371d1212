import type { NodeChange } from '@xyflow/react';
import { useRef, useState } from 'react';
import { showToast } from '../components/toast.tsx';
import type { ElementRef } from '../engine/model/design.ts';
import { isEmptyPatch, type MergePatch } from '../engine/model/merge-patch.ts';
import { currentSheet } from '../workspace/current-sheet.ts';
import { useOpenDesign, useOpenState } from '../workspace/open-design-context.tsx';
import { moveElements } from '../workspace/operations/move-parts.ts';
import { designOnSheet, patchOnSheet } from '../workspace/operations/on-sheet.ts';
import type { Guide } from '../workspace/operations/snap-move.ts';
import type { FlowNode } from './design-to-flow.ts';
import { dragOf, dropToPatch, movesIn, snapDrag, standingOf } from './flow-changes-to-patch.ts';
import { useDrawn } from './geometry-context.tsx';

/** How near, on screen, something has to come to line up with another. */
const reachOnScreenPx = 7;
const none: readonly Guide[] = [];

interface Moving {
  readonly onChanges: (changes: readonly NodeChange<FlowNode>[]) => void;
  /** Alt lets go of grid and neighbours while it is held. */
  readonly onPointerMove: (event: { readonly altKey: boolean }) => void;
  readonly guides: readonly Guide[];
}

/** Drags of nodes: shown while they last, snapped, and committed as one patch when they are let go. */
export function useMoving(settledNodes: readonly FlowNode[], zoom: number): Moving {
  const open = useOpenDesign();
  const design = useOpenState((state) => state.document);
  const editable = useOpenState((state) => state.editable);
  const { settled, setDrag } = useDrawn();
  const [guides, setGuides] = useState(none);
  const isFree = useRef(false);
  const held = useRef<{ readonly patch: MergePatch; readonly refs: readonly ElementRef[] }>(undefined);

  const drop = (): void => {
    const drag = held.current;
    held.current = undefined;
    setGuides(none);
    setDrag(undefined);
    if (drag === undefined || isEmptyPatch(drag.patch)) return;
    const committed = open.commit(
      'Move',
      patchOnSheet(design, dropToPatch(design, settled, drag.patch, drag.refs), currentSheet()),
    );
    if (!committed.ok)
      showToast({
        tone: 'failed',
        text: committed.problems.map((problem) => problem.expected).join('; '),
      });
  };

  return {
    guides,
    onPointerMove: ({ altKey }) => {
      isFree.current = altKey;
    },
    onChanges: (changes) => {
      const { moved, dragging } = movesIn(changes);
      if (moved.length === 0 || !editable) return;
      if (!dragging) return drop();
      const drag = dragOf(settledNodes, moved);
      if (drag === undefined) return;
      const { dx, dy, guides } = isFree.current
        ? { ...drag, guides: none }
        : snapDrag(design, settled, drag, reachOnScreenPx / zoom);
      const operation = moveElements(
        designOnSheet(design, currentSheet()),
        standingOf(settled),
        drag.refs,
        dx,
        dy,
      );
      if (!operation.ok) return;
      held.current = { patch: operation.patch, refs: drag.refs };
      setGuides(guides);
      setDrag(operation.patch);
    },
  };
}
