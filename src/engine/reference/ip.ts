// RFC 791, 792, 4443 and the field widths of RFC 8200 are cited from memory; RFC 8200 section 5 was read.

export const ipVersions = ['ipv4', 'ipv6'] as const;
export type IpVersion = (typeof ipVersions)[number];

export const IP_HEADER_BYTES = {
  // RFC 791 section 3.1: five 32-bit words when no options follow.
  ipv4: 20,
  // RFC 8200 section 3: fixed header.
  ipv6: 40,
} as const satisfies Record<IpVersion, number>;

export const LARGEST_IP_PACKET_BYTES = {
  // RFC 791 section 3.1: Total Length has 16 bits and counts the header.
  ipv4: 65_535,
  // RFC 8200 section 3: Payload Length has 16 bits and doesn't count the header.
  ipv6: 65_575,
} as const satisfies Record<IpVersion, number>;

export const SMALLEST_LINK_MTU_BYTES = {
  // RFC 791 section 3.2: every internet module forwards 68 octets without further fragmentation.
  ipv4: 68,
  // RFC 8200 section 5: every link has an MTU of 1280 octets or more.
  ipv6: 1280,
} as const satisfies Record<IpVersion, number>;

// RFC 791 section 3.1: Fragment Offset counts units of 8 octets; RFC 8200 section 4.5 does the same.
export const FRAGMENT_UNIT_BYTES = 8;

// RFC 8200 section 4.5: Fragment header.
export const IPV6_FRAGMENT_HEADER_BYTES = 8;

// RFC 792 'Echo or Echo Reply Message' and RFC 4443 section 4.1: type, code, checksum, identifier, sequence number.
export const ICMP_ECHO_HEADER_BYTES = 8;
