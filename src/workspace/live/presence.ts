import { create } from 'zustand';
import type { PlaceInDesign, PresentPerson } from '../../contract/live.ts';

interface PresenceState {
  /** Everybody else who has the design open; a person with two windows stands here twice. */
  readonly others: readonly PresentPerson[];
  /** Whose view this window follows. */
  readonly followed: string | undefined;
  /** The design's page that this window shows. */
  readonly page: string;
  /** What of the sheet this window shows; null where it shows none. */
  readonly view: PlaceInDesign['view'];
}

const alone: PresenceState = { others: [], followed: undefined, page: 'sheet', view: null };

/** Who else has the design open, and where. */
export const usePresence = create<PresenceState>(() => alone);

/** Who is there now; whoever is followed and has gone is followed no more. */
export const setOthers = (others: readonly PresentPerson[]): void =>
  usePresence.setState(({ followed }) => ({
    others,
    followed: others.some(({ connectionId }) => connectionId === followed) ? followed : undefined,
  }));
export const follow = (followed: string | undefined): void => usePresence.setState({ followed });
export const setView = (view: PlaceInDesign['view']): void => usePresence.setState({ view });
export const setPage = (page: string): void => usePresence.setState({ page });
export const clearPresence = (): void => usePresence.setState(alone);
