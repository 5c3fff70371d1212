import type { FloodStep } from '../flood/storm.ts';
import type { Direction } from '../flood/places.ts';
import type { ElementRef } from '../model/design.ts';
import type { Tags } from '../network/frame-tags.ts';
import { outerVlan, tagList, untagged } from '../network/frame-tags.ts';
import type { Network, PortGroup } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import type { Fragment } from '../wire/fragments-of.ts';
import type { LearnedPlaces } from './learned-places.ts';
import type { TracedFrame } from './traced-frame.ts';
import type { Assumption, DecisionFact, DropReason, HopWire } from './trace.ts';

/** One copy on one cable or in one tunnel. */
export interface Crossing {
  readonly element: number;
  readonly direction: Direction;
  readonly tags: Tags;
  readonly hopLimit: number;
}

// Elements stay below 2^20, tags have 24 bits, hop limits 8: together they fit a number exactly.
export const crossingKey = ({ element, direction, tags, hopLimit }: Crossing): number =>
  ((element * 2 + direction) * 0x100_0000 + tags) * 0x100 + hopLimit;

/** How a copy ends. */
export type End =
  | { readonly code: 'delivered'; readonly to: ElementRef }
  | { readonly code: 'dropped'; readonly reason: DropReason; readonly byDesign: boolean };

/** What is true of a hop whichever copy takes it. */
export interface Hop {
  readonly crossing?: Crossing;
  readonly step?: FloodStep;
  readonly from?: ElementRef;
  readonly to?: ElementRef;
  readonly elements: readonly ElementRef[];
  readonly facts: readonly DecisionFact[];
  readonly wire?: HopWire;
  readonly pieces?: readonly Fragment[];
  readonly end?: End;
  /** Where copies go on. */
  readonly onward: readonly Crossing[];
  /** Copies that would go on, were it not for what stops them. */
  readonly stopped: readonly Hop[];
}

/** What all parts of one trace share. */
export interface Following {
  readonly network: Network;
  readonly frame: TracedFrame;
  readonly learned: LearnedPlaces;
  readonly assume: (code: Assumption['code'], element: ElementRef, words: string) => void;
}

export const dropped = (reason: DropReason, byDesign = false): End => ({ code: 'dropped', reason, byDesign });

const portGroupRef = (network: Network, group: PortGroup): ElementRef => ({
  collection: 'devices',
  id: group.device,
  port: group.port,
  ...(entryOf(network.design.devices, group.device).kind === 'ha-pair' ? { member: group.member } : {}),
});

/** Names of a crossing: the step as floods name it, both its ends, and the element itself. */
export const namesOf = (
  network: Network,
  { element, direction, tags }: Pick<Crossing, 'element' | 'direction' | 'tags'>,
): {
  readonly step: FloodStep;
  readonly from: ElementRef;
  readonly to: ElementRef;
  readonly ref: ElementRef;
} => {
  const way = {
    direction: direction === 0 ? ('a-to-b' as const) : ('b-to-a' as const),
    ...(tags === untagged ? {} : { vlan: outerVlan(tags) }),
  };
  const bundle = network.bundles[element];
  if (bundle !== undefined) {
    const id = (bundle.alive[0] ?? bundle.cables[0])!;
    const ports = [portGroupRef(network, bundle.a), portGroupRef(network, bundle.b)] as const;
    return {
      step: { collection: 'links', id, ...way },
      from: ports[direction],
      to: ports[direction === 0 ? 1 : 0],
      ref: { collection: 'links', id },
    };
  }
  const id = network.tunnelIds[element - network.firstTunnelElement]!;
  const tunnel = entryOf(network.design.tunnels, id);
  const endpoints = [tunnel.a, tunnel.b].map(({ endpoint }): ElementRef => ({
    collection: 'endpoints',
    id: endpoint,
  })) as [ElementRef, ElementRef];
  return {
    step: { collection: 'tunnels', id, ...way },
    from: endpoints[direction],
    to: endpoints[direction === 0 ? 1 : 0],
    ref: { collection: 'tunnels', id },
  };
};

export const tagsOf = (crossing: Crossing | undefined): readonly number[] =>
  crossing === undefined ? [] : tagList(crossing.tags);
