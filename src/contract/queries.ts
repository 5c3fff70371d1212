import { z } from 'zod';
import { thumbnailThemes } from './designs.ts';

// What stands behind the question mark of addresses; sheet-exports.ts has its own.

const sequenceSchema = z
  .string()
  .regex(/^\d{1,9}$/, 'expected a sequence number such as 17')
  .transform(Number);

/** GET /api/workspaces/:workspaceId/engagements */
export const engagementsQuerySchema = z.strictObject({
  archived: z.enum(['true', 'false'], 'expected true or false').default('false'),
});
/** GET /api/designs/:designId/patches */
export const patchesQuerySchema = z.strictObject({ after: sequenceSchema });
/** GET /api/designs/:designId/document */
export const pastDocumentQuerySchema = z.strictObject({ sequence: sequenceSchema });
/** GET /api/designs/:designId/thumbnail */
export const thumbnailQuerySchema = z.strictObject({
  v: sequenceSchema.optional(),
  open: z
    .string()
    .regex(/^\d{1,9}$/, 'expected a number of findings such as 3')
    .optional(),
  theme: z.enum(thumbnailThemes).default('paper'),
});
/** GET /api/designs/:designId/live */
export const liveQuerySchema = z.strictObject({ connectionId: z.uuid('expected a UUID') });
