import type { Entry } from '../../engine/model/design.ts';
import { hostAddress } from '../routing/stands.ts';

// How values are said on the sheet. Addresses and numbers are never shortened.

type HostDevice = Extract<Entry<'devices'>, { kind: 'host' }>;

const unique = <T>(values: readonly T[]): readonly T[] => [...new Set(values)];

/** The address a host shows, and how many more it has. */
export const hostAddressWords = (host: HostDevice): string | undefined => {
  const more = (host.addresses?.length ?? 0) - 1;
  if (more < 0) return undefined;
  return more === 0 ? hostAddress(host) : `${hostAddress(host)} +${more}`;
};

/** A number with at most `places` decimals and no trailing zeros. */
const plain = (value: number, places: number): string => String(Number(value.toFixed(places)));

/** What a band says about its transport; unknown values are left out. */
export interface TransportWords {
  readonly name: string;
  readonly kind: string;
  readonly trusted: boolean;
  readonly trust: 'trusted' | 'not trusted';
  readonly latency?: string;
  readonly mtu?: string;
  readonly loss?: string;
}

const kindWords = { internet: 'internet', 'private-routed': 'private', 'own-routed': 'own' } as const;

/** A transport is trusted only if its owner says so, or if it is the company's own. */
export const transportWords = (transport: Entry<'transports'>): TransportWords => {
  const trusted = transport.trusted ?? transport.kind === 'own-routed';
  const { latencyUs, jitterUs, mtu, lossPpm } = transport;
  const jitter = jitterUs === undefined || jitterUs === 0 ? '' : ` ± ${plain(jitterUs / 1000, 1)}`;
  return {
    name: transport.name,
    kind: kindWords[transport.kind],
    trusted,
    trust: trusted ? 'trusted' : 'not trusted',
    ...(latencyUs === undefined ? {} : { latency: `${plain(latencyUs / 1000, 1)} ms${jitter}` }),
    ...(mtu === undefined ? {} : { mtu: `MTU ${mtu}` }),
    ...(lossPpm === undefined ? {} : { loss: `loss ${plain(lossPpm / 10_000, 4)} %` }),
  };
};

/** A segment's VLAN where all its sites agree, two if there are two, else how many. */
export const vlanWords = (segment: Entry<'segments'>): string => {
  const vlans = unique(Object.values(segment.sites).flatMap((site) => site.vlan ?? []));
  if (vlans.length === 0) return '–';
  return vlans.length <= 2 ? vlans.join(', ') : `${vlans.length} VLANs`;
};

export const subnetWords = (segment: Entry<'segments'>): string => {
  const subnets = unique(Object.values(segment.sites).flatMap((site) => site.subnets ?? []));
  if (subnets.length === 0) return '–';
  return subnets.length === 1 ? (subnets[0] ?? '–') : `${subnets.length} subnets`;
};

const protocolWords: { readonly [protocol in NonNullable<Entry<'segments'>['protocols']>[number]]: string } =
  {
    ipv4: 'unicast',
    ipv6: 'unicast',
    multicast: 'multicast',
    igmp: 'multicast',
    pim: 'multicast',
    ospf: 'OSPF',
    'is-is': 'IS-IS',
    vrrp: 'VRRP',
    bfd: 'BFD',
    dhcp: 'DHCP',
    'spanning-tree': 'spanning tree',
    lacp: 'LACP',
    lldp: 'LLDP',
    eapol: 'EAPOL',
    ptp: 'PTP',
    cfm: 'CFM',
    'real-time-ethernet': 'real-time Ethernet',
  };

/** What a segment has to carry beyond plain unicast, or that it is only that. */
export const carriesWords = (segment: Entry<'segments'>): string => {
  const words = unique((segment.protocols ?? []).map((protocol) => protocolWords[protocol])).filter(
    (word) => word !== 'unicast',
  );
  return words.length === 0 ? 'unicast' : words.join(', ');
};
