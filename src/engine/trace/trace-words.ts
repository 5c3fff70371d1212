import type { ElementRef } from '../model/design.ts';
import type { AssociationReason, TunnelReason } from '../network/can-come-up.ts';
import type { DesignFacts } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { reservedGroupNames } from './reserved-groups.ts';
import type { DecisionFact, DropReason } from './trace.ts';

const associationWords: { readonly [code in AssociationReason['code']]: string } = {
  'no-path': 'no transport joins its ends',
  'ike-versions-differ': 'its ends speak different versions of IKE',
  'authentication-differs': 'its ends authenticate by different methods',
  'proposals-differ': 'its proposals have nothing in common',
  'nobody-starts': 'neither end starts it',
  'both-dynamic': 'neither end knows the other’s address',
  'both-behind-nat': 'both ends are behind NAT',
  'neither-reachable': 'neither end can be reached',
  'wrong-initiator': 'the end that would have to start only answers',
  'transport-filters': 'the transport filters what it needs',
};
const tunnelWords: { readonly [code in TunnelReason['code']]: string } = {
  'no-path': 'no transport joins its ends',
  'transport-filters': 'the transport filters what it needs',
  'association-down': 'its association can’t come up',
  'ends-off-association': 'its ends aren’t those of its association',
  'ends-on-one-device': 'both its ends are on one device',
  'families-differ': 'its endpoints share no address family',
  'vni-mismatch': 'its VNIs differ',
  'udp-port-mismatch': 'its UDP ports differ',
  'selectors-miss': 'the selectors of its association leave its endpoints out',
  'endpoint-on-standby': 'an endpoint of it belongs to the member that stands by',
};

const unique = (words: readonly string[]): string => [...new Set(words)].join('; ');
const tagWords = (vlan: number): string => (vlan === 0 ? 'untagged frames' : `frames with tag ${vlan}`);

/** Names of a design's elements, as sentences have them. */
export interface Names {
  readonly device: (id: string) => string;
  readonly port: (device: string, port: string) => string;
  readonly tunnel: (id: string) => string;
  readonly forwarder: (id: string) => string;
  readonly element: (ref: ElementRef) => string;
}
export const namesIn = (design: DesignFacts): Names => {
  const device = (id: string): string => entryOf(design.devices, id).name;
  const port = (id: string, key: string): string => {
    const entry = entryOf(entryOf(design.devices, id).ports, key);
    return `${entry.name ?? `port ${entry.number}`} of ${device(id)}`;
  };
  const tunnel = (id: string): string => entryOf(design.tunnels, id).name;
  const forwarder = (id: string): string => {
    const entry = entryOf(design.forwarders, id);
    return `${entry.name ?? entry.kind} of ${device(entry.device)}`;
  };
  return {
    device,
    port,
    tunnel,
    forwarder,
    element: (ref) =>
      ref.collection === 'tunnels'
        ? tunnel(ref.id)
        : ref.collection === 'devices'
          ? ref.port === undefined
            ? device(ref.id)
            : port(ref.id, ref.port)
          : ref.id,
  };
};

const dfOwners = { esp: 'ESP', vxlan: 'VXLAN', host: 'host’s' } as const;

const oversizeWords = (names: Names, reason: Extract<DropReason, { readonly code: 'oversize' }>): string => {
  const { packetBytes, mtuBytes, largestBytes, where, answer, because, df } = reason;
  const rule =
    because === 'outer-ipv6'
      ? 'the outermost packet is IPv6, which nobody cuts underway'
      : `the DF bit of the ${dfOwners[df ?? 'vxlan']} packet forbids to cut it`;
  const told =
    answer === 'icmp' ? `the sender is told by ICMP that ${largestBytes} would do` : 'nobody is told';
  return `${packetBytes} bytes don’t fit the ${mtuBytes} ${where === 'gateway' ? `at the WAN port of ${names.device(reason.device)}` : 'of the way there'}: ${rule}, and ${told}; ${largestBytes === 0 ? 'no packet would fit' : `a host’s packets of up to ${largestBytes} bytes would`}`;
};

/** Why a copy ended, as a sentence without its stop. */
export const reasonWords = (names: Names, reason: DropReason): string => {
  switch (reason.code) {
    case 'not-cabled':
      return `${names.device(reason.device)} is not cabled`;
    case 'port-shut':
      return `The cable has an end in a port that is shut, seen from ${names.port(reason.device, reason.port)}`;
    case 'standby':
      return `${names.port(reason.device, reason.port)} is on the member that stands by; it keeps silent`;
    case 'vlan-not-allowed':
      return `${names.port(reason.device, reason.port)} ${reason.direction === 'in' ? 'lets in' : 'lets out'} no ${tagWords(reason.vlan)}`;
    case 'tag-at-access-port':
      return `${names.port(reason.device, reason.port)} is an access port and drops ${tagWords(reason.vlan)}`;
    case 'no-native-vlan':
      return `${names.port(reason.device, reason.port)} is a trunk without a native VLAN and drops untagged frames`;
    case 'no-circuit':
      return `No forwarder of ${names.device(reason.device)} takes ${tagWords(reason.vlan)} at ${names.port(reason.device, reason.port)}`;
    case 'tag-not-carried':
      return `A circuit of ${names.forwarder(reason.forwarder)} can’t send ${tagWords(reason.vlan)}`;
    case 'isolation':
      return `Isolation group ${reason.group} of ${names.forwarder(reason.forwarder)} keeps these circuits apart`;
    case 'split-horizon':
      return `${names.forwarder(reason.forwarder)} sends nothing from one tunnel of a VNI to another`;
    case 'spanning-tree':
      return `Spanning tree blocks ${reason.port === undefined ? names.tunnel(reason.tunnel!) : names.port(reason.device, reason.port)}`;
    case 'tunnel-unclaimed':
      return `No forwarder of ${names.device(reason.device)} holds ${names.tunnel(reason.tunnel)}`;
    case 'tag-discarded':
      return `${names.device(reason.device)} discards ${tagWords(reason.vlan)} that come out of ${names.tunnel(reason.tunnel)}`;
    case 'host-tag':
      return `${names.device(reason.device)} takes no ${tagWords(reason.vlan)}`;
    case 'nowhere':
      return `${names.device(reason.device)} has no other way out for it`;
    case 'same-port':
      return `${names.device(reason.device)} has learned the destination behind the port that the frame came in on`;
    case 'not-addressed':
      return `${names.device(reason.device)} isn’t the one it is addressed to and ignores it`;
    case 'no-such-vni':
      return `${names.device(reason.device)} has no VNI ${reason.sent} for ${names.tunnel(reason.tunnel)}; it expects ${reason.has}. Nobody is told`;
    case 'no-such-udp-port':
      return `${names.device(reason.device)} expects VXLAN on UDP port ${reason.has}, not ${reason.sent}`;
    case 'association-down':
      return `The association of ${names.tunnel(reason.tunnel)} can’t come up: ${unique(reason.reasons.map(({ code }) => associationWords[code]))}`;
    case 'tunnel-down':
      return `${names.tunnel(reason.tunnel)} can’t carry anything: ${unique(reason.reasons.map(({ code }) => tunnelWords[code]))}`;
    case 'transport-filters':
      return reason.filter === 'fragments'
        ? 'The transport drops fragments'
        : 'The transport drops UDP to port 4789';
    case 'filter':
      return reason.rule === undefined
        ? `The filter of ${names.forwarder(reason.forwarder)} permits it by no rule and drops it by default`
        : `A rule of ${names.forwarder(reason.forwarder)} denies it`;
    case 'multicast-dropped':
      return `${names.forwarder(reason.forwarder)} is set to drop multicast`;
    case 'oversize':
      return oversizeWords(names, reason);
    case 'oversize-frame':
      return `A packet of ${reason.packetBytes} bytes exceeds the ${reason.mtuBytes} of ${names.port(reason.device, reason.port)}; a bridge drops it without a word`;
    case 'exceeds-own-mtu':
      return `${names.device(reason.device)} refuses to send ${reason.packetBytes} bytes whole through an MTU of ${reason.mtuBytes}, and may not cut them`;
    case 'hop-limit-zero':
      return `${names.forwarder(reason.forwarder)} lowers the hop limit to zero, though it only bridges`;
    case 'hop-limit-required':
      return `${names.device(reason.device)} accepts a hop limit of ${reason.requires} alone and gets ${reason.hopLimit}`;
    case 'reserved-group':
      return `${names.device(reason.device)} forwards nothing to 01-80-C2-00-00-${reason.octet.toUpperCase()}${reservedGroupNames[reason.octet] === undefined ? '' : ` (${reservedGroupNames[reason.octet]})`}${reason.says === 'profile' ? ', as its profile says' : ', as the standard has it'}`;
  }
};

const floodWords = {
  broadcast: 'floods the broadcast',
  multicast: 'floods the multicast',
  'not-learned': 'hasn’t learned the destination and floods it',
  'one-to-one': 'passes it straight through',
} as const;
const cutWords = {
  'df-clear': 'its DF bit is clear',
  'ignore-df': 'the gateway is set to ignore DF',
  profile: 'the gateway cuts in spite of DF',
} as const;

/** What was decided, as a sentence without its stop. */
export const decisionWords = (names: Names, fact: DecisionFact): string => {
  switch (fact.code) {
    case 'sent':
      return `${names.element(fact.by)} sends it`;
    case 'other-segment':
      return 'Source and destination are on different segments: a host would send this to its router. It is followed as if they shared one';
    case 'cut-by-source':
      return `${names.device(fact.device)} cuts it itself, at ${fact.mtuBytes} bytes; the longest piece is followed`;
    case 'put-in-vlan':
      return `${names.device(fact.device)} puts it into VLAN ${fact.vlan}`;
    case 'tag-removed':
      return `${names.device(fact.device)} takes tag ${fact.vlan} off`;
    case 'tag-kept':
      return `${names.device(fact.device)} keeps tag ${fact.vlan}`;
    case 'tag-translated':
      return `${names.device(fact.device)} makes VLAN ${fact.vlan} ${fact.inside}`;
    case 'tag-stripped':
      return `Tag ${fact.vlan} is taken off before ${names.tunnel(fact.tunnel)}`;
    case 'flooded':
      return `${fact.forwarder === undefined ? names.device(fact.device) : names.forwarder(fact.forwarder)} ${floodWords[fact.because]}`;
    case 'learned':
      return `${names.device(fact.device)} has learned the destination behind ${names.element(fact.behind)}${fact.moving ? ', and behind others: the entry moves to and fro' : ''}`;
    case 'permitted':
      return `The filter of ${names.forwarder(fact.forwarder)} permits it`;
    case 'hop-limit-lowered':
      return `${names.device(fact.device)} lowers the hop limit to ${fact.hopLimit}`;
    case 'encapsulated':
      return `Into VXLAN${fact.vni === undefined ? '' : `, VNI ${fact.vni}`}${fact.association === undefined ? '' : ', and ESP'}${fact.packetBytes === undefined ? '' : `: ${fact.packetBytes} bytes`}`;
    case 'fragmented':
      return `Cut into ${fact.pieces} pieces ${fact.by === 'gateway' ? 'by the gateway' : 'underway'}: ${cutWords[fact.because]}`;
  }
};
