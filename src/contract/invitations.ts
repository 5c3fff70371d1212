import { z } from 'zod';
import { emailSchema, newPasswordSchema, personNameSchema, roleSchema } from './session.ts';

/** How long an invitation can be accepted. */
export const invitationDays = 7;

/** What became of a mail, as far as is known. */
export const mailStateSchema = z.object({
  state: z.enum(['waiting', 'sent', 'failed', 'uncertain']),
  /** Since when. */
  at: z.iso.datetime(),
  /** Why it waits or failed. */
  problem: z.string().nullable(),
});
export type MailState = z.infer<typeof mailStateSchema>;

/** An invitation that was neither accepted nor taken back. */
export const invitationSchema = z.object({
  id: z.string(),
  email: z.string(),
  role: roleSchema,
  /** The name of who invites; null where they left. */
  invitedBy: z.string().nullable(),
  invitedAt: z.iso.datetime(),
  expiresAt: z.iso.datetime(),
  mail: mailStateSchema.nullable(),
});
export type Invitation = z.infer<typeof invitationSchema>;

/** GET /api/workspaces/:workspaceId/invitations: the newest first, those that ran out too. */
export const invitationListSchema = z.object({ invitations: z.array(invitationSchema) });
/** POST /api/workspaces/:workspaceId/invitations → 201, the invitation. 409 for a member, and for somebody whose invitation stands. */
export const inviteSchema = z.strictObject({ email: emailSchema, role: roleSchema });
// POST /api/workspaces/:workspaceId/invitations/:invitationId/mail → the invitation: a new link for seven days; the old one ends.
// DELETE /api/workspaces/:workspaceId/invitations/:invitationId → 204: taken back.

export const linkTokenSchema = z
  .string()
  .min(1, 'expected what stands in the link')
  .max(100, 'expected what stands in the link');

/** POST /api/invitation → what the link invites to. 404 where it holds no longer. */
export const openInvitationSchema = z.strictObject({ token: linkTokenSchema });
export const offeredInvitationSchema = z.object({
  workspaceName: z.string(),
  invitedBy: z.string().nullable(),
  email: z.string(),
  role: roleSchema,
  expiresAt: z.iso.datetime(),
  /** Whether somebody signs in with this address already: they accept with their own password. */
  hasAccount: z.boolean(),
});
export type OfferedInvitation = z.infer<typeof offeredInvitationSchema>;

/**
 * POST /api/invitation/acceptance → where the person is in now; who is new is signed in with it. `newcomer` is for an address that
 * nobody signs in with yet.
 */
export const newcomerSchema = z.strictObject({ name: personNameSchema, password: newPasswordSchema });
export const acceptInvitationSchema = z.strictObject({
  token: linkTokenSchema,
  newcomer: newcomerSchema.optional(),
});
export const acceptedInvitationSchema = z.object({ workspaceId: z.string() });
