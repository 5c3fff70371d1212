import { z } from 'zod';
import type { DeepReadonly } from '../model/design.ts';
import { cidrSchema, ipSchema, nameSchema, vlanSchema, vniSchema } from '../model/scalars.ts';

const rangeOf = (number: typeof vniSchema) =>
  z
    .strictObject({ from: number, to: number })
    .refine(({ from, to }) => from <= to, 'expected a range that ends no lower than it begins');

/** The numbers that a design holds, as its neighbours in the workspace are told of them. */
export const designNumbersSchema = z.strictObject({
  name: nameSchema.optional(),
  vnis: z.array(vniSchema).optional(),
  vlans: z.array(vlanSchema).optional(),
  tunnelNames: z.array(nameSchema).optional(),
  /** Addresses of endpoints, without a prefix length. */
  loopbacks: z.array(ipSchema).optional(),
  /** Subnets of its segments. */
  networks: z.array(cidrSchema).optional(),
});

/** What numbering may know beyond a design: frozen beside a revision, so that it answers the same later. */
export const numberingContextSchema = z.strictObject({
  /** Where new numbers come from, in order; what is left out has usual ranges instead. */
  pools: z
    .strictObject({
      vnis: z.array(rangeOf(vniSchema)).optional(),
      vlans: z.array(rangeOf(vlanSchema)).optional(),
      /** Prefixes of either family. */
      loopbacks: z.array(cidrSchema).optional(),
    })
    .optional(),
  /** Numbers in the pools that are kept for something else. */
  reserved: z
    .strictObject({
      vnis: z.array(rangeOf(vniSchema)).optional(),
      vlans: z.array(rangeOf(vlanSchema)).optional(),
      networks: z.array(cidrSchema).optional(),
    })
    .optional(),
  otherDesigns: z.array(designNumbersSchema).optional(),
  /** Networks that exist already, whoever runs them. */
  networksInUse: z.array(z.strictObject({ network: cidrSchema, of: nameSchema.optional() })).optional(),
});

export interface NumberRange {
  readonly from: number;
  readonly to: number;
}
export type DesignNumbers = DeepReadonly<z.infer<typeof designNumbersSchema>>;
export type NumberingContext = DeepReadonly<z.infer<typeof numberingContextSchema>>;

export const noNumberingContext: NumberingContext = {};

/** Whether a number lies in one of the ranges, both ends included. */
export const isInRanges = (ranges: readonly NumberRange[] | undefined, number: number): boolean =>
  ranges?.some(({ from, to }) => from <= number && number <= to) === true;
