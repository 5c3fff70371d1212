import type { Id } from '../model/scalars.ts';
import type { DesignFacts } from '../network/network.ts';
import type { Answer } from '../wire/problem.ts';
import { refuse } from '../wire/problem.ts';
import type { AddressRange } from './address-range.ts';
import { addressRangeOf, addressText, merged, rangeOf } from './address-range.ts';
import type { NumberingContext, NumberRange } from './numbering-context.ts';
import { isInRanges, noNumberingContext } from './numbering-context.ts';
import { addressesOf, numbersOf, vlansAt } from './numbers-of.ts';

// RFC 7348 section 5: a VNI has 24 bits. Starting at 10001 keeps clear of what other equipment numbers on its own; common practice, no source.
const usualVnis: readonly NumberRange[] = [{ from: 10_001, to: 16_777_215 }];
// IEEE 802.1Q-2022 table 9-2, from memory: 1 is the default VLAN of ports, 4095 is reserved; the lower hundred is often in use.
const usualVlans: readonly NumberRange[] = [{ from: 110, to: 4094 }];
// RFC 1918 section 3.
const usualLoopbacks: readonly string[] = ['10.255.0.0/16', '172.31.0.0/16', '192.168.0.0/16'];

/** Numbers of some ranges in order, as many as are wanted, that nothing holds. */
const lowestOf = (
  ranges: readonly NumberRange[],
  isTaken: (number: number) => boolean,
  count: number,
  step = 1,
): readonly number[] => {
  const found: number[] = [];
  for (const { from, to } of ranges)
    for (let number = Math.ceil(from / step) * step; number <= to && found.length < count; number += step)
      if (!isTaken(number) && !found.includes(number)) found.push(number);
  return found;
};

const rangeText = (ranges: readonly NumberRange[]): string =>
  ranges.map(({ from, to }) => (from === to ? `${from}` : `${from} to ${to}`)).join(', ');
const exhausted = (field: string, value: string, what: string, count: number, found: number) =>
  refuse([
    {
      field,
      value,
      expected: `${count === 1 ? `a free ${what}` : `${count} free ${what}s`} in the pool, which has ${found}: widen the pool or give numbers back`,
    },
  ]);

/** The lowest free VNIs, fewer than wanted where the pools end. */
export const lowestVnis = (
  design: DesignFacts,
  count: number,
  context: NumberingContext,
): readonly number[] => {
  const used = new Set([
    ...numbersOf(design).vnis,
    ...(context.otherDesigns ?? []).flatMap(({ vnis }) => vnis ?? []),
  ]);
  return lowestOf(
    context.pools?.vnis ?? usualVnis,
    (vni) => used.has(vni) || isInRanges(context.reserved?.vnis, vni),
    count,
  );
};

/** The lowest VNIs, as many as are wanted, that no tunnel of this or another design has and that nothing is reserved for. */
export const freeVnis = (
  design: DesignFacts,
  count: number,
  context: NumberingContext = noNumberingContext,
): Answer<{ readonly vnis: readonly number[] }> => {
  const vnis = lowestVnis(design, count, context);
  return vnis.length === count
    ? { ok: true, vnis }
    : exhausted('pools.vnis', rangeText(context.pools?.vnis ?? usualVnis), 'VNI', count, vnis.length);
};

/**
 * The lowest VLANs that none of these sites uses for a segment, a port or a circuit (all sites of the design where none is
 * named). `step` 10 gives round ones.
 */
export const freeVlans = (
  design: DesignFacts,
  count: number,
  options: { readonly sites?: readonly Id[]; readonly step?: number } = {},
  context: NumberingContext = noNumberingContext,
): Answer<{ readonly vlans: readonly number[] }> => {
  const used = new Set(
    (options.sites ?? Object.keys(design.sites)).flatMap((site) => [...vlansAt(design, site)]),
  );
  const ranges = context.pools?.vlans ?? usualVlans;
  const vlans = lowestOf(
    ranges,
    (vlan) => used.has(vlan) || isInRanges(context.reserved?.vlans, vlan),
    count,
    options.step,
  );
  return vlans.length === count
    ? { ok: true, vlans }
    : exhausted('pools.vlans', rangeText(ranges), 'VLAN', count, vlans.length);
};

/** Addresses that no loopback may have: in use, in a segment's subnet, reserved, or of another design. */
const takenAddresses = (
  design: DesignFacts,
  context: NumberingContext,
  family: 4 | 6,
): readonly AddressRange[] => {
  const all = [
    ...addressesOf(design).map(addressRangeOf),
    ...numbersOf(design).networks.map(rangeOf),
    ...(context.reserved?.networks ?? []).map(rangeOf),
    ...(context.networksInUse ?? []).map(({ network }) => rangeOf(network)),
    ...(context.otherDesigns ?? []).flatMap(({ loopbacks, networks }) => [
      ...(loopbacks ?? []).map(addressRangeOf),
      ...(networks ?? []).map(rangeOf),
    ]),
  ];
  return merged(all.filter((range) => range.family === family));
};

/** Common practice, no source: addresses that end in 0 or 255 look like a network or a broadcast to people and filters. */
const looksLikeNetwork = (family: 4 | 6, address: bigint): boolean =>
  family === 4 ? (address & 0xffn) === 0n || (address & 0xffn) === 0xffn : false;

const loopbackPools = (context: NumberingContext): readonly string[] =>
  context.pools?.loopbacks ?? usualLoopbacks;

/** The lowest free loopbacks, fewer than wanted where the pools end. */
export const lowestLoopbacks = (
  design: DesignFacts,
  family: 4 | 6,
  count: number,
  context: NumberingContext,
): readonly string[] => {
  const pools = loopbackPools(context)
    .map(rangeOf)
    .filter((pool) => pool.family === family);
  const taken = takenAddresses(design, context, family);
  const loopbacks: string[] = [];
  for (const { first, last } of pools) {
    // RFC 4291 section 2.6.1: the lowest address of an IPv6 subnet is the anycast address of its routers.
    let address = family === 6 && last > first ? first + 1n : first;
    let next = 0;
    while (address <= last && loopbacks.length < count) {
      while (next < taken.length && taken[next]!.last < address) next += 1;
      const clash = taken[next];
      if (clash !== undefined && clash.first <= address) {
        address = clash.last + 1n;
        continue;
      }
      const text = `${addressText(family, address)}/${family === 4 ? 32 : 128}`;
      if (!looksLikeNetwork(family, address) && !loopbacks.includes(text)) loopbacks.push(text);
      address += 1n;
    }
  }
  return loopbacks;
};

/** The lowest loopback addresses that are free, with their host prefix. IPv6 needs a pool: no range of it is everybody's. */
export const freeLoopbacks = (
  design: DesignFacts,
  family: 4 | 6,
  count: number,
  context: NumberingContext = noNumberingContext,
): Answer<{ readonly loopbacks: readonly string[] }> => {
  const field = 'pools.loopbacks';
  const pools = loopbackPools(context);
  if (!pools.some((pool) => rangeOf(pool).family === family))
    return refuse([
      {
        field,
        value: context.pools?.loopbacks?.join(', '),
        expected: `a prefix of IPv${family} from which to take loopbacks`,
      },
    ]);
  const loopbacks = lowestLoopbacks(design, family, count, context);
  return loopbacks.length === count
    ? { ok: true, loopbacks }
    : exhausted(field, pools.join(', '), 'loopback', count, loopbacks.length);
};

/** The first of `base`, `base-2`, `base-3` … that no tunnel of this or another design is called. */
export const freeTunnelName = (
  design: DesignFacts,
  base: string,
  context: NumberingContext = noNumberingContext,
): string => {
  const used = new Set([
    ...numbersOf(design).tunnelNames,
    ...(context.otherDesigns ?? []).flatMap(({ tunnelNames }) => tunnelNames ?? []),
  ]);
  if (!used.has(base)) return base;
  let number = 2;
  while (used.has(`${base}-${number}`)) number += 1;
  return `${base}-${number}`;
};
