import type { IpVersion } from '../reference/ip.ts';
import type { ProbeInput } from './probe.ts';

type Packet = ProbeInput['packet'];
type IpPacket = Omit<Extract<Packet, { kind: 'ip' }>, 'kind' | 'version' | 'packetBytes'>;

/** Where a preset's frame goes: to one host, which the user chooses, or to an address that the protocol prescribes. */
export type PresetTarget = 'host' | Exclude<ProbeInput['destination'], { kind: 'host' }>;

interface PresetBasics {
  readonly id: string;
  readonly name: string;
  /** What one learns from it. */
  readonly shows: string;
  readonly source: string;
}
interface IpPreset extends PresetBasics {
  readonly packet: IpPacket;
  /** By IP version that the protocol has; bytes after the IP header and its options, or as much as the source may send. */
  readonly versions: {
    readonly [version in IpVersion]?: {
      readonly target: PresetTarget;
      readonly bytes: number | 'full-size';
      readonly optionBytes?: number;
      readonly protocol?: number;
    };
  };
}
interface NonIpPreset extends PresetBasics {
  readonly target: PresetTarget;
  readonly frame: Omit<Extract<Packet, { kind: 'non-ip' }>, 'kind' | 'frameBytes'>;
  readonly frameBytes: number | 'full-size';
}
export type ProbePreset = IpPreset | NonIpPreset;

const group = (address: string): PresetTarget => ({ kind: 'multicast', group: address });
const reserved = (octet: string): PresetTarget => ({ kind: 'reserved', octet });
const layer2Group = (mac: string): PresetTarget => ({ kind: 'layer-2-group', mac });

/** What people try first, and what breaks first on a stretched segment. */
export const probePresets: readonly ProbePreset[] = [
  {
    id: 'ping',
    name: 'Ping',
    shows: 'Whether small packets pass at all.',
    // Common practice: 56 bytes of data behind the 8 of the echo header.
    source: 'RFC 792',
    packet: {},
    versions: {
      ipv4: { target: 'host', bytes: 64, protocol: 1 },
      ipv6: { target: 'host', bytes: 64, protocol: 58 },
    },
  },
  {
    id: 'tcp-full-size',
    name: 'Full-size TCP',
    shows: 'Whether bulk transfers pass; small packets say nothing about them.',
    // RFC 1191 section 3: TCP sets DF to find out the path's MTU.
    source: 'RFC 1191 section 3',
    packet: { dontFragment: true, destinationPort: 443 },
    versions: {
      ipv4: { target: 'host', bytes: 'full-size', protocol: 6 },
      ipv6: { target: 'host', bytes: 'full-size', protocol: 6 },
    },
  },
  {
    id: 'certificate-exchange',
    name: 'Certificate exchange over UDP',
    shows: 'Whether datagrams pass that their sender cuts into pieces.',
    // RFC 2865 section 3: a RADIUS packet has up to 4096 bytes; the UDP header comes before it.
    source: 'RFC 2865 section 3',
    packet: { destinationPort: 1812 },
    versions: {
      ipv4: { target: 'host', bytes: 4104, protocol: 17 },
      ipv6: { target: 'host', bytes: 4104, protocol: 17 },
    },
  },
  {
    id: 'ospf',
    name: 'OSPF hello',
    shows: 'Whether routers at the sites find each other.',
    // RFC 2328 appendix A.3: header of 24 bytes, hello of 20, one neighbour; RFC 5340 appendix A.3: 16, 20 and 4.
    source: 'RFC 2328 appendix A.1',
    packet: { hopLimit: 1 },
    versions: {
      ipv4: { target: group('224.0.0.5'), bytes: 48, protocol: 89 },
      ipv6: { target: group('ff02::5'), bytes: 40, protocol: 89 },
    },
  },
  {
    id: 'pim',
    name: 'PIM hello',
    shows: 'Whether multicast routers find each other.',
    // RFC 7761 section 4.9: header of 4 bytes; its options, 30 bytes here, vary.
    source: 'RFC 7761 section 4.9',
    packet: { hopLimit: 1 },
    versions: {
      ipv4: { target: group('224.0.0.13'), bytes: 34, protocol: 103 },
      ipv6: { target: group('ff02::d'), bytes: 34, protocol: 103 },
    },
  },
  {
    id: 'igmp',
    name: 'IGMP report',
    shows: 'Whether the far side hears who wants a group.',
    // RFC 3376 section 4: router alert option of 4 bytes, TTL 1; a report of one group has 16.
    source: 'RFC 3376 section 4',
    packet: { hopLimit: 1 },
    versions: { ipv4: { target: group('224.0.0.22'), bytes: 16, optionBytes: 4, protocol: 2 } },
  },
  {
    id: 'vrrp',
    name: 'VRRP advertisement',
    shows: 'Whether a standby gateway hears the active one; if not, both are active.',
    // RFC 9568 section 5.1.1.3: sent with 255 and dropped with less; section 5.2: 8 bytes and one address.
    source: 'RFC 9568 section 5.1.1.3',
    packet: { hopLimit: 255, requiredHopLimit: 255 },
    versions: {
      ipv4: { target: group('224.0.0.18'), bytes: 12, protocol: 112 },
      ipv6: { target: group('ff02::12'), bytes: 24, protocol: 112 },
    },
  },
  {
    id: 'bfd',
    name: 'BFD',
    shows: 'Whether two routers can watch each other.',
    // RFC 5881 section 4: UDP port 3784; section 5: 255 or dropped; RFC 5880 section 4.1: 24 bytes.
    source: 'RFC 5881 section 5',
    packet: { hopLimit: 255, requiredHopLimit: 255, sourcePort: 49_152, destinationPort: 3784 },
    versions: {
      ipv4: { target: 'host', bytes: 32, protocol: 17 },
      ipv6: { target: 'host', bytes: 32, protocol: 17 },
    },
  },
  {
    id: 'arp',
    name: 'ARP request',
    shows: 'Who hears a broadcast, and how often.',
    source: 'RFC 826',
    target: { kind: 'broadcast' },
    frame: { etherType: 0x0806 },
    frameBytes: 64,
  },
  {
    id: 'dhcp',
    name: 'DHCP discover',
    shows: 'Which servers a new host may be answered by.',
    // RFC 2131 section 4.1: UDP from port 68 to 67; RFC 1542 section 2.1: 300 bytes at least.
    source: 'RFC 2131 section 4.1',
    packet: { sourcePort: 68, destinationPort: 67 },
    versions: {
      ipv4: { target: { kind: 'broadcast' }, bytes: 308, protocol: 17 },
    },
  },
  {
    id: 'stp',
    name: 'Spanning tree',
    shows: 'Whether bridges at the sites see each other’s BPDUs.',
    source: 'IEEE 802.1Q-2022 table 8-1',
    target: reserved('00'),
    frame: {},
    frameBytes: 64,
  },
  {
    id: 'lacp',
    name: 'LACP',
    shows: 'Whether an aggregate across the overlay would form.',
    // IEEE 802.1AX, from memory: 110 bytes in a frame of 128; EtherType by RFC 8519 appendix A.3.
    source: 'IEEE 802.1Q-2022 table 8-1',
    target: reserved('02'),
    frame: { etherType: 0x8809 },
    frameBytes: 128,
  },
  {
    id: 'lldp',
    name: 'LLDP',
    shows: 'Whose neighbours are displayed; usually only the own device.',
    // EtherType by RFC 7042 appendix B; the length is a usual one, common practice, no source.
    source: 'IEEE 802.1Q-2022 table 8-1',
    target: reserved('0e'),
    frame: { etherType: 0x88cc },
    frameBytes: 160,
  },
  {
    id: 'ptp-ethernet',
    name: 'PTP over Ethernet, sync',
    shows: 'Whether time is told across; how well is another matter.',
    // IEEE 1588 annex F, from memory: 01-1B-19-00-00-00, EtherType 0x88F7, 44 bytes.
    source: 'IEEE 1588, from memory',
    target: layer2Group('01-1B-19-00-00-00'),
    frame: { etherType: 0x88f7 },
    frameBytes: 64,
  },
  {
    id: 'ptp-peer-delay',
    name: 'PTP over Ethernet, peer delay',
    shows: 'Why clocks that measure hop by hop don’t work across an overlay.',
    // IEEE 1588 annex F, from memory: 54 bytes to the nearest bridge.
    source: 'IEEE 802.1Q-2022 table 8-1',
    target: reserved('0e'),
    frame: { etherType: 0x88f7 },
    frameBytes: 72,
  },
  {
    id: 'ptp-udp',
    name: 'PTP over UDP, sync',
    shows: 'Whether time is told across; how well is another matter.',
    // IEEE 1588 annexes D and E, from memory: UDP port 319, 44 bytes, 224.0.1.129 and ff0x::181.
    source: 'IEEE 1588, from memory',
    packet: { hopLimit: 1, sourcePort: 319, destinationPort: 319 },
    versions: {
      ipv4: { target: group('224.0.1.129'), bytes: 52, protocol: 17 },
      ipv6: { target: group('ff02::181'), bytes: 52, protocol: 17 },
    },
  },
  {
    id: 'is-is',
    name: 'IS-IS hello',
    shows: 'Whether a padded hello fits: without it there is no adjacency.',
    // RFC 3719 section 6: hellos are padded to the interface's MTU; groups by the registration list.
    source: 'RFC 3719 section 6',
    target: layer2Group('01-80-C2-00-00-14'),
    frame: {},
    frameBytes: 'full-size',
  },
];
