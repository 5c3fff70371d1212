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

/**
 * Where things stand on the sheet; nothing that a check needs. A device's point is its faceplate's top left corner (of
 * the first member for a pair). A site's rectangle is the least its frame covers; the frame grows with what stands in it.
 */
export const layoutSchema = z.strictObject({
  sheet: z.enum(sheetSizes).optional(),
  sites: z
    .record(
      idSchema,
      rectSchema.extend({ collapsed: z.boolean().optional(), locked: z.boolean().optional() }),
    )
    .optional(),
  devices: z.record(idSchema, pointSchema).optional(),
  /** A transport's limbs and, if it has one, the header that joins them. */
  transports: z
    .record(
      idSchema,
      z.strictObject({
        limbs: z.array(rectSchema).min(1).max(64),
        header: rectSchema.optional(),
        locked: z.boolean().optional(),
      }),
    )
    .optional(),
  /** `side` is where the ring docks if a person pinned it; `order` is the comb's order where it differs from the computed one. */
  endpoints: z
    .record(
      idSchema,
      z.strictObject({ side: sideSchema.optional(), order: z.array(idSchema).max(512).optional() }),
    )
    .optional(),
  notes: z.record(idSchema, pointSchema).optional(),
});

export type Layout = z.infer<typeof layoutSchema>;
export type Side = z.infer<typeof sideSchema>;
export type SheetSize = (typeof sheetSizes)[number];
