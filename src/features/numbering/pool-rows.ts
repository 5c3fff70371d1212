import type { Pools } from '../../contract/numbering.ts';
import type { Design } from '../../engine/model/design.ts';
import { addressRangeOf, rangeOf } from '../../engine/numbering/address-range.ts';
import type { DesignNumbers, NumberingContext } from '../../engine/numbering/numbering-context.ts';
import { numbersOf } from '../../engine/numbering/numbers-of.ts';

/** One range of a pool and how much of it is taken. */
export interface PoolRow {
  readonly key: string;
  readonly kind: PoolKind;
  readonly range: string;
  readonly purpose: string;
  readonly takenHere: number;
  readonly takenElsewhere: number;
  /** Numbers in the range; addresses of a prefix, the network's own left in. */
  readonly size: number | bigint;
}

export type PoolKind =
  | 'VNIs'
  | 'VLANs'
  | 'Loopback addresses'
  | 'VNIs kept back'
  | 'VLANs kept back'
  | 'Networks kept back'
  | 'Networks in use';

interface Range {
  readonly from: number;
  readonly to: number;
  readonly for?: string | undefined;
}
interface Prefix {
  readonly prefix: string;
  readonly for?: string | undefined;
}
type Taken = readonly [here: readonly DesignNumbers[], elsewhere: readonly DesignNumbers[]];

const rangeText = ({ from, to }: Range): string => (from === to ? String(from) : `${from} to ${to}`);

const rangeRows = (
  kind: PoolKind,
  ranges: readonly Range[],
  numbers: (of: DesignNumbers) => readonly number[] | undefined,
  taken: Taken,
): readonly PoolRow[] =>
  ranges.map((range, i) => {
    const [takenHere, takenElsewhere] = taken.map(
      (designs) =>
        new Set(
          designs.flatMap((of) =>
            (numbers(of) ?? []).filter((number) => range.from <= number && number <= range.to),
          ),
        ).size,
    ) as [number, number];
    return {
      key: `${kind} ${i}`,
      kind,
      range: rangeText(range),
      purpose: range.for ?? '',
      takenHere,
      takenElsewhere,
      size: range.to - range.from + 1,
    };
  });

const prefixRows = (
  kind: PoolKind,
  prefixes: readonly Prefix[],
  addresses: (of: DesignNumbers) => readonly string[] | undefined,
  taken: Taken,
): readonly PoolRow[] =>
  prefixes.map(({ prefix, for: purpose }, i) => {
    const range = rangeOf(prefix);
    const [takenHere, takenElsewhere] = taken.map(
      (designs) =>
        designs.flatMap((of) =>
          (addresses(of) ?? []).filter((address) => {
            const { family, first } = addressRangeOf(address);
            return family === range.family && range.first <= first && first <= range.last;
          }),
        ).length,
    ) as [number, number];
    return {
      key: `${kind} ${i}`,
      kind,
      range: prefix,
      purpose: purpose ?? '',
      takenHere,
      takenElsewhere,
      size: range.last - range.first + 1n,
    };
  });

/** The workspace's pools in the order in which they are set, with what this design and its neighbours take of each. */
export const poolRows = (pools: Pools, design: Design, context: NumberingContext): readonly PoolRow[] => {
  const taken: Taken = [[numbersOf(design)], context.otherDesigns ?? []];
  const networks = (of: DesignNumbers) => of.networks;
  return [
    ...rangeRows('VNIs', pools.vnis, (of) => of.vnis, taken),
    ...rangeRows('VLANs', pools.vlans, (of) => of.vlans, taken),
    ...prefixRows('Loopback addresses', pools.loopbacks, (of) => of.loopbacks, taken),
    ...rangeRows('VNIs kept back', pools.reserved.vnis, (of) => of.vnis, taken),
    ...rangeRows('VLANs kept back', pools.reserved.vlans, (of) => of.vlans, taken),
    ...prefixRows('Networks kept back', pools.reserved.networks, networks, taken),
    ...prefixRows('Networks in use', pools.networksInUse, networks, taken),
  ];
};
