import { z } from 'zod';
import { cidrSchema, nameSchema, vlanSchema, vniSchema } from '../engine/model/scalars.ts';
import { numberingContextSchema } from '../engine/numbering/numbering-context.ts';

const mostEntries = 100;

/** What a range is for, in the team's words. */
const purpose = nameSchema.optional();
const rangesOf = (number: typeof vniSchema) =>
  z
    .array(
      z.strictObject({ from: number, to: number, for: purpose }).refine(({ from, to }) => from <= to, {
        path: ['to'],
        message: 'expected a range that ends no lower than it begins',
      }),
    )
    .max(mostEntries, `expected at most ${mostEntries} ranges`);
const prefixes = z
  .array(z.strictObject({ prefix: cidrSchema, for: purpose }))
  .max(mostEntries, `expected at most ${mostEntries} prefixes`);

/** Where a workspace's designs take their numbers from. Where a pool has nothing, the usual ranges stand in for it. */
export const poolsSchema = z.strictObject({
  vnis: rangesOf(vniSchema),
  vlans: rangesOf(vlanSchema),
  /** Prefixes of either family. */
  loopbacks: prefixes,
  /** Numbers in the pools that are kept for something else. */
  reserved: z.strictObject({ vnis: rangesOf(vniSchema), vlans: rangesOf(vlanSchema), networks: prefixes }),
  /** Networks that exist already, whoever runs them. */
  networksInUse: prefixes,
});
export type Pools = z.infer<typeof poolsSchema>;

export const noPools: Pools = {
  vnis: [],
  vlans: [],
  loopbacks: [],
  reserved: { vnis: [], vlans: [], networks: [] },
  networksInUse: [],
};

/** GET /api/workspaces/:workspaceId/pools */
export const workspacePoolsSchema = z.object({
  pools: poolsSchema,
  /** Null where nobody has set any. */
  changedAt: z.iso.datetime().nullable(),
  /** The person's name. */
  changedBy: z.string().nullable(),
});
export type WorkspacePools = z.infer<typeof workspacePoolsSchema>;

/** PUT /api/workspaces/:workspaceId/pools → the pools. With `basedOn` (the `changedAt` that was read) 409 if somebody was faster. */
export const putPoolsSchema = z.strictObject({
  pools: poolsSchema,
  basedOn: z.iso.datetime().nullable().optional(),
});

/**
 * GET /api/designs/:designId/context: what numbering and checks may know beyond the design. Neighbours are the workspace's
 * other designs, without those put away, superseded, or of the same identification number (versions of one drawing share
 * their numbers).
 */
export const designContextSchema = z.object({
  /** Changes when anything of it does. */
  version: z.string(),
  context: numberingContextSchema,
  /** Who `context.otherDesigns` are, in the same order. */
  neighbours: z.array(z.object({ id: z.string(), title: z.string(), engagementName: z.string() })),
  /** Neighbours beyond what one answer holds, those changed longest ago. */
  leftOut: z.int(),
});
export type DesignContext = z.infer<typeof designContextSchema>;
