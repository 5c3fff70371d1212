import { z } from 'zod';
import { idSchema } from './scalars.ts';

// World pixels, y down. Bounded so that no drawing can be thrown out of reach.
const coordinateSchema = z
  .number()
  .min(-100_000, 'expected a coordinate within 100,000 px')
  .max(100_000, 'expected a coordinate within 100,000 px');
const lengthSchema = z
  .number()
  .min(1, 'expected a length above 0 px')
  .max(100_000, 'expected at most 100,000 px');
const pointSchema = z.strictObject({
  x: coordinateSchema,
  y: coordinateSchema,
  locked: z.boolean().optional(),
});
const rectSchema = z.strictObject({
  x: coordinateSchema,
  y: coordinateSchema,
  width: lengthSchema,
  height: lengthSchema,
});

export const sideSchema = z.enum(['left', 'right', 'top', 'bottom']);
export const sheetSizes = ['A3', 'A2', 'A1', 'A0'] as const;
export const mostSheets = 99;

const bandsSchema = z.record(
  idSchema,
  z.strictObject({
    limbs: z.array(rectSchema).min(1).max(64),
    header: rectSchema.optional(),
    locked: z.boolean().optional(),
  }),
);
/** Absent: the first sheet. */
const onSheetSchema = z.int().min(2).max(mostSheets).optional();

/**
 * Where things stand on the sheet; nothing that a check needs. A device's point is its faceplate's top left corner (of
 * the first member for a pair). A site's rectangle is the least its frame covers; the frame grows with what stands in it.
 * A design may lie on several sheets of one size, each with a world of its own; devices lie on their site's.
 */
export const layoutSchema = z.strictObject({
  sheet: z.enum(sheetSizes).optional(),
  /** The largest sheet that tidying may take; what it doesn't hold goes on to further sheets. Absent: the largest there is. */
  largestSheet: z.enum(sheetSizes).optional(),
  sites: z
    .record(
      idSchema,
      rectSchema.extend({
        collapsed: z.boolean().optional(),
        locked: z.boolean().optional(),
        sheet: onSheetSchema,
      }),
    )
    .optional(),
  devices: z.record(idSchema, pointSchema).optional(),
  /** A transport's limbs and, if it has one, the header that joins them. */
  transports: bandsSchema.optional(),
  /** The bands of the second sheet and of those after it, by its number. */
  furtherSheets: z
    .record(
      z.string().regex(/^([2-9]|[1-9]\d)$/, `expected a sheet's number from 2 to ${mostSheets}`),
      z.strictObject({ transports: bandsSchema.optional() }),
    )
    .optional(),
  /** `side` is where the ring docks if a person pinned it; `order` is the comb's order where it differs from the computed one. */
  endpoints: z
    .record(
      idSchema,
      z.strictObject({ side: sideSchema.optional(), order: z.array(idSchema).max(512).optional() }),
    )
    .optional(),
  notes: z.record(idSchema, pointSchema.extend({ sheet: onSheetSchema })).optional(),
});

export type Layout = z.infer<typeof layoutSchema>;
export type Side = z.infer<typeof sideSchema>;
export type SheetSize = (typeof sheetSizes)[number];
