import type { Barrier } from '../flood/barrier.ts';
import type { FloodStep } from '../flood/storm.ts';
import type { ElementRef } from '../model/design.ts';
import type { Id } from '../model/scalars.ts';
import type { AssociationReason, TunnelReason } from '../network/can-come-up.ts';
import type { Fragment } from '../wire/fragments-of.ts';
import type { Layer } from '../wire/layer.ts';

/** What a device or a sender decided on a hop; `words` says it to a person. */
export type DecisionFact =
  | { readonly code: 'sent'; readonly by: ElementRef }
  /** A frame of the source's other segment is followed all the same. */
  | { readonly code: 'other-segment'; readonly from: Id; readonly to: Id }
  | { readonly code: 'cut-by-source'; readonly device: Id; readonly mtuBytes: number }
  | { readonly code: 'put-in-vlan'; readonly device: Id; readonly vlan: number }
  | {
      readonly code: 'tag-removed' | 'tag-kept' | 'tag-translated';
      readonly device: Id;
      readonly vlan: number;
      readonly inside: number;
    }
  | { readonly code: 'tag-stripped'; readonly tunnel: Id; readonly vlan: number }
  | {
      readonly code: 'flooded';
      readonly device: Id;
      readonly forwarder?: Id;
      readonly because: 'broadcast' | 'multicast' | 'not-learned' | 'one-to-one';
    }
  /** The destination was learned behind one port or circuit; `moving`: behind several, of which the nearest counts. */
  | { readonly code: 'learned'; readonly device: Id; readonly behind: ElementRef; readonly moving: boolean }
  | { readonly code: 'permitted'; readonly forwarder: Id; readonly rule: Id }
  | {
      readonly code: 'hop-limit-lowered';
      readonly device: Id;
      readonly hopLimit: number;
    }
  | {
      readonly code: 'encapsulated';
      readonly tunnel: Id;
      readonly vni?: number;
      readonly association?: Id;
      readonly packetBytes?: number;
    }
  | {
      readonly code: 'fragmented';
      readonly tunnel: Id;
      readonly by: 'gateway' | 'underway';
      readonly because: FragmentCause;
      readonly pieces: number;
    };

/** What lets an outermost packet be cut: its DF is clear, or a setting or a make's habit has the DF passed over. */
export type FragmentCause = 'df-clear' | 'ignore-df' | 'profile';
export type Decision = DecisionFact & { readonly words: string };

/** Why a copy of the frame ended. */
export type DropReason =
  | Exclude<Barrier, { readonly code: 'tunnel-down' | 'filter' | 'not-joined' | 'other-access-vlan' }>
  | { readonly code: 'nowhere'; readonly device: Id }
  /** The destination is behind the port that the frame came in on. */
  | { readonly code: 'same-port'; readonly device: Id }
  | { readonly code: 'not-addressed'; readonly device: Id }
  | {
      readonly code: 'no-such-vni';
      readonly tunnel: Id;
      readonly device: Id;
      readonly sent: number;
      readonly has: number;
    }
  | {
      readonly code: 'no-such-udp-port';
      readonly tunnel: Id;
      readonly device: Id;
      readonly sent: number;
      readonly has: number;
    }
  | {
      readonly code: 'association-down';
      readonly tunnel: Id;
      readonly association: Id;
      readonly reasons: readonly AssociationReason[];
    }
  | { readonly code: 'tunnel-down'; readonly tunnel: Id; readonly reasons: readonly TunnelReason[] }
  | {
      readonly code: 'transport-filters';
      readonly tunnel: Id;
      readonly transport: Id;
      readonly filter: 'udp-4789' | 'fragments';
    }
  | {
      readonly code: 'filter';
      readonly device: Id;
      readonly forwarder: Id;
      readonly direction: 'to-tunnel' | 'from-tunnel';
      /** The rule that denies it; absent where no rule permits it and the filter drops by default. */
      readonly rule?: Id;
    }
  | { readonly code: 'multicast-dropped'; readonly device: Id; readonly forwarder: Id }
  /** The outermost packet is longer than the path carries and may not be cut. */
  | {
      readonly code: 'oversize';
      readonly tunnel: Id;
      readonly device: Id;
      /** At the gateway that encapsulates, or at a router underway. */
      readonly where: 'gateway' | 'underway';
      readonly packetBytes: number;
      readonly mtuBytes: number;
      /** Largest IP packet of a host that would have passed; 0 where none does. */
      readonly largestBytes: number;
      /** What the sender hears of it. */
      readonly answer: 'none' | 'icmp';
      readonly because: 'outer-ipv6' | 'df-set';
      /** Whose DF it is: of the packet that ESP or VXLAN makes, or of the host's own, which some gateways mind. */
      readonly df?: 'esp' | 'vxlan' | 'host';
    }
  /** Longer than a port of layer 2 carries; nobody answers. */
  | {
      readonly code: 'oversize-frame';
      readonly device: Id;
      readonly port: Id;
      readonly packetBytes: number;
      readonly mtuBytes: number;
    }
  /** The sender itself refuses to send it whole. */
  | {
      readonly code: 'exceeds-own-mtu';
      readonly device: Id;
      readonly packetBytes: number;
      readonly mtuBytes: number;
    }
  | { readonly code: 'hop-limit-zero'; readonly device: Id; readonly forwarder: Id }
  | {
      readonly code: 'hop-limit-required';
      readonly device: Id;
      readonly hopLimit: number;
      readonly requires: number;
    }
  | {
      readonly code: 'reserved-group';
      readonly device: Id;
      readonly octet: string;
      readonly says: 'profile' | 'standard';
    };

/** The check that would have told, and what it is about; `key` names the finding where the design's findings are at hand. */
export interface Explanation {
  readonly rule: string;
  readonly elements: readonly ElementRef[];
  readonly key?: string;
}

export type Verdict =
  | { readonly code: 'delivered'; readonly to: ElementRef; readonly words: string }
  /** It arrives, in pieces: cut on hop `at`. */
  | {
      readonly code: 'fragmented';
      readonly to: ElementRef;
      readonly at: number;
      readonly pieces: readonly Fragment[];
      readonly words: string;
    }
  | {
      readonly code: 'dropped';
      readonly reason: DropReason;
      /** Redundancy, separation and the standards want it so; nothing is amiss with this copy. */
      readonly byDesign: boolean;
      readonly words: string;
      readonly explains?: readonly Explanation[];
    }
  /** The copy takes a way again that hop `sameAs` took, and so without end; `cycle` where that hop is its own ancestor. */
  | {
      readonly code: 'circulating';
      readonly sameAs: number;
      readonly cycle?: readonly FloodStep[];
      readonly words: string;
      readonly explains?: readonly Explanation[];
    }
  /** One more copy on a way that is followed on hop `sameAs`, left out because there are so many. */
  | { readonly code: 'repeats'; readonly sameAs: number; readonly words: string };

/** The bytes of a hop, outermost packet beside the pipe that it has to fit. */
export interface HopWire {
  readonly layers: readonly Layer[];
  readonly outerIpPacketBytes: number;
  /** Ethernet header to FCS. */
  readonly frameBytes: number;
  /** What the outermost packet may have; absent where it isn't known. */
  readonly mtuBytes?: number;
}

/** One hop of one copy. */
export interface TraceStep {
  /** Place in `Trace.steps`. */
  readonly index: number;
  /** The hop before; absent for the source. */
  readonly parent?: number;
  readonly from?: ElementRef;
  readonly to?: ElementRef;
  /** What it crosses: a cable, or a tunnel with its association, landings and transport. */
  readonly elements: readonly ElementRef[];
  /** Absent for the source. */
  readonly crossing?: FloodStep;
  /** VLAN tags on that wire, outermost first; for a tunnel those of the frame inside. */
  readonly tags: readonly number[];
  readonly hopLimit?: number;
  readonly decisions: readonly Decision[];
  /** Absent where nothing is sent, or the bytes aren't known. */
  readonly wire?: HopWire;
  /** Into which packets the outermost one (or, at the source, the host's) is cut on this hop. */
  readonly pieces?: readonly Fragment[];
  /** Present exactly on leaves. */
  readonly verdict?: Verdict;
}

export interface TraceDelivery {
  /** A host; a bridge where it is the one meant, as for the frames of spanning tree. */
  readonly device: Id;
  readonly copies: number | 'endless';
  /** Hops on which a copy arrives. */
  readonly steps: readonly number[];
}

/** What a storm does to the number of copies underway. */
export interface TraceStorm {
  readonly cycle: readonly FloodStep[];
  readonly hopsPerRound: number;
  /** Copies underway after each round that was counted; the first entry is the start of the first round. */
  readonly copiesByRound: readonly number[];
  readonly growth: 'circulates' | 'multiplies';
  readonly explains?: readonly Explanation[];
}

/** Something the design doesn't say, how it was taken, and what that means. */
export interface Assumption {
  readonly code:
    | 'outer-df'
    | 'esp-df'
    | 'oversize-df'
    | 'ignore-df'
    | 'multicast-ttl'
    | 'reserved-group'
    | 'reassembly'
    | 'mtu-unknown'
    | 'bytes-unknown'
    | 'inner-tags'
    | 'snooping'
    | 'address-unknown';
  readonly element: ElementRef;
  readonly words: string;
}

/** Everything that happens to one frame. */
export interface Trace {
  /** In order of distance from the source, which is the first. */
  readonly steps: readonly TraceStep[];
  /** In order of id. */
  readonly deliveries: readonly TraceDelivery[];
  readonly storm?: TraceStorm;
  readonly assumptions: readonly Assumption[];
  readonly words: string;
}
