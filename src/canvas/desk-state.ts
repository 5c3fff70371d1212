import { create } from 'zustand';
import type { ConnectEnd } from './connect-ends.ts';
import type { TrayPart } from './place-part.ts';

/** What a join dialog starts from; what is missing is chosen in it. */
export interface JoinRequest {
  readonly kind: 'cable' | 'landing' | 'tunnel' | 'association';
  readonly a?: ConnectEnd;
  readonly b?: ConnectEnd;
}

interface DeskState {
  readonly tool: 'select' | 'pan';
  /** The part of the tray that the next click puts down. */
  readonly placing: TrayPart | undefined;
  /** The first end of a joining part. */
  readonly firstEnd: ConnectEnd | undefined;
  readonly join: JoinRequest | undefined;
  readonly searching: boolean;
  /** The inspector stands beside the sheet; a selection opens it, its button shuts it. */
  readonly inspecting: boolean;
  /** Nobody has moved over the sheet since it was last fitted: it stays fitted while the room for it changes. */
  readonly fitted: boolean;
  readonly hiddenSegments: readonly string[];
}

const atRest: DeskState = {
  tool: 'select',
  placing: undefined,
  firstEnd: undefined,
  join: undefined,
  searching: false,
  inspecting: false,
  fitted: true,
  hiddenSegments: [],
};

/** What the person at this desk is doing; nothing of it belongs to the design. */
export const useDesk = create<DeskState>(() => atRest);

export const setTool = (tool: DeskState['tool']): void =>
  useDesk.setState({ tool, placing: undefined, firstEnd: undefined });
export const startPlacing = (placing: TrayPart | undefined): void =>
  useDesk.setState({ placing, firstEnd: undefined, tool: 'select' });
export const askToJoin = (join: JoinRequest | undefined): void =>
  useDesk.setState({ join, placing: undefined, firstEnd: undefined });
export const setSearching = (searching: boolean): void => useDesk.setState({ searching });
export const setInspecting = (inspecting: boolean): void => useDesk.setState({ inspecting });
export const setFitted = (fitted: boolean): void => useDesk.setState({ fitted });
export const toggleSegment = (id: string): void =>
  useDesk.setState(({ hiddenSegments }) => ({
    hiddenSegments: hiddenSegments.includes(id)
      ? hiddenSegments.filter((hidden) => hidden !== id)
      : [...hiddenSegments, id],
  }));
/** Forgets everything, as when another design is opened. */
export const clearDesk = (): void => useDesk.setState(atRest);
