import type { ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import type { FrameClass } from './frame-classes.ts';

/** A crossing as people speak of it: along a tunnel or a cable, from its end a to its end b or back. */
export interface FloodStep {
  readonly collection: 'tunnels' | 'links';
  /** The first cable, where several are aggregated. */
  readonly id: Id;
  readonly direction: 'a-to-b' | 'b-to-a';
  /** The outer tag on that wire; absent where the frame crosses it untagged. */
  readonly vlan?: number;
}

/** What a frame that nobody stops goes round in for ever. */
export interface Storm {
  /** The same for the same storm, whatever else the design holds: its elements, in order. */
  readonly key: string;
  /** A shortest way round. */
  readonly steps: readonly FloodStep[];
  /** All tunnels and cables (each cable of an aggregate) that copies keep crossing, in order of collection and id. */
  readonly tunnels: readonly Id[];
  readonly cables: readonly Id[];
  /** Devices that flood from one to the next of them. */
  readonly devices: readonly Id[];
  readonly sites: readonly Id[];
  /** Segments whose frames can get into it, in order of letter. */
  readonly segments: readonly Id[];
  /** `circulate`: each copy stays one; `multiply`: somewhere one copy in gives more than one out that stays inside. */
  readonly copies: 'circulate' | 'multiply';
  /** The frames that get round: all, unless a filter stops some. */
  readonly frames: readonly FrameClass[];
}

export const elementsOf = (storm: Storm): readonly ElementRef[] => [
  ...storm.tunnels.map((id) => ({ collection: 'tunnels' as const, id })),
  ...storm.cables.map((id) => ({ collection: 'links' as const, id })),
];
