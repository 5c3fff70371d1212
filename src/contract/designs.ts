import { z } from 'zod';
import { actions } from './session.ts';

// eslint-disable-next-line no-control-regex
const oneLine = /^[^\u0000-\u001f\u007f]*$/;

// As strict as the name of anything in a design, where titles end up.
const titleSchema = z
  .string()
  .trim()
  .min(1, 'expected a title, at least one character')
  .max(80, 'expected at most 80 characters')
  .regex(oneLine, 'expected one line without control characters');
const engagementSummarySchema = z
  .string()
  .trim()
  .max(200, 'expected at most 200 characters')
  .regex(oneLine, 'expected one line without control characters');

export const countsSchema = z.object({ blocking: z.int(), degrading: z.int(), advisory: z.int() });
export type Counts = z.infer<typeof countsSchema>;

export const designStates = ['draft', 'in-review', 'approved', 'built', 'superseded'] as const;
export const designSummarySchema = z.object({
  id: z.string(),
  engagementId: z.string(),
  title: z.string(),
  identification: z.string().nullable(),
  revision: z.string().nullable(),
  state: z.enum(designStates),
  counts: countsSchema,
  /** Sequence number of the last patch; also the version of the thumbnail. */
  sequence: z.int(),
  changedAt: z.iso.datetime(),
  /** The person's name. */
  changedBy: z.string().nullable(),
  archivedAt: z.iso.datetime().nullable(),
  /** A deleted design is in the archive, too, and gone for good `deletedForDays` later. */
  deletedAt: z.iso.datetime().nullable(),
  /** The revision to build from: the last that was approved. While there is a later draft, `state` is the draft's. */
  issued: z.object({ id: z.string(), label: z.string(), state: z.enum(['approved', 'built']) }).nullable(),
});
export type DesignSummary = z.infer<typeof designSummarySchema>;

export const engagementSchema = z.object({
  id: z.string(),
  workspaceId: z.string(),
  name: z.string(),
  summary: z.string(),
  archivedAt: z.iso.datetime().nullable(),
  designs: z.array(designSummarySchema),
});
export type Engagement = z.infer<typeof engagementSchema>;

/** GET /api/workspaces/:workspaceId/engagements?archived=true|false: the archived ones, of both kinds, besides the others when true. */
export const engagementListSchema = z.object({ engagements: z.array(engagementSchema) });
/** POST /api/workspaces/:workspaceId/engagements → 201, the engagement */
export const createEngagementSchema = z.strictObject({
  name: titleSchema,
  summary: engagementSummarySchema.optional(),
});
/** PATCH /api/engagements/:engagementId → the engagement with all its designs, archived ones too */
export const changeEngagementSchema = z.strictObject({
  name: titleSchema.optional(),
  summary: engagementSummarySchema.optional(),
  archived: z.boolean().optional(),
});

export const demoDesigns = ['fault-free', 'planted-faults'] as const;
/** POST /api/engagements/:engagementId/designs → 201, the design's summary */
export const createDesignSchema = z.strictObject({
  title: titleSchema,
  from: z.discriminatedUnion('kind', [
    z.strictObject({ kind: z.literal('empty') }),
    z.strictObject({ kind: z.literal('demo'), demo: z.enum(demoDesigns) }),
    z.strictObject({ kind: z.literal('copy'), designId: z.guid('expected the id of a design') }),
    // The design's own JSON; read by the engine, every problem named.
    z.strictObject({ kind: z.literal('document'), document: z.unknown() }),
  ]),
});
export type CreateDesign = z.infer<typeof createDesignSchema>;
/** For how long a deleted design can be restored. */
export const deletedForDays = 30;
/**
 * PATCH /api/designs/:designId → its summary. A new title is written into the document as a patch. `archived: true` keeps a
 * deleted design in the archive; `deleted: false` brings it back whole.
 */
export const changeDesignSchema = z
  .strictObject({
    title: titleSchema.optional(),
    archived: z.boolean().optional(),
    deleted: z.boolean().optional(),
  })
  .refine(({ archived, deleted }) => archived === undefined || deleted === undefined, {
    path: ['deleted'],
    message: 'expected either archived or deleted, not both',
  });

export const thumbnailThemes = ['paper', 'slate'] as const;
/**
 * GET /api/designs/:designId/thumbnail?v=sequence&open=N&theme=paper|slate → image/svg+xml of the design as it is now. `v` names
 * the picture for the browser's cache: with the current sequence number the answer may be kept for a day. `open`, the count of
 * blocking findings, names it apart from how it was before a waiver.
 */

/** GET /api/designs/:designId */
export const openDesignSchema = z.object({
  summary: designSummarySchema,
  engagementName: z.string(),
  workspaceId: z.string(),
  /** What the reader may do with it; nobody edits what is archived, in review, approved, built or superseded. */
  actions: z.array(z.enum(actions)),
  sequence: z.int(),
  /** The engine's document; parse with parseDesign. */
  document: z.unknown(),
});
export type OpenDesign = z.infer<typeof openDesignSchema>;

/** A JSON Merge Patch (RFC 7396) on the document. */
const patchSchema = z.record(z.string(), z.unknown());

export const loggedPatchSchema = z.object({
  sequence: z.int(),
  /** Made by the client, unique: the same edit sent twice is applied once. */
  editId: z.string(),
  /** The person's name; null for a repair. */
  by: z.string().nullable(),
  at: z.iso.datetime(),
  patch: patchSchema,
  /** True for the removal of entries whose required reference vanished when two people's patches met. */
  repair: z.boolean(),
});
export type LoggedPatch = z.infer<typeof loggedPatchSchema>;

/**
 * POST /api/designs/:designId/patches: edits in order, made on top of `baseSequence`; all are taken or none. They merge by
 * property with what others logged since. An edit inside something that was removed since is logged without that part.
 */
export const savePatchesSchema = z.strictObject({
  baseSequence: z.int().min(0, 'expected the sequence number that the edits were made on'),
  edits: z
    .array(z.strictObject({ editId: z.uuid('expected a UUID'), patch: patchSchema }))
    .min(1, 'expected at least one edit')
    .max(1000, 'expected at most 1,000 edits in one request'),
});
/** Its answer: everything logged after `baseSequence`, the sender's own edits included, in order. */
export const savedPatchesSchema = z.object({
  sequence: z.int(),
  patches: z.array(loggedPatchSchema),
  counts: countsSchema,
});
/** GET /api/designs/:designId/patches?after=N */
export const patchListSchema = z.object({ sequence: z.int(), patches: z.array(loggedPatchSchema) });
export type SavedPatches = z.infer<typeof savedPatchesSchema>;
