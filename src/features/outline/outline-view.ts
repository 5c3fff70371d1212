import { createStore, type StoreApi } from 'zustand/vanilla';
import type { ElementRef } from '../../engine/model/design.ts';
import type { Openings } from './visible-rows.ts';

export interface OutlineView {
  readonly openings: Openings;
  readonly filter: string;
  /** What was opened and closed among what the filter left; forgotten with its text. */
  readonly filterOpenings: Openings;
  /** The key of the row that the keyboard is on. */
  readonly current: string | undefined;
  /** The key of the row that a range of rows is selected from. */
  readonly anchor: string | undefined;
  /** What the keys have selected while the sheet and the inspector have yet to follow; undefined once they have. */
  readonly ahead: readonly ElementRef[] | undefined;
}

/** How somebody has the outline before them. Kept by the screen, so that it is the same when they come back to it. */
export type OutlineViewStore = StoreApi<OutlineView>;

export const createOutlineView = (): OutlineViewStore =>
  createStore<OutlineView>(() => ({
    openings: new Map(),
    filter: '',
    filterOpenings: new Map(),
    current: undefined,
    anchor: undefined,
    ahead: undefined,
  }));

export const setFilter = (view: OutlineViewStore, filter: string): void =>
  view.setState({ filter, filterOpenings: new Map() });

/** Opens or closes rows, among all or among what the filter left. */
export const setOpenings = (view: OutlineViewStore, keys: readonly string[], isOpen: boolean): void => {
  const { filter, openings, filterOpenings } = view.getState();
  const changed = new Map(filter === '' ? openings : filterOpenings);
  for (const key of keys) changed.set(key, isOpen);
  view.setState(filter === '' ? { openings: changed } : { filterOpenings: changed });
};
