import { addressText, rangeOf } from '../numbering/address-range.ts';

// Common practice, no source: the lowest addresses are left to gateways.
const firstHost = 10n;

/** The nth address for a host in a subnet, with its prefix length; undefined where the subnet has no more. */
export const hostAddress = (subnet: string, nth: number): string | undefined => {
  const { family, first, last } = rangeOf(subnet);
  const isSmall = last - first < 32n;
  const address = first + (isSmall ? 1n : firstHost) + BigInt(nth);
  // The last address of an IPv4 subnet is its broadcast.
  const highest = family === 4 ? last - 1n : last;
  return address > highest ? undefined : `${addressText(family, address)}/${subnet.split('/')[1]}`;
};
