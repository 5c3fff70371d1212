import type { ElementRef } from '../../engine/model/design.ts';
import type { DeviceKind, Member } from '../../engine/model/devices.ts';
import type { Alignment, Direction } from '../../workspace/operations/align-parts.ts';
import type { JoinRequest } from '../desk-state.ts';
import type { FarEnd } from './far-ends.ts';

/** Takes what is named out of where it is named, and leaves the element itself. */
export interface Detachment {
  /** What would be done: 'Take tn-ho-gul out of br-110'. */
  readonly words: string;
  /** The same once it is done. */
  readonly doneWords: string;
  /** Keys from the document's root to what goes. */
  readonly path: readonly string[];
}

/** What a menu was opened on: a part of the sheet or a line of the outline. */
export interface Subject {
  readonly ref: ElementRef;
  /** A member of a pair, named by its own name. */
  readonly member?: Member | undefined;
  /** It is only named here. */
  readonly detach?: Detachment | undefined;
}

/** All that can be done with elements, wherever they are shown. */
export interface ElementActions {
  readonly rename: (subject: Subject) => void;
  readonly inspect: (subject: Subject) => void;
  readonly show: (subject: Subject) => void;
  readonly remove: (subject: Subject) => void;
  readonly duplicate: (refs: readonly ElementRef[]) => void;
  readonly copy: (refs: readonly ElementRef[]) => void;
  readonly setLocked: (refs: readonly ElementRef[], locked: boolean) => void;
  readonly setCollapsed: (sites: readonly string[], collapsed: boolean) => void;
  readonly align: (refs: readonly ElementRef[], alignment: Alignment) => void;
  readonly spaceOut: (refs: readonly ElementRef[], direction: Direction) => void;
  readonly tidy: (refs: readonly ElementRef[]) => void;
  readonly follow: (far: FarEnd) => void;
  readonly showOnly: (segments: readonly string[]) => void;
  readonly join: (request: JoinRequest) => void;
  readonly addDevice: (kind: DeviceKind, site: string) => void;
  readonly addEndpoint: (device: string) => void;
  readonly addNote: (about: ElementRef) => void;
}
