import { useDeferredValue, useMemo } from 'react';
import { useStore } from 'zustand';
import { useChecks } from '../../workspace/checks-context.tsx';
import type { OutlineRow } from './outline-row.ts';
import { outlineTree } from './outline-tree.ts';
import type { OutlineViewStore } from './outline-view.ts';
import {
  keysAbove,
  narrow,
  opensAtFirst,
  visibleRows,
  type Narrowed,
  type VisibleRow,
} from './visible-rows.ts';

export interface OutlineRows {
  readonly roots: readonly OutlineRow[];
  /** Absent while nothing is looked for. */
  readonly narrowed: Narrowed | undefined;
  readonly rows: readonly VisibleRow[];
  /** The place of the current row among them; of the nearest row above it where it can't be seen. */
  readonly at: number;
}

const placeOf = (rows: readonly VisibleRow[], key: string | undefined): number => {
  if (key === undefined) return 0;
  for (const candidate of [key, ...[...keysAbove(key)].reverse()]) {
    const at = rows.findIndex(({ row }) => row.key === candidate);
    if (at >= 0) return at;
  }
  return 0;
};

/** The open design as the rows that are seen now. */
export const useOutlineRows = (view: OutlineViewStore): OutlineRows => {
  // The design that the findings are about: it follows the newest without holding up what somebody types.
  const { openFindings, document: design } = useChecks();
  const openings = useStore(view, (state) => state.openings);
  const filter = useStore(view, (state) => state.filter);
  const filterOpenings = useStore(view, (state) => state.filterOpenings);
  const current = useStore(view, (state) => state.current);
  const roots = useMemo(() => outlineTree(design, openFindings), [design, openFindings]);
  // A letter shows in the field at once, however much there is to look through.
  const wanted = useDeferredValue(filter.trim());
  const narrowed = useMemo(() => (wanted === '' ? undefined : narrow(roots, wanted)), [roots, wanted]);
  const rows = useMemo(() => {
    const atFirst = opensAtFirst(roots);
    return narrowed === undefined
      ? visibleRows(roots, (row) => openings.get(row.key) ?? atFirst(row))
      : visibleRows(narrowed.roots, (row) => filterOpenings.get(row.key) ?? narrowed.opened.has(row.key));
  }, [roots, narrowed, openings, filterOpenings]);
  const at = useMemo(() => placeOf(rows, current), [rows, current]);
  return { roots, narrowed, rows, at };
};
