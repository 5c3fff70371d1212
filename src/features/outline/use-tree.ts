import {
  useEffect,
  useLayoutEffect,
  useMemo,
  useReducer,
  useRef,
  useState,
  type FocusEvent,
  type KeyboardEvent,
} from 'react';
import type { Subject } from '../../canvas/actions/element-actions.ts';
import { namePathOf } from '../../canvas/actions/element-menu.ts';
import { useExtraActions } from '../../canvas/actions/extra-actions.ts';
import { useElementActions } from '../../canvas/actions/use-element-actions.ts';
import { askToJoin } from '../../canvas/desk-state.ts';
import { standingOf } from '../../canvas/flow-changes-to-patch.ts';
import { useDrawn } from '../../canvas/geometry-context.tsx';
import { elementKey } from '../../drawing/decorations.ts';
import { useNumbering } from '../../workspace/checks-context.tsx';
import { newEntryId, useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { placeSegment } from '../../workspace/operations/place-parts.ts';
import { lineId, type LineTools } from './outline-line.tsx';
import type { OutlineRow } from './outline-row.ts';
import { setFilter, setOpenings, type OutlineViewStore } from './outline-view.ts';
import { rowMenu, subjectOf } from './row-menu.ts';
import { neighbourOf, treeStep, type TreeStep } from './tree-keys.ts';
import type { OutlineRows } from './use-outline-rows.ts';
import { useSelectionAhead } from './use-selection-ahead.ts';
import { keyOfElement, keysAbove, type VisibleRow } from './visible-rows.ts';

// As long as somebody takes between two letters of one name.
const typingMs = 700;

/** The row whose name is being changed, and where that is kept. */
export interface Renaming {
  readonly key: string;
  readonly path: readonly string[];
}

interface Tree {
  readonly tools: LineTools;
  readonly onKeyDown: (event: KeyboardEvent) => void;
  readonly onBlur: (event: FocusEvent) => void;
  readonly menuKey: string | undefined;
  readonly renaming: Renaming | undefined;
}

/** Lets keyboard and pointer work on the rows, and keeps selection, focus and what is in view together. */
export const useTree = (view: OutlineViewStore, shown: OutlineRows): Tree => {
  const open = useOpenDesign();
  const numbering = useNumbering();
  const selection = useOpenState((state) => state.selection);
  const { settled } = useDrawn();
  const [menuKey, setMenuKey] = useState<string>();
  const [renaming, setRenaming] = useState<Renaming>();
  const { rows, at, roots } = shown;
  const here = rows[at];
  const hereKey = here?.row.key;

  // The row has to be there before it can take the focus.
  const wantsFocus = useRef(false);
  const [, drawAgain] = useReducer((count: number) => count + 1, 0);
  useLayoutEffect(() => {
    if (!wantsFocus.current || hereKey === undefined) return;
    wantsFocus.current = false;
    document.getElementById(lineId(hereKey))?.focus();
  });
  useEffect(() => {
    if (hereKey !== undefined) document.getElementById(lineId(hereKey))?.scrollIntoView({ block: 'nearest' });
  }, [hereKey]);

  const latest = useRef({ ...shown, settled });
  useEffect(() => {
    latest.current = { ...shown, settled };
  });
  const { select, catchUp, isKnown, takeOver } = useSelectionAhead(view);
  const wasMade = useRef(false);

  const move = useMemo(() => {
    const focusCurrent = (): void => {
      wantsFocus.current = true;
      drawAgain();
    };
    /** To a row, with it alone selected, all from the anchor to it, or nothing changed. */
    const goTo = ({ row }: VisibleRow, how: 'select' | 'extend' | 'only'): void => {
      view.setState({ current: row.key });
      focusCurrent();
      if (how === 'only') return;
      if (how === 'select') {
        view.setState({ anchor: row.key });
        return select(row.ref === undefined ? [] : [row.ref]);
      }
      const { rows } = latest.current;
      const placeOfKey = (key: string | undefined): number => rows.findIndex((one) => one.row.key === key);
      const [from, to] = [placeOfKey(view.getState().anchor), placeOfKey(row.key)].sort((a, b) => a - b) as [
        number,
        number,
      ];
      const refs = rows.slice(Math.max(from, 0), to + 1).flatMap((one) => one.row.ref ?? []);
      select([...new Map(refs.map((ref) => [elementKey(ref), ref])).values()]);
    };
    const toggleSelection = ({ ref, key }: OutlineRow): void => {
      catchUp();
      view.setState({ anchor: key, current: key });
      if (ref === undefined) return;
      const { selection } = open.store.getState();
      const without = selection.filter((one) => elementKey(one) !== elementKey(ref));
      select(without.length < selection.length ? without : [...selection, ref]);
      catchUp();
    };
    return { focusCurrent, goTo, toggleSelection };
  }, [open, view, select, catchUp]);

  /** The row that an action was asked for on: one element may have several. */
  const rowOf = ({ ref, detach }: Subject): OutlineRow | undefined => {
    const isIts = ({ row }: VisibleRow): boolean =>
      row.ref !== undefined && elementKey(row.ref) === elementKey(ref) && row.detach?.words === detach?.words;
    return (here !== undefined && isIts(here) ? here : rows.find(isIts))?.row;
  };
  const actions = useElementActions({
    rename: (subject) => {
      const path = namePathOf(open.store.getState().document, subject);
      const row = rowOf(subject);
      if (path === undefined || row === undefined) return;
      view.setState({ current: row.key });
      setRenaming({ key: row.key, path });
    },
    onMade: () => {
      wasMade.current = true;
      setFilter(view, '');
    },
    onRemoved: (subject) => {
      const key = rowOf(subject)?.key;
      const next = neighbourOf(
        rows,
        rows.findIndex((one) => one.row.key === key),
      );
      if (next !== undefined) move.goTo(next, 'only');
    },
  });
  const extra = useExtraActions();

  // What was selected elsewhere is brought to light here.
  useEffect(() => {
    const [first] = selection;
    if (isKnown(selection)) return;
    if (first === undefined) return takeOver(selection);
    const key = keyOfElement(roots, first);
    // Not in the outline yet: the rows of a newer design are on their way.
    if (key === undefined) return;
    takeOver(selection);
    setOpenings(view, keysAbove(key), true);
    view.setState({ current: key, anchor: key });
    if (!wasMade.current) return;
    wasMade.current = false;
    move.focusCurrent();
  }, [selection, roots, view, move, isKnown, takeOver]);

  const tools = useMemo(
    (): LineTools => ({
      pick: (row, { extend, toggle }) => {
        const visible = latest.current.rows.find((one) => one.row.key === row.key);
        if (visible === undefined) return;
        if (toggle) move.toggleSelection(row);
        else move.goTo(visible, extend ? 'extend' : 'select');
        catchUp();
      },
      focus: ({ key }) => {
        if (view.getState().current !== key) view.setState({ current: key });
      },
      toggle: ({ row, isOpen }) => {
        setOpenings(view, [row.key], isOpen !== true);
        view.setState({ current: row.key });
        move.focusCurrent();
      },
      openMenu: ({ key }) => {
        catchUp();
        view.setState({ current: key });
        setMenuKey(key);
      },
      shutMenu: ({ key }) => setMenuKey((now) => (now === key ? undefined : now)),
      returnFocus: () => move.focusCurrent(),
      menuOf: (row) => {
        const { document, selection, editable } = open.store.getState();
        const standing = standingOf(latest.current.settled);
        return rowMenu(row, { design: document, standing, selection, editable, extra }, actions);
      },
      endRenaming: (_row, returnFocus) => {
        setRenaming(undefined);
        if (returnFocus) move.focusCurrent();
      },
      addTo: (group) => {
        if (group === 'associations') return askToJoin({ kind: 'association' });
        if (group === 'segments')
          return actions.make(placeSegment(open.store.getState().document, newEntryId, numbering));
        if (group === 'sites') return actions.place('site');
        if (group === 'transports') return actions.place('transport');
        if (group === 'notes') return actions.place('note');
      },
    }),
    [open, view, move, catchUp, actions, extra, numbering],
  );

  const typed = useRef({ text: '', atMs: 0 });
  const typedWith = (event: KeyboardEvent): string => {
    if (event.key.length !== 1 || event.key === ' ') return '';
    const isOn = event.timeStamp - typed.current.atMs < typingMs;
    typed.current = { text: (isOn ? typed.current.text : '') + event.key, atMs: event.timeStamp };
    return typed.current.text;
  };
  const follow = (step: TreeStep, visible: VisibleRow, event: KeyboardEvent): void => {
    const { row } = visible;
    const subject = subjectOf(row);
    const isControl = event.ctrlKey || event.metaKey;
    const { editable } = open.store.getState();
    switch (step.does) {
      case 'go':
        return move.goTo(
          step.to,
          event.shiftKey && event.key.length > 1 ? 'extend' : isControl ? 'only' : 'select',
        );
      case 'open':
      case 'shut':
        return setOpenings(
          view,
          step.rows.map((one) => one.row.key),
          step.does === 'open',
        );
      case 'toggle-selection':
        return move.toggleSelection(row);
      case 'inspect':
        return subject === undefined ? tools.toggle(visible) : actions.inspect(subject);
      case 'menu':
        return row.ref === undefined ? undefined : tools.openMenu(row);
      case 'rename':
        return editable && subject !== undefined ? actions.rename(subject) : undefined;
      case 'remove':
        return subject === undefined ? undefined : actions.remove(subject);
    }
  };
  const onKeyDown = (event: KeyboardEvent): void => {
    const isOnButton = event.target instanceof Element && event.target.closest('button') !== null;
    if (here === undefined || (isOnButton && (event.key === 'Enter' || event.key === ' '))) return;
    const step = treeStep(rows, at, event, typedWith(event));
    // Whatever else a key does, here or on the whole page, it does to what is selected.
    if (step?.does !== 'go') catchUp();
    if (step === undefined) return;
    event.preventDefault();
    follow(step, here, event);
  };
  const onBlur = ({ currentTarget, relatedTarget }: FocusEvent): void => {
    if (!currentTarget.contains(relatedTarget)) catchUp();
  };
  return { tools, onKeyDown, onBlur, menuKey, renaming };
};
