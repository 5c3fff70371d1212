import ipaddr from 'ipaddr.js';

/**
 * The address and the length in bits of a prefix such as 192.0.2.0/24 or 2001:db8::/32, which the schema has let through. The
 * family is seen at once: trying one and catching its refusal costs more than the parsing.
 */
export const parsePrefix = (text: string): readonly [address: ipaddr.IPv4 | ipaddr.IPv6, bits: number] =>
  text.includes(':') ? ipaddr.IPv6.parseCIDR(text) : ipaddr.IPv4.parseCIDR(text);
