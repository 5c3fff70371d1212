import ipaddr from 'ipaddr.js';
import { addressRanges, type AddressRange } from '../reference/address-ranges.ts';

const parsed = Object.entries(addressRanges).flatMap(([range, prefixes]) =>
  prefixes.map((prefix) => [range as AddressRange, ipaddr.parseCIDR(prefix)] as const),
);

/** The special range that an address lies in; undefined for an ordinary public one. */
export const addressRangeOf = (text: string): AddressRange | undefined => {
  const address = ipaddr.parse(text);
  return parsed.find(([, prefix]) => prefix[0].kind() === address.kind() && address.match(prefix))?.[0];
};
