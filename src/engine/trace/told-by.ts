import type { ElementRef } from '../model/design.ts';
import type { Protocol } from '../model/intent.ts';
import type { Id } from '../model/scalars.ts';
import type { AssociationReason, TunnelReason } from '../network/can-come-up.ts';
import type { DropReason, Explanation } from './trace.ts';

/** What is known around a drop beyond the reason itself. */
export interface Surroundings {
  /** That protects the tunnel, if one does. */
  readonly association: (tunnel: Id) => Id | undefined;
  /** That the frame's source belongs to, with the protocols that it must carry. */
  readonly segment?: { readonly id: Id; readonly protocols: readonly Protocol[] };
  /** Devices that lowered the frame's hop limit on its way here. */
  readonly lowered: readonly Id[];
}
type Reason<C extends DropReason['code']> = Extract<DropReason, { readonly code: C }>;
type Tells<C extends DropReason['code']> =
  | ((reason: Reason<C>, around: Surroundings) => readonly Explanation[])
  /** No check speaks of it, and why. */
  | { readonly noRule: string };

const associationRules: { readonly [code in AssociationReason['code']]: string } = {
  'no-path': 'association-no-common-path',
  'ike-versions-differ': 'ike-version-mismatch',
  'authentication-differs': 'authentication-mismatch',
  'proposals-differ': 'association-proposals-differ',
  'nobody-starts': 'association-nobody-starts',
  'both-dynamic': 'association-both-dynamic',
  'both-behind-nat': 'association-both-behind-nat',
  'neither-reachable': 'association-neither-reachable',
  'wrong-initiator': 'association-wrong-initiator',
  'transport-filters': 'transport-filters-needed',
};
// Of an association that is down, and of numbers that differ, drops speak with codes of their own.
type OwnReason = Exclude<TunnelReason['code'], 'association-down' | 'vni-mismatch' | 'udp-port-mismatch'>;
const tunnelRules: { readonly [code in OwnReason]: string } = {
  'no-path': 'tunnel-no-common-path',
  'transport-filters': 'transport-filters-needed',
  'ends-off-association': 'tunnel-ends-off-association',
  'ends-on-one-device': 'tunnel-ends-off-association',
  'families-differ': 'tunnel-families-differ',
  'selectors-miss': 'association-selectors-miss-loopbacks',
  'endpoint-on-standby': 'endpoint-on-one-member',
};
const isOwn = (code: TunnelReason['code']): code is OwnReason => code in tunnelRules;

// IEEE 802.1Q-2022 table 8-1 and the IEEE's list of group addresses, at second hand.
const reservedProtocols: { readonly [octet: string]: Protocol } = {
  '00': 'spanning-tree',
  '02': 'lacp',
  '03': 'eapol',
  '0e': 'lldp',
};

const refs = (collection: ElementRef['collection'], ids: readonly Id[]): readonly ElementRef[] =>
  ids.map((id) => ({ collection, id }));
const ref = (collection: ElementRef['collection'], id: Id): ElementRef => ({ collection, id });
const told = (rules: readonly string[], ...elements: readonly ElementRef[]): readonly Explanation[] =>
  [...new Set(rules)].map((rule) => ({ rule, elements }));

const atForwarder = ({ forwarder, device }: { readonly forwarder: Id; readonly device: Id }) => [
  ref('forwarders', forwarder),
  ref('devices', device),
];
const vlanRules = ['vlan-missing-on-path', 'segment-hosts-parted'];
const atPort = ({ device }: { readonly device: Id }) => told(vlanRules, ref('devices', device));

/** For every way in which a frame ends: the checks that look for its cause and what their finding is about. */
export const toldBy: { readonly [C in DropReason['code']]: Tells<C> } = {
  'no-such-vni': ({ tunnel }) => told(['tunnel-vni-mismatch'], ref('tunnels', tunnel)),
  'no-such-udp-port': ({ tunnel }) => told(['tunnel-udp-port-mismatch'], ref('tunnels', tunnel)),
  'association-down': ({ association, reasons }) =>
    told(
      reasons.map(({ code }) => associationRules[code]),
      ref('associations', association),
      ...reasons.flatMap((one) =>
        one.code === 'transport-filters' ? refs('transports', [one.transport]) : [],
      ),
    ),
  'tunnel-down': ({ tunnel, reasons }, { association }) => {
    const protectedBy = association(tunnel);
    return told(
      reasons
        .map(({ code }) => code)
        .filter(isOwn)
        .map((code) => tunnelRules[code]),
      ref('tunnels', tunnel),
      ...(protectedBy === undefined ? [] : refs('associations', [protectedBy])),
    );
  },
  'transport-filters': ({ filter, tunnel, transport }) =>
    filter === 'fragments'
      ? told(['frame-exceeds-path'], ref('tunnels', tunnel))
      : told(['transport-filters-needed'], ref('transports', transport), ref('tunnels', tunnel)),
  oversize: ({ tunnel }) => told(['frame-exceeds-path'], ref('tunnels', tunnel)),
  'oversize-frame': ({ device, port }) =>
    told(['port-mtu-below-segment'], { collection: 'devices', id: device, port }),
  'exceeds-own-mtu': {
    noRule:
      'The sender was told to send more than its own port takes: that is the probe’s doing, not the design’s.',
  },
  filter: (reason) =>
    told(
      [
        'cross-connect-without-policy',
        'policy-drops-address-resolution',
        'policy-drops-protocol',
        'policy-one-direction',
      ],
      ref('forwarders', reason.forwarder),
    ),
  'multicast-dropped': ({ forwarder }) => told(['multicast-dropped-on-path'], ref('forwarders', forwarder)),
  'reserved-group': ({ octet }, { segment }) => {
    const protocol = reservedProtocols[octet];
    return protocol !== undefined && segment?.protocols.includes(protocol) === true
      ? told(['reserved-group-not-passed'], ref('segments', segment.id))
      : [];
  },
  'hop-limit-zero': ({ device }) => told(['hop-limit-lowered'], ref('devices', device)),
  'hop-limit-required': (_reason, { lowered }) => told(['hop-limit-lowered'], ...refs('devices', lowered)),
  'tag-discarded': ({ tunnel }) =>
    told(['tunnel-tag-mode-mismatch', 'segment-hosts-parted'], ref('tunnels', tunnel)),
  'tunnel-unclaimed': ({ tunnel, device }) =>
    told(['segment-hosts-parted'], ref('tunnels', tunnel), ref('devices', device)),
  isolation: (reason) => told(['isolation-missing-leg', 'segment-hosts-parted'], ...atForwarder(reason)),
  'split-horizon': (reason) =>
    told(['isolation-missing-leg', 'segment-hosts-parted'], ...atForwarder(reason)),
  'vlan-not-allowed': atPort,
  'no-native-vlan': atPort,
  'tag-at-access-port': atPort,
  'no-circuit': atPort,
  'host-tag': atPort,
  'tag-not-carried': (reason) => told(vlanRules, ...atForwarder(reason)),
  'port-shut': ({ device, port, cable }) =>
    told(['segment-hosts-parted'], { collection: 'devices', id: device, port }, ref('links', cable)),
  standby: ({ device }) => told(['host-single-homed', 'switch-single-homed'], ref('devices', device)),
  'spanning-tree': {
    noRule:
      'The tree blocks one of two ways, and the frame takes the other: a check speaks only where the hosts are parted, and then of the segment.',
  },
  'not-cabled': ({ device }) => told(['segment-hosts-parted'], ref('devices', device)),
  nowhere: {
    noRule:
      'The way ends there, as every way does: a check speaks only where it ends too early, and then of the segment that it parts.',
  },
  'same-port': {
    noRule: 'A bridge sends nothing back to where it came from; who is meant has heard it already.',
  },
  'not-addressed': {
    noRule: 'What is flooded comes to hosts that aren’t meant, too; they drop it, as they should.',
  },
};
