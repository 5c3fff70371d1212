import type { Member } from '../model/devices.ts';
import type { Id } from '../model/scalars.ts';
import type { TunnelReason } from '../network/can-come-up.ts';

/** Why a frame gets no further, and where. A `vlan` of 0 stands for an untagged frame. */
export type Barrier =
  | { readonly code: 'not-cabled'; readonly device: Id }
  | { readonly code: 'port-shut'; readonly device: Id; readonly port: Id; readonly cable: Id }
  | { readonly code: 'standby'; readonly device: Id; readonly member: Member; readonly port: Id }
  /** A trunk, or a port of a gateway, doesn't let this VLAN through. */
  | {
      readonly code: 'vlan-not-allowed';
      readonly device: Id;
      readonly port: Id;
      readonly vlan: number;
      readonly direction: 'in' | 'out';
    }
  /** An access port is in another VLAN than the one the frame is, or should be, in. */
  | {
      readonly code: 'other-access-vlan';
      readonly device: Id;
      readonly port: Id;
      readonly vlan: number;
      readonly has: number;
    }
  | { readonly code: 'tag-at-access-port'; readonly device: Id; readonly port: Id; readonly vlan: number }
  /** The frame comes untagged into a trunk that has no native VLAN. */
  | { readonly code: 'no-native-vlan'; readonly device: Id; readonly port: Id }
  /** No forwarder of the gateway claims this VLAN of this port. */
  | { readonly code: 'no-circuit'; readonly device: Id; readonly port: Id; readonly vlan: number }
  /** The forwarder has the frame with a tag that this circuit can't put on the wire. */
  | {
      readonly code: 'tag-not-carried';
      readonly device: Id;
      readonly forwarder: Id;
      readonly circuit: Id;
      readonly vlan: number;
    }
  | { readonly code: 'isolation'; readonly device: Id; readonly forwarder: Id; readonly group: string }
  | { readonly code: 'split-horizon'; readonly device: Id; readonly forwarder: Id }
  | { readonly code: 'filter'; readonly device: Id; readonly forwarder: Id }
  | { readonly code: 'spanning-tree'; readonly device: Id; readonly port?: Id; readonly tunnel?: Id }
  | { readonly code: 'tunnel-down'; readonly tunnel: Id; readonly reasons: readonly TunnelReason[] }
  /** The tunnel comes up, but no forwarder at its far end holds it. */
  | { readonly code: 'tunnel-unclaimed'; readonly tunnel: Id; readonly device: Id }
  /** The receiving end takes no tagged frames (RFC 7348 section 6.1). */
  | { readonly code: 'tag-discarded'; readonly tunnel: Id; readonly device: Id; readonly vlan: number }
  | { readonly code: 'host-tag'; readonly device: Id; readonly port: Id; readonly vlan: number }
  /** Nothing that could carry the segment leads on from here. */
  | { readonly code: 'not-joined'; readonly fromSite: Id; readonly toSite: Id };
