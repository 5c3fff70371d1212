import type { ElementRef } from '../engine/model/design.ts';

/** Something that can be done, by its name. */
export interface NamedCommand {
  readonly name: string;
  /** What it belongs to, in one word. */
  readonly kind: string;
  readonly detail: string;
  readonly run: () => void;
}

/** What the page that is open can be asked for by name, beside going elsewhere. */
export interface PageCommands {
  readonly commands: readonly NamedCommand[];
  /** Brings an element into view. */
  readonly goTo: (ref: ElementRef) => void;
}
