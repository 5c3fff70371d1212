import type { Entry } from '../model/design.ts';
import type { Protocol } from '../model/intent.ts';
import { inRankOrder } from '../model/rank.ts';
import { parsePrefix } from '../network/parse-prefix.ts';

export type PolicyRule = NonNullable<Entry<'forwarders'>['policy']>[string];
export type Direction = 'to-tunnel' | 'from-tunnel';
export const directions = ['to-tunnel', 'from-tunnel'] as const satisfies readonly Direction[];

/** Frames of one kind, as far as a filter can tell them from others. */
export interface FrameProbe {
  /** 0 for frames that have a length in its place (IEEE 802.3 with LLC). */
  readonly etherType: number;
  readonly sentTo: 'one' | 'group' | 'all';
  /** For IP: the prefix of addresses that they go to, where it is known. */
  readonly destination?: string;
  readonly protocol?: number;
}

// RFC 826, RFC 894, RFC 2464 section 3.
const arp = 0x0806;
const ipv4 = 0x0800;
const ipv6 = 0x86dd;
// RFC 768, RFC 4443 section 1.
const udp = 17;
const icmp6 = 58;

const unicast = (etherType: number): FrameProbe => ({ etherType, sentTo: 'one' });
const group = (destination: string, protocol?: number): FrameProbe => ({
  etherType: destination.includes(':') ? ipv6 : ipv4,
  sentTo: 'group',
  destination,
  ...(protocol === undefined ? {} : { protocol }),
});

export const arpFrames: readonly FrameProbe[] = [
  { etherType: arp, sentTo: 'all' },
  { etherType: arp, sentTo: 'one' },
];
// RFC 4861 section 2.3: questions go to the solicited-node group of the address asked for, answers to the asker.
export const discoveryFrames: readonly FrameProbe[] = [
  group('ff02::1:ff00:0/104', icmp6),
  { etherType: ipv6, sentTo: 'one', protocol: icmp6 },
];

interface Carried {
  readonly name: string;
  /** Any one of these ways of sending is enough; each is a list of frames that must all pass. */
  readonly ways: readonly (readonly FrameProbe[])[];
  /** A stream flows one way; everything else talks both ways. */
  readonly isStream?: true;
  /** The narrowest rule that lets it pass, where one rule can. */
  readonly permit?: Pick<PolicyRule, 'frames'> & Partial<PolicyRule>;
}

const multicastV4 = '224.0.0.0/4'; // RFC 5771 section 3, from memory
const multicastV6 = 'ff00::/8'; // RFC 4291 section 2.7

/** What a segment's protocols look like on the wire. */
export const protocolFrames: { readonly [P in Protocol]: Carried } = {
  ipv4: { name: 'IPv4', ways: [[unicast(ipv4)]], permit: { frames: 'ipv4' } },
  ipv6: { name: 'IPv6', ways: [[unicast(ipv6)]], permit: { frames: 'ipv6' } },
  multicast: {
    name: 'multicast',
    ways: [[group(multicastV4)], [group(multicastV6)]],
    isStream: true,
    permit: { frames: 'multicast' },
  },
  // RFC 3376 section 4: IP protocol 2. RFC 3810 section 5: MLD is ICMPv6, to groups of ff02::/16.
  igmp: {
    name: 'IGMP',
    ways: [[group(multicastV4, 2)], [group('ff02::/16', icmp6)]],
    permit: { frames: 'ipv4', protocol: 2 },
  },
  // RFC 2328 appendix A.1; RFC 5340 section 2.9, from memory.
  ospf: {
    name: 'OSPF',
    ways: [[group('224.0.0.5/32', 89)], [group('ff02::5/128', 89)]],
    permit: { frames: 'ipv4', protocol: 89 },
  },
  // RFC 1142 section 5: LLC frames to the groups 01-80-C2-00-00-14 and -15, from memory.
  'is-is': {
    name: 'IS-IS',
    ways: [[{ etherType: 0, sentTo: 'group' }]],
    permit: { frames: 'multicast' },
  },
  // RFC 7761 section 4.9.
  pim: {
    name: 'PIM',
    ways: [[group('224.0.0.13/32', 103)], [group('ff02::d/128', 103)]],
    permit: { frames: 'ipv4', protocol: 103 },
  },
  // RFC 9568 section 5.1.1 and section 5.1.2.
  vrrp: {
    name: 'VRRP',
    ways: [[group('224.0.0.18/32', 112)], [group('ff02::12/128', 112)]],
    permit: { frames: 'ipv4', protocol: 112 },
  },
  // RFC 5881 section 4: UDP between the two neighbours.
  bfd: {
    name: 'BFD',
    ways: [
      [{ etherType: ipv4, sentTo: 'one', protocol: udp }],
      [{ etherType: ipv6, sentTo: 'one', protocol: udp }],
    ],
    permit: { frames: 'ipv4', protocol: udp },
  },
  // RFC 2131 section 4.1: to everybody as long as the client has no address. RFC 8415 section 7.1 for IPv6, from memory.
  dhcp: {
    name: 'DHCP',
    ways: [
      [{ etherType: ipv4, sentTo: 'all', destination: '255.255.255.255/32', protocol: udp }],
      [group('ff02::1:2/128', udp)],
    ],
    permit: { frames: 'ipv4', destinations: ['255.255.255.255/32'], protocol: udp },
  },
  // IEEE 802.1Q: LLC frames to 01-80-C2-00-00-00.
  'spanning-tree': {
    name: 'spanning tree',
    ways: [[{ etherType: 0, sentTo: 'group' }]],
    permit: { frames: 'multicast' },
  },
  // EtherTypes of IEEE 802.1AX, 802.1AB, 802.1X, 1588 and 802.1Q clause 20, from memory.
  lacp: {
    name: 'LACP',
    ways: [[{ etherType: 0x8809, sentTo: 'group' }]],
    permit: { frames: 'ethertype', ethertype: 0x8809 },
  },
  lldp: {
    name: 'LLDP',
    ways: [[{ etherType: 0x88cc, sentTo: 'group' }]],
    permit: { frames: 'ethertype', ethertype: 0x88cc },
  },
  eapol: {
    name: 'EAPOL',
    ways: [[{ etherType: 0x888e, sentTo: 'group' }]],
    permit: { frames: 'ethertype', ethertype: 0x888e },
  },
  ptp: {
    name: 'PTP',
    // IEEE 1588 annexes D to F: UDP to 224.0.1.129 or ff0x::181, or Ethernet alone; from memory.
    ways: [
      [{ etherType: 0x88f7, sentTo: 'group' }],
      [group('224.0.1.129/32', udp)],
      [group('ff00::181/16', udp)],
    ],
    permit: { frames: 'ethertype', ethertype: 0x88f7 },
  },
  cfm: {
    name: 'CFM',
    ways: [[{ etherType: 0x8902, sentTo: 'group' }]],
    permit: { frames: 'ethertype', ethertype: 0x8902 },
  },
  // Several EtherTypes of several standards: a person has to know which.
  'real-time-ethernet': { name: 'real-time Ethernet', ways: [] },
};

const overlaps = (prefix: string, other: string): boolean => {
  const [mine, mineBits] = parsePrefix(prefix);
  const [far, farBits] = parsePrefix(other);
  return mine.kind() === far.kind() && mine.match([far, Math.min(mineBits, farBits)]);
};

const isFamily = (prefix: string, etherType: number): boolean =>
  prefix.includes(':') === (etherType === ipv6);

const isOfGroups = (prefix: string): boolean => {
  const [address, bits] = parsePrefix(prefix);
  const [groups, groupBits] = parsePrefix(address.kind() === 'ipv4' ? multicastV4 : multicastV6);
  return bits >= groupBits && address.match([groups, groupBits]);
};

/** Whether a rule is about some of the frames: about all of them, about a part, or about none. */
const concerns = (rule: PolicyRule, probe: FrameProbe): 'all' | 'some' | 'none' => {
  const isIp = probe.etherType === ipv4 || probe.etherType === ipv6;
  const ofKind =
    rule.frames === 'any' ||
    (rule.frames === 'arp' && probe.etherType === arp) ||
    (rule.frames === 'ipv4' && probe.etherType === ipv4) ||
    (rule.frames === 'ipv6' && probe.etherType === ipv6) ||
    (rule.frames === 'multicast' && probe.sentTo === 'group') ||
    (rule.frames === 'broadcast' && probe.sentTo === 'all') ||
    (rule.frames === 'ethertype' && (rule.ethertype === undefined || rule.ethertype === probe.etherType));
  if (!ofKind) return 'none';
  const { sources, destinations, protocol, ports } = rule;
  if (!isIp && (protocol !== undefined || ports !== undefined)) return 'none';
  if (!isIp && probe.etherType !== arp && (sources !== undefined || destinations !== undefined))
    return 'none';
  if (protocol !== undefined && probe.protocol !== undefined && protocol !== probe.protocol) return 'none';
  // Only protocols with ports can be meant by them.
  if (ports !== undefined && probe.protocol !== undefined && probe.protocol !== udp) return 'none';
  if (isIp) {
    for (const list of [sources, destinations])
      if (list !== undefined && !list.some((prefix) => isFamily(prefix, probe.etherType))) return 'none';
    if (probe.sentTo === 'one' && destinations?.every(isOfGroups) === true) return 'none';
    if (
      destinations !== undefined &&
      probe.destination !== undefined &&
      !destinations.some((prefix) => overlaps(prefix, probe.destination!))
    )
      return 'none';
  }
  const isWhole =
    sources === undefined &&
    destinations === undefined &&
    ports === undefined &&
    (protocol === undefined || probe.protocol !== undefined);
  return isWhole ? 'all' : 'some';
};

type Policy = Entry<'forwarders'>['policy'];

/** Whether a cross-connect's policy lets at least some of the frames pass in a direction. What no rule permits is dropped. */
export const passesSome = (policy: Policy, direction: Direction, probe: FrameProbe): boolean => {
  for (const [, rule] of inRankOrder(policy)) {
    if (rule.direction !== 'both' && rule.direction !== direction) continue;
    const extent = concerns(rule, probe);
    if (extent === 'none') continue;
    if (rule.action === 'permit') return true;
    // A narrow denial leaves other frames to the rules after it.
    if (extent === 'all') return false;
  }
  return false;
};

/** Whether the policy lets all frames of a list through in both directions. */
export const passesAll = (policy: Policy, probes: readonly FrameProbe[]): boolean =>
  probes.every((probe) => directions.every((direction) => passesSome(policy, direction, probe)));

// Any EtherType that is neither IP nor ARP stands for what has none of its own here.
const someOtherEtherType: FrameProbe = { etherType: 0x0600, sentTo: 'one' };

/** Whether the policy has a way through for a protocol. */
export const passesProtocol = (policy: Policy, protocol: Protocol): boolean => {
  if (protocol === 'real-time-ethernet')
    return (
      passesAll(policy, [someOtherEtherType]) ||
      Object.values(policy ?? {}).some(
        ({ action, frames, ethertype }) =>
          action === 'permit' && frames === 'ethertype' && ![arp, ipv4, ipv6].includes(ethertype ?? 0),
      )
    );
  const { ways, isStream } = protocolFrames[protocol];
  return ways.some((way) =>
    isStream
      ? directions.some((direction) => way.every((probe) => passesSome(policy, direction, probe)))
      : passesAll(policy, way),
  );
};

/** Whether the policy lets ordinary packets of a family pass in a direction. */
export const passesFamily = (policy: Policy, direction: Direction, family: 4 | 6): boolean =>
  passesSome(policy, direction, unicast(family === 4 ? ipv4 : ipv6));
