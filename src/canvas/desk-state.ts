import { create } from 'zustand';
import type { ElementRef } from '../engine/model/design.ts';
import type { ConnectEnd } from './connect-ends.ts';
import type { PageCommands } from './named-command.ts';
import type { TrayPart } from './place-part.ts';

/** What a join dialog starts from; what is missing is chosen in it. */
export interface JoinRequest {
  readonly kind: 'cable' | 'landing' | 'tunnel' | 'association';
  readonly a?: ConnectEnd;
  readonly b?: ConnectEnd;
}

/** A menu that was opened on the sheet, at a point of the screen: an element's, or the sheet's own. */
export interface OpenedMenu {
  readonly at: { readonly x: number; readonly y: number };
  readonly ref?: ElementRef;
  /** All that can be done, or only where one gets from there. */
  readonly of: 'all' | 'ways';
}

interface DeskState {
  readonly tool: 'select' | 'pan';
  /** The part of the tray that the next click puts down. */
  readonly placing: TrayPart | undefined;
  /** The first end of a joining part. */
  readonly firstEnd: ConnectEnd | undefined;
  readonly join: JoinRequest | undefined;
  readonly menu: OpenedMenu | undefined;
  readonly searching: boolean;
  readonly offered: PageCommands | undefined;
  /** The list of all keys is open. */
  readonly listingKeys: boolean;
  /** The note whose words are typed on the sheet. */
  readonly editedNote: string | undefined;
  /** It was put down just now: who gives up its words gives it up. */
  readonly isNewNote: boolean;
  /** A layout is being worked out; aborting gives it up. */
  readonly tidying: AbortController | undefined;
  /** The inspector stands beside the sheet; a selection opens it, its button shuts it. */
  readonly inspecting: boolean;
  /** Nobody has moved over the sheet since it was last fitted: it stays fitted while the room for it changes. */
  readonly fitted: boolean;
}

const atRest: DeskState = {
  tool: 'select',
  placing: undefined,
  firstEnd: undefined,
  join: undefined,
  menu: undefined,
  searching: false,
  offered: undefined,
  listingKeys: false,
  editedNote: undefined,
  isNewNote: false,
  tidying: undefined,
  inspecting: false,
  fitted: true,
};

/** What the person at this desk is doing; nothing of it belongs to the design. */
export const useDesk = create<DeskState>(() => atRest);

export const setTool = (tool: DeskState['tool']): void =>
  useDesk.setState({ tool, placing: undefined, firstEnd: undefined });
export const startPlacing = (placing: TrayPart | undefined): void =>
  useDesk.setState({ placing, firstEnd: undefined, tool: 'select' });
export const askToJoin = (join: JoinRequest | undefined): void =>
  useDesk.setState({ join, placing: undefined, firstEnd: undefined });
export const openMenu = (menu: OpenedMenu | undefined): void => useDesk.setState({ menu });
export const setSearching = (searching: boolean): void => useDesk.setState({ searching });
export const offerCommands = (offered: PageCommands | undefined): void => useDesk.setState({ offered });
export const setInspecting = (inspecting: boolean): void => useDesk.setState({ inspecting });
export const setFitted = (fitted: boolean): void => useDesk.setState({ fitted });
export const setListingKeys = (listingKeys: boolean): void => useDesk.setState({ listingKeys });
export const editNote = (editedNote: string | undefined, isNewNote = false): void =>
  useDesk.setState({ editedNote, isNewNote });
export const setTidying = (tidying: AbortController | undefined): void => useDesk.setState({ tidying });
/** Forgets everything, as when another design is opened. */
export const clearDesk = (): void => {
  useDesk.getState().tidying?.abort();
  useDesk.setState(atRest);
};
