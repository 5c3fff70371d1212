import type { Id } from '../model/scalars.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import { ETHERNET_HEADER_BYTES } from '../reference/ethernet.ts';
import type { IpVersion } from '../reference/ip.ts';
import type { FrameFacts } from './policy-decision.ts';
import type { Probe } from './probe.ts';
import { payloadBytesOf } from './probe.ts';

/** What stays the same about the frame on all its hops. */
export interface TracedFrame {
  readonly facts: FrameFacts;
  /** What stands between the Ethernet header and the FCS: the IP packet, of several pieces the longest. */
  readonly payloadBytes: number;
  /** Absent for frames without IP. */
  readonly ipVersion?: IpVersion;
  /** Nobody underway may cut the packet inside. */
  readonly mayNotBeCut: boolean;
  /** 0 for frames without IP. */
  readonly hopLimit: number;
  readonly requiredHopLimit: number;
  readonly destination: Probe['destination'];
}

// RFC 826, RFC 894, RFC 2464 section 3.
const etherTypes = { arp: 0x0806, ipv4: 0x0800, ipv6: 0x86dd } as const;

const addressesOf = (network: Network, host: Id, version: IpVersion): readonly string[] => {
  const device = entryOf(network.design.devices, host);
  return device.kind !== 'host'
    ? []
    : (device.addresses ?? [])
        .map((prefix) => prefix.split('/')[0]!)
        .filter((address) => address.includes(':') === (version === 'ipv6'));
};

const destinationAddresses = (
  network: Network,
  { destination }: Probe,
  version: IpVersion,
): readonly string[] => {
  if (destination.kind === 'host') return addressesOf(network, destination.host, version);
  if (destination.kind === 'multicast') return [destination.group];
  // RFC 919 section 7: the limited broadcast.
  return destination.kind === 'broadcast' && version === 'ipv4' ? ['255.255.255.255'] : [];
};

const factsOf = (network: Network, probe: Probe): FrameFacts => {
  const { packet, source, destination } = probe;
  const cast =
    destination.kind === 'host' ? 'unicast' : destination.kind === 'broadcast' ? 'broadcast' : 'multicast';
  const version = packet.kind === 'ip' ? packet.version : 'ipv4';
  const kind =
    packet.kind === 'ip'
      ? packet.version
      : ((['arp', 'ipv4', 'ipv6'] as const).find((one) => etherTypes[one] === packet.etherType) ?? 'other');
  const etherType = packet.kind === 'ip' ? etherTypes[packet.version] : packet.etherType;
  return {
    kind,
    cast,
    ...(etherType === undefined ? {} : { etherType }),
    ...(packet.kind === 'ip' && packet.protocol !== undefined ? { protocol: packet.protocol } : {}),
    ports:
      packet.kind === 'ip'
        ? [packet.sourcePort, packet.destinationPort].filter((port) => port !== undefined)
        : [],
    sources: 'host' in source ? addressesOf(network, source.host, version) : [],
    // What an ARP request asks for isn't part of a probe that goes to all.
    destinations: kind === 'arp' && cast !== 'unicast' ? [] : destinationAddresses(network, probe, version),
  };
};

/** The frame of a probe; `payloadBytes` where its sender has cut it already. */
export const tracedFrame = (network: Network, probe: Probe, payloadBytes?: number): TracedFrame => {
  const { packet, destination } = probe;
  const facts = factsOf(network, probe);
  if (packet.kind === 'non-ip')
    return {
      facts,
      payloadBytes: payloadBytesOf(packet.frameBytes, ETHERNET_HEADER_BYTES),
      mayNotBeCut: false,
      hopLimit: 0,
      requiredHopLimit: 0,
      destination,
    };
  return {
    facts,
    payloadBytes: payloadBytes ?? packet.packetBytes,
    ipVersion: packet.version,
    mayNotBeCut: packet.version === 'ipv6' || packet.dontFragment,
    hopLimit: packet.hopLimit,
    requiredHopLimit: packet.requiredHopLimit ?? 0,
    destination,
  };
};
