import { z } from 'zod';
import { collections } from '../engine/model/design.ts';

/** Pages of a design on which somebody can be. */
const pageSchema = z
  .string()
  .regex(/^[a-z-]{1,24}$/, "expected the name of one of the design's pages, such as sheet");
const coordinate = z.number().min(-1e6, 'expected at least -1000000').max(1e6, 'expected at most 1000000');
const word = z.string().min(1, 'expected a name').max(80, 'expected at most 80 characters');

const selectedSchema = z.strictObject({
  collection: z.enum(collections),
  id: word,
  port: word.optional(),
  member: z.union([z.literal(1), z.literal(2)]).optional(),
});

/** Where somebody is in a design: the page, what is selected, and the part of the sheet in view, in units of the sheet. */
export const placeInDesignSchema = z.strictObject({
  page: pageSchema,
  selection: z.array(selectedSchema).max(20, 'expected at most 20 selected elements'),
  view: z
    .strictObject({
      x: coordinate,
      y: coordinate,
      width: coordinate.positive(),
      height: coordinate.positive(),
    })
    .nullable(),
});
export type PlaceInDesign = z.infer<typeof placeInDesignSchema>;

/**
 * PUT /api/designs/:designId/presence → 204. `connectionId` is the one with which the page follows the design; what is said
 * holds until it is said anew, or until that connection has ended.
 */
export const sayPresenceSchema = z.strictObject({
  connectionId: z.uuid('expected a UUID'),
  place: placeInDesignSchema,
});

export const presentPersonSchema = z.object({
  connectionId: z.string(),
  personId: z.string(),
  name: z.string(),
  initials: z.string(),
  place: placeInDesignSchema,
});
export type PresentPerson = z.infer<typeof presentPersonSchema>;

/**
 * GET /api/designs/:designId/live?connectionId=UUID → text/event-stream. Each event is named and carries JSON:
 * `patches` the sequence number of the last one, `presence` who has the design open, the others nothing but their name: what
 * they tell of is read by its own route. `patches` and `presence` come at once, so that a page that was away catches up.
 */
export const liveEvents = ['patches', 'presence', 'waivers', 'comments', 'state', 'shares'] as const;
export type LiveEvent = (typeof liveEvents)[number];
export const livePatchesSchema = z.object({ sequence: z.int() });
export const livePresenceSchema = z.object({ people: z.array(presentPersonSchema) });
