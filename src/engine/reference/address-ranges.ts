/** Ranges of addresses that are no good, or mean something, as the outside address of a gateway. */
export const addressRanges = {
  documentation: [
    // RFC 5737 section 3.
    '192.0.2.0/24',
    '198.51.100.0/24',
    '203.0.113.0/24',
    // RFC 3849 section 2.
    '2001:db8::/32',
    // RFC 9637 section 3, from memory.
    '3fff::/20',
  ],
  'link-local': [
    // RFC 3927 section 1.
    '169.254.0.0/16',
    // RFC 4291 section 2.5.6, from memory.
    'fe80::/10',
  ],
  loopback: [
    // RFC 1122 section 3.2.1.3.
    '127.0.0.0/8',
    // RFC 4291 section 2.5.3, from memory.
    '::1/128',
  ],
  multicast: [
    // RFC 1112 section 4.
    '224.0.0.0/4',
    // RFC 4291 section 2.7.
    'ff00::/8',
  ],
  unspecified: [
    // RFC 1122 section 3.2.1.3.
    '0.0.0.0/8',
    // RFC 4291 section 2.5.2, from memory.
    '::/128',
  ],
  private: [
    // RFC 1918 section 3.
    '10.0.0.0/8',
    '172.16.0.0/12',
    '192.168.0.0/16',
    // RFC 4193 section 3.1, from memory.
    'fc00::/7',
  ],
  // RFC 6598 section 7: between a provider's translation and its customers.
  shared: ['100.64.0.0/10'],
} as const;
export type AddressRange = keyof typeof addressRanges;
