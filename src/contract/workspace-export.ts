import { z } from 'zod';
import { passwordSchema } from './account.ts';
import { activitySchema } from './activity.ts';
import { roleSchema, secondStepCodeSchema } from './session.ts';

const entry = z.looseObject({ id: z.string() });

/** GET /api/workspaces/:workspaceId/export: everything that the workspace holds, and no key to anything. */
export const workspaceExportSchema = z.object({
  format: z.literal('longpatch-workspace'),
  version: z.literal(1),
  exportedAt: z.iso.datetime(),
  workspace: z.object({ id: z.string(), name: z.string(), requiresSecondStep: z.boolean() }),
  people: z.array(z.object({ personId: z.string(), name: z.string(), email: z.string(), role: roleSchema })),
  pools: z.unknown(),
  profiles: z.array(entry),
  engagements: z.array(entry),
  designs: z.array(
    entry.extend({
      title: z.string(),
      document: z.unknown(),
      revisions: z.array(entry),
      waivers: z.array(entry),
      comments: z.array(entry),
      shares: z.array(entry),
      /** Every edit since the design began, in order. */
      patches: z.array(z.looseObject({ sequence: z.int() })),
    }),
  ),
  activity: z.array(activitySchema),
});

/** POST /api/workspaces/:workspaceId/deletion → 204. The name as it is written today; a code of whoever has two-step sign-in. */
export const deleteWorkspaceSchema = z.strictObject({
  name: z.string().max(200, 'expected the name of the workspace'),
  password: passwordSchema,
  code: secondStepCodeSchema.optional(),
});
export type DeleteWorkspace = z.infer<typeof deleteWorkspaceSchema>;
