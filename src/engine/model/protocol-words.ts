import type { Protocol } from './intent.ts';

/** How the trade writes what a segment may have to carry. */
export const protocolWords: { readonly [P in Protocol]: string } = {
  ipv4: 'IPv4',
  ipv6: 'IPv6',
  multicast: 'multicast',
  igmp: 'IGMP',
  ospf: 'OSPF',
  'is-is': 'IS-IS',
  pim: 'PIM',
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
