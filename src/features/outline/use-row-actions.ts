import { useEffect, useMemo, useRef } from 'react';
import { flushSync } from 'react-dom';
import { askToJoin, setInspecting } from '../../canvas/desk-state.ts';
import { standingOf } from '../../canvas/flow-changes-to-patch.ts';
import { useDrawn } from '../../canvas/geometry-context.tsx';
import { freePlace, placePart, type PlacedPart } from '../../canvas/place-part.ts';
import { useView } from '../../canvas/use-view.ts';
import { showToast } from '../../components/toast.tsx';
import { anchorOf } from '../../drawing/routing/anchors.ts';
import type { ElementRef } from '../../engine/model/design.ts';
import { patchAt } from '../../engine/model/merge-patch.ts';
import { newEntryId, perform, useOpenDesign } from '../../workspace/open-design-context.tsx';
import { copyParts, pasteParts } from '../../workspace/operations/copy-parts.ts';
import { setLocked } from '../../workspace/operations/move-parts.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';
import type { Operation } from '../../workspace/operations/operation.ts';
import { placeEndpoint, placeSegment } from '../../workspace/operations/place-parts.ts';
import { removeElements } from '../../workspace/operations/remove-parts.ts';
import type { OutlineRow } from './outline-row.ts';
import { targetsOf, type RowActions } from './row-menu.ts';

// A copy stands beside its original, so that both can be seen.
const copyOffsetPx = 24;

interface Surroundings {
  readonly startRenaming: (row: OutlineRow) => void;
  /** Something was made and is selected now: the keyboard goes there. */
  readonly onMade: () => void;
  /** The row's element is gone: the keyboard goes on from its neighbour. */
  readonly onRemoved: (row: OutlineRow) => void;
}

/** The first field of what the inspector shows takes the focus; its heading's button where nothing may be changed. */
const focusInspector = (): void => {
  flushSync(() => setInspecting(true));
  const inspector = document.querySelector('aside[aria-label="Inspector"]');
  const first =
    inspector?.querySelector<HTMLElement>('input, select, textarea') ??
    inspector?.querySelector<HTMLElement>('button');
  first?.focus();
};

/** Does what the outline's rows offer. The same object as long as the design is open. */
export const useRowActions = (around: Surroundings): RowActions => {
  const open = useOpenDesign();
  const { settled } = useDrawn();
  const sheet = useView();
  const latest = useRef({ settled, sheet, around });
  useEffect(() => {
    latest.current = { settled, sheet, around };
  });
  return useMemo((): RowActions => {
    const say = (text: string): void => void showToast({ tone: 'failed', text });
    const run = (operation: Operation): boolean => {
      const done = perform(open, operation);
      if (!done.ok) say(done.why);
      return done.ok;
    };
    const make = (operation: Operation): void => {
      if (run(operation)) latest.current.around.onMade();
    };
    const place = (part: PlacedPart, site?: string): void => {
      const { settled, sheet } = latest.current;
      const { document } = open.store.getState();
      const at = freePlace(document, settled, part, site, sheet.middle());
      make(placePart(document, settled, part, at, newEntryId, site));
    };
    const removed = (text: string): void => {
      open.select([]);
      showToast({ tone: 'done', text, action: { label: 'Undo', onSelect: () => open.undo() } });
    };
    return {
      rename: (row) => latest.current.around.startRenaming(row),
      inspect: ({ ref }) => {
        if (ref === undefined) return;
        flushSync(() => open.select([ref]));
        focusInspector();
      },
      show: ({ ref }) => {
        if (ref === undefined) return;
        const { settled, sheet } = latest.current;
        const { document } = open.store.getState();
        open.select([ref]);
        const at = anchorOf(settled, ref, document);
        if (at === undefined) say(`${nameOf(document, ref)} has no place of its own on the sheet.`);
        else sheet.showPoint(at);
      },
      remove: (row) => {
        const { document, selection, editable } = open.store.getState();
        if (!editable || row.ref === undefined) return;
        const targets = targetsOf(row, selection);
        if (targets.length === 1 && row.detach !== undefined) {
          const { words, doneWords, path } = row.detach;
          if (!run({ ok: true, label: words, patch: patchAt(path, null) })) return;
          latest.current.around.onRemoved(row);
          return removed(`${doneWords}.`);
        }
        if (targets.length === 1 && row.member !== undefined) {
          const pair = document.devices[row.ref.id]?.name ?? row.ref.id;
          return say(
            `${row.name} goes only with its pair: remove ${pair}, or make it another kind of device.`,
          );
        }
        const words =
          targets.length === 1 ? nameOf(document, targets[0] ?? row.ref) : `${targets.length} elements`;
        if (!run(removeElements(document, targets))) return;
        latest.current.around.onRemoved(row);
        removed(`Removed ${words}.`);
      },
      duplicate: (refs) => {
        const { document } = open.store.getState();
        const parts = copyParts(document, standingOf(latest.current.settled), refs);
        if (parts !== undefined)
          make(pasteParts(document, parts, { dx: copyOffsetPx, dy: copyOffsetPx }, undefined, newEntryId));
      },
      setLocked: (refs: readonly ElementRef[], locked) => {
        run(setLocked(open.store.getState().document, standingOf(latest.current.settled), refs, locked));
      },
      join: askToJoin,
      addDevice: (kind, site) => place(kind, site),
      addEndpoint: (device) => make(placeEndpoint(open.store.getState().document, device, newEntryId)),
      addTo: (group) => {
        if (group === 'associations') return askToJoin({ kind: 'association' });
        if (group === 'segments') return make(placeSegment(open.store.getState().document, newEntryId));
        if (group === 'sites') return place('site');
        if (group === 'transports') return place('transport');
        if (group === 'notes') return place('note');
      },
    };
  }, [open]);
};
