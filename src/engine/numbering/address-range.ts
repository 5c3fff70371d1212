import ipaddr from 'ipaddr.js';

/** Addresses from one to another, both included, as numbers. */
export interface AddressRange {
  readonly family: 4 | 6;
  readonly first: bigint;
  readonly last: bigint;
}

const numberOf = (address: ipaddr.IPv4 | ipaddr.IPv6): bigint =>
  address.toByteArray().reduce((sum, byte) => (sum << 8n) | BigInt(byte), 0n);

/** All addresses of the network that a prefix names, whatever its host bits; of an address alone, itself. */
export const rangeOf = (prefix: string): AddressRange => {
  const [address, length] = prefix.includes('/')
    ? ipaddr.parseCIDR(prefix)
    : ([ipaddr.parse(prefix), undefined] as const);
  const family = address.kind() === 'ipv4' ? 4 : 6;
  const bits = family === 4 ? 32 : 128;
  const size = 1n << BigInt(bits - (length ?? bits));
  const number = numberOf(address);
  const first = number - (number % size);
  return { family, first, last: first + size - 1n };
};

/** The one address that a prefix such as 10.110.0.20/16 gives to somebody. */
export const addressRangeOf = (prefix: string): AddressRange => rangeOf(prefix.split('/')[0]!);

export const overlaps = (a: AddressRange, b: AddressRange): boolean =>
  a.family === b.family && a.first <= b.last && b.first <= a.last;

/** The same addresses as disjoint ranges in order. All of one family. */
export const merged = (ranges: readonly AddressRange[]): readonly AddressRange[] => {
  const joined: AddressRange[] = [];
  for (const range of [...ranges].sort((a, b) => (a.first < b.first ? -1 : a.first > b.first ? 1 : 0))) {
    const before = joined.at(-1);
    if (before === undefined || range.first > before.last) joined.push(range);
    else if (range.last > before.last) joined[joined.length - 1] = { ...before, last: range.last };
  }
  return joined;
};

/** An address in the usual text form. IPv6 as RFC 5952 section 4 has it. */
export const addressText = (family: 4 | 6, number: bigint): string => {
  const bytes = Array.from({ length: family === 4 ? 4 : 16 }, (_, i, count = family === 4 ? 4 : 16) =>
    Number((number >> BigInt(8 * (count - 1 - i))) & 0xffn),
  );
  const address = ipaddr.fromByteArray(bytes);
  return address.kind() === 'ipv6' ? (address as ipaddr.IPv6).toRFC5952String() : address.toString();
};
