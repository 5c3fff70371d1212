import { useEffect, useMemo, useRef } from 'react';
import { flushSync } from 'react-dom';
import { showToast } from '../../components/toast.tsx';
import { anchorOf } from '../../drawing/routing/anchors.ts';
import { sheetsOf } from '../../drawing/sheets/sheet-numbers.ts';
import { currentSheet } from '../../workspace/current-sheet.ts';
import type { ElementRef } from '../../engine/model/design.ts';
import { patchAt } from '../../engine/model/merge-patch.ts';
import { useNumbering } from '../../workspace/checks-context.tsx';
import { newEntryId, perform, useOpenDesign } from '../../workspace/open-design-context.tsx';
import { alignElements, distributeElements } from '../../workspace/operations/align-parts.ts';
import { setCollapsed } from '../../workspace/operations/collapse-sites.ts';
import { copyParts, pasteParts, type Parts } from '../../workspace/operations/copy-parts.ts';
import { setLocked } from '../../workspace/operations/move-parts.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';
import type { Operation } from '../../workspace/operations/operation.ts';
import { placeEndpoint } from '../../workspace/operations/place-parts.ts';
import { removeElements } from '../../workspace/operations/remove-parts.ts';
import { boxesOf } from '../boxes-of.ts';
import { askToJoin, editNote } from '../desk-state.ts';
import { standingOf } from '../flow-changes-to-patch.ts';
import { focusInspector } from '../focus-inspector.ts';
import { useDrawn } from '../geometry-context.tsx';
import { pinNoteBeside } from '../place-note.ts';
import { freePlace, placePart, type PlacedPart } from '../place-part.ts';
import { useTidy } from '../use-tidy.ts';
import { useView } from '../use-view.ts';
import { useViewChoice } from '../use-view-choice.ts';
import { copyToClipboard } from './clipboard.ts';
import type { ElementActions, Subject } from './element-actions.ts';
import { targetsOf } from './element-menu.ts';

// A copy stands beside its original, so that both can be seen.
const copyOffsetPx = 24;

/** What is done where the actions are asked for. */
export interface Surroundings {
  /** Takes the place of the inspector's own field. */
  readonly rename?: (subject: Subject) => void;
  /** Something was made and is selected now: the keyboard goes there. */
  readonly onMade?: () => void;
  /** The element is gone: the keyboard goes on from its neighbour. */
  readonly onRemoved?: (subject: Subject) => void;
}

export interface DeskActions extends ElementActions {
  /** Does an operation; says why when it can't be done. */
  readonly run: (operation: Operation) => boolean;
  /** The same for one that makes something. */
  readonly make: (operation: Operation) => void;
  /** Puts a part where there is room for it. */
  readonly place: (part: PlacedPart, site?: string) => void;
  readonly copied: (refs: readonly ElementRef[]) => Parts | undefined;
}

/** Does what menus, keys and search offer for elements. The same object as long as the design is open. */
export const useElementActions = (around: Surroundings = {}): DeskActions => {
  const open = useOpenDesign();
  const numbering = useNumbering();
  const { settled } = useDrawn();
  const sheet = useView();
  const tidy = useTidy();
  const choice = useViewChoice();
  const latest = useRef({ settled, sheet, around, tidy, choice });
  useEffect(() => {
    latest.current = { settled, sheet, around, tidy, choice };
  });
  return useMemo((): DeskActions => {
    const say = (text: string): void => void showToast({ tone: 'failed', text });
    const run = (operation: Operation): boolean => {
      const done = perform(open, operation);
      if (!done.ok) say(done.why);
      return done.ok;
    };
    const make = (operation: Operation): void => {
      if (run(operation)) latest.current.around.onMade?.();
    };
    const now = () => open.store.getState().document;
    const standing = () => standingOf(latest.current.settled);
    const place = (part: PlacedPart, site?: string): void => {
      const { settled, sheet } = latest.current;
      const at = freePlace(now(), settled, part, site, sheet.middle());
      make(placePart(now(), settled, part, at, newEntryId, numbering, site));
    };
    const go = (ref: ElementRef): boolean => {
      const on = sheetsOf(now(), ref);
      // Selecting it turns to its sheet and shows it there.
      if (on.length > 0 && !on.includes(currentSheet())) return true;
      const at = anchorOf(latest.current.settled, ref, now());
      if (at !== undefined) latest.current.sheet.showPoint(at);
      return at !== undefined;
    };
    const removed = (text: string): void => {
      open.select([]);
      showToast({ tone: 'done', text, action: { label: 'Undo', onSelect: () => open.undo() } });
    };
    const copied = (refs: readonly ElementRef[]): Parts | undefined => copyParts(now(), standing(), refs);
    return {
      run,
      make,
      place,
      copied,
      rename: (subject) => {
        const { rename } = latest.current.around;
        if (rename !== undefined) return rename(subject);
        const { ref } = subject;
        if (ref.collection === 'notes' && now().notes[ref.id]?.standing !== true) return editNote(ref.id);
        flushSync(() => open.select([ref]));
        focusInspector(true);
      },
      inspect: ({ ref }) => {
        flushSync(() => open.select([ref]));
        focusInspector();
      },
      show: ({ ref }) => {
        open.select([ref]);
        if (!go(ref)) say(`${nameOf(now(), ref)} has no place of its own on the sheet.`);
      },
      remove: (subject) => {
        const { document, selection, editable } = open.store.getState();
        if (!editable) return;
        const { ref, member, detach } = subject;
        const targets = targetsOf(ref, selection);
        if (targets.length === 1 && detach !== undefined) {
          const { words, doneWords, path } = detach;
          if (!run({ ok: true, label: words, patch: patchAt(path, null) })) return;
          latest.current.around.onRemoved?.(subject);
          return removed(`${doneWords}.`);
        }
        if (targets.length === 1 && member !== undefined) {
          const device = document.devices[ref.id];
          const name = device?.kind === 'ha-pair' ? device.memberNames[member] : ref.id;
          return say(
            `${name} goes only with its pair: remove ${device?.name ?? ref.id}, or make it another kind of device.`,
          );
        }
        const words =
          targets.length === 1 ? nameOf(document, targets[0] ?? ref) : `${targets.length} elements`;
        if (!run(removeElements(document, targets))) return;
        latest.current.around.onRemoved?.(subject);
        removed(`Removed ${words}.`);
      },
      duplicate: (refs) => {
        const parts = copied(refs);
        if (parts === undefined) return say('Select a device, a site or a note to duplicate it.');
        make(
          pasteParts(now(), parts, { dx: copyOffsetPx, dy: copyOffsetPx }, undefined, newEntryId, numbering),
        );
      },
      copy: (refs) => {
        const parts = copied(refs);
        if (parts === undefined) return say('Select a device, a site or a note to copy it.');
        copyToClipboard(parts);
        const [first] = refs;
        showToast({
          tone: 'done',
          text: `Copied ${refs.length === 1 && first !== undefined ? nameOf(now(), first) : `${refs.length} elements`}.`,
        });
      },
      setLocked: (refs, locked) => void run(setLocked(now(), standing(), refs, locked)),
      setCollapsed: (sites, collapsed) => {
        if (!run(setCollapsed(now(), standing(), sites, collapsed))) return;
        // What is kept back can't be looked at any more: its site stands for it.
        const { selection, document } = open.store.getState();
        if (
          collapsed &&
          selection.some(
            ({ collection, id }) =>
              collection === 'devices' && sites.includes(document.devices[id]?.site ?? ''),
          )
        )
          open.select(sites.map((id) => ({ collection: 'sites', id })));
      },
      align: (refs, alignment) =>
        void run(alignElements(now(), standing(), boxesOf(latest.current.settled, refs), alignment)),
      spaceOut: (refs, direction) =>
        void run(distributeElements(now(), standing(), boxesOf(latest.current.settled, refs), direction)),
      tidy: (refs) => void latest.current.tidy.tidy(refs),
      follow: ({ at }) => {
        open.select([at]);
        go(at);
      },
      showOnly: (segments) => latest.current.choice.showOnly(segments),
      join: askToJoin,
      addDevice: (kind, site) => place(kind, site),
      addEndpoint: (device) => make(placeEndpoint(now(), device, newEntryId, numbering)),
      addNote: (about) => {
        if (!run(pinNoteBeside(now(), latest.current.settled, about, newEntryId))) return;
        const { onMade } = latest.current.around;
        if (onMade !== undefined) return onMade();
        const [note] = open.store.getState().selection;
        if (note !== undefined) editNote(note.id, true);
      },
    };
  }, [open, numbering]);
};
