import { z } from 'zod';
import { oneLineSchema } from './one-line.ts';
import { emailSchema, membershipSchema, newPasswordSchema, personNameSchema, roleSchema } from './session.ts';

export const workspaceNameSchema = oneLineSchema('expected a name, at least one character');

/** GET /api/workspaces: where the reader is a member. */
export const workspaceListSchema = z.object({ workspaces: z.array(membershipSchema) });
/** POST /api/workspaces → 201, the membership: whoever starts a workspace owns it. */
export const createWorkspaceSchema = z.strictObject({ name: workspaceNameSchema });

/** GET /api/workspaces/:workspaceId, for its owners. */
export const workspaceSettingsSchema = z.object({
  id: z.string(),
  name: z.string(),
  requiresSecondStep: z.boolean(),
  /** How many members have not set up two-step sign-in. */
  withoutSecondStep: z.int(),
});
export type WorkspaceSettings = z.infer<typeof workspaceSettingsSchema>;
/** PATCH /api/workspaces/:workspaceId → the settings */
export const changeWorkspaceSchema = z.strictObject({
  name: workspaceNameSchema.optional(),
  requiresSecondStep: z.boolean().optional(),
});

export const memberSchema = z.object({
  personId: z.string(),
  name: z.string(),
  email: z.string(),
  role: roleSchema,
  /** Whether they have two-step sign-in; owners are told, others see null. */
  hasSecondStep: z.boolean().nullable(),
  lastSeenAt: z.iso.datetime().nullable(),
});
export type Member = z.infer<typeof memberSchema>;
/** GET /api/workspaces/:workspaceId/people: by name. */
export const memberListSchema = z.object({ people: z.array(memberSchema) });
/** PATCH /api/workspaces/:workspaceId/people/:personId → the member. DELETE → 204; one's own id: leaves the workspace. */
export const changeMemberSchema = z.strictObject({ role: roleSchema });

/** GET /api/first-owner: whether the server still waits for its first person. */
export const firstOwnerStateSchema = z.object({ isAwaited: z.boolean() });
/** POST /api/first-owner with the code that the server printed at its start → 201, the session, signed in. */
export const firstOwnerSchema = z.strictObject({
  code: z.string().trim().min(1, 'expected the code that the server printed').max(80, 'expected the code'),
  name: personNameSchema,
  email: emailSchema,
  password: newPasswordSchema,
  workspaceName: workspaceNameSchema,
});
export type FirstOwner = z.input<typeof firstOwnerSchema>;
