/** Names of IKE key-exchange groups by their IANA transform number; the clauses are cited from memory. */
export const keyExchangeGroupNames: Readonly<Record<number, string>> = {
  // RFC 7296 appendix B.1.
  1: '768-bit MODP',
  // RFC 7296 appendix B.2.
  2: '1024-bit MODP',
  // RFC 3526 section 2.
  5: '1536-bit MODP',
  // RFC 3526 section 3.
  14: '2048-bit MODP',
  // RFC 3526 section 4.
  15: '3072-bit MODP',
  // RFC 3526 section 5.
  16: '4096-bit MODP',
  // RFC 3526 section 6.
  17: '6144-bit MODP',
  // RFC 3526 section 7.
  18: '8192-bit MODP',
  // RFC 5903 section 3.1.
  19: '256-bit random ECP',
  // RFC 5903 section 3.2.
  20: '384-bit random ECP',
  // RFC 5903 section 3.3.
  21: '521-bit random ECP',
  // RFC 5114 section 2.1.
  22: '1024-bit MODP with 160-bit prime order subgroup',
  // RFC 5114 section 2.2.
  23: '2048-bit MODP with 224-bit prime order subgroup',
  // RFC 5114 section 2.3.
  24: '2048-bit MODP with 256-bit prime order subgroup',
  // RFC 8031 section 2.
  31: 'Curve25519',
  // RFC 8031 section 2.
  32: 'Curve448',
};
