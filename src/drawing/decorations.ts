import type { ElementRef } from '../engine/model/design.ts';
import type { Plug } from '../engine/model/underlay.ts';

export type Severity = 'blocking' | 'degrading' | 'advisory';

/** How an element stands out; several may hold at once. */
export type Tone =
  | 'selected'
  | 'hovered'
  | 'lit'
  | 'dimmed'
  | 'failed'
  | 'fault'
  // In a drawing of two designs at once.
  | 'added'
  | 'removed'
  | 'changed';

/** A step of a loop: along a tunnel or a cable, from its end a to its end b or back. */
export interface LoopStep {
  readonly collection: 'tunnels' | 'links';
  readonly id: string;
  readonly direction: 'a-to-b' | 'b-to-a';
}

/**
 * What is to be shown on top of a drawing. The canvas and the exports know these and the design, never findings or
 * traces: whoever has a result turns it into decorations.
 */
export interface Decorations {
  readonly tones: { readonly [elementKey: string]: readonly Tone[] };
  /** Cords drawn as cut; with `vnis` both ends' differing VNIs are flagged at the gap. */
  readonly cuts: readonly {
    readonly tunnel: string;
    readonly vnis?: { readonly a?: number; readonly b?: number };
    /** The balloon that belongs to it and points into the gap. */
    readonly balloon?: number;
  }[];
  readonly loops: readonly { readonly steps: readonly LoopStep[] }[];
  readonly ghosts: readonly {
    readonly id: string;
    readonly from: Plug;
    readonly to: Plug;
    readonly label: string;
  }[];
  readonly overhangs: readonly {
    readonly tunnel: string;
    readonly end: 'a' | 'b';
    readonly packetBytes: number;
    readonly mtuBytes: number;
    /** The balloon that belongs to it and stands beside it. */
    readonly balloon?: number;
  }[];
  readonly balloons: readonly {
    readonly number: number;
    readonly severity: Severity;
    readonly waived: boolean;
    readonly at: ElementRef;
    readonly words?: string;
  }[];
  /** Numbers of a trace's steps, as its list repeats them; the step that fails stands out. */
  readonly hops?: readonly { readonly number: number; readonly at: ElementRef; readonly failing: boolean }[];
  /** A few words on a plate beside an element, such as how full it is; the strong ones are placed first and stand out. */
  readonly tags?: readonly {
    readonly at: ElementRef;
    readonly text: string;
    readonly strong?: boolean;
    /** Parts of a million, drawn as a bar under the words; what is over a million sticks out of it. */
    readonly fillPerMillion?: number;
  }[];
  /** Slips of open threads, one at each element that has some: how many, and whether one suggests a change. */
  readonly flags?: readonly {
    readonly at: ElementRef;
    readonly count: number;
    readonly suggests: boolean;
  }[];
  /** Segments whose cords are hidden from view (faded). */
  readonly hiddenSegments: readonly string[];
}

export const noDecorations: Decorations = {
  tones: {},
  cuts: [],
  loops: [],
  ghosts: [],
  overhangs: [],
  balloons: [],
  hiddenSegments: [],
};

/** Both at once: tones add up, what the upper one says nothing of stays. */
export const layOver = (lower: Decorations, upper: Partial<Decorations>): Decorations => {
  const tones: { [key: string]: readonly Tone[] } = { ...lower.tones };
  for (const [key, over] of Object.entries(upper.tones ?? {})) tones[key] = [...(tones[key] ?? []), ...over];
  return { ...lower, ...upper, tones };
};

/** The key under which an element's tones stand. */
export const elementKey = (ref: ElementRef): string =>
  `${ref.collection}/${ref.id}${ref.port === undefined ? '' : `/${ref.port}`}${ref.member === undefined ? '' : `@${ref.member}`}`;
