import { z } from 'zod';
import { oneLineSchema } from './one-line.ts';

export const roles = ['owner', 'architect', 'reviewer', 'presales', 'installer'] as const;
export type Role = (typeof roles)[number];
export const roleSchema = z.enum(roles);

/** What a person may do in a workspace; the server's permission table says which role may do what. */
export const actions = [
  'workspace.read',
  'engagement.create',
  'engagement.edit',
  'design.read',
  'design.create',
  'design.edit',
  'design.archive',
  'finding.waive',
  'pools.edit',
  'profile.edit',
  'comment.write',
  'review.ask',
  'review.decide',
  'design.build',
  'revision.read',
  'share.manage',
  'people.manage',
  'workspace.manage',
  'activity.read',
] as const;
export type Action = (typeof actions)[number];

export const membershipSchema = z.object({
  workspaceId: z.string(),
  workspaceName: z.string(),
  role: roleSchema,
  /** None while `needsSecondStep`. */
  actions: z.array(z.enum(actions)),
  /** The workspace asks for two-step sign-in, which the person has not set up; until then it stays shut to them. */
  needsSecondStep: z.boolean(),
});
export const personSchema = z.object({
  id: z.string(),
  name: z.string(),
  email: z.string(),
  initials: z.string(),
});
export type Person = z.infer<typeof personSchema>;
export type Membership = z.infer<typeof membershipSchema>;

/** GET /api/session: who is signed in, and what every changing request must carry as X-CSRF-Token. */
export const sessionSchema = z.object({
  person: personSchema.nullable(),
  /** The password was right, and a code has to follow: POST /api/session/second-step. Nobody is signed in yet. */
  secondStepAsked: z.boolean(),
  memberships: z.array(membershipSchema),
  csrfToken: z.string(),
  /** While the demo is on: who can be signed in as with one click. */
  demo: z.array(z.object({ role: roleSchema, name: z.string(), email: z.string() })),
});
export type Session = z.infer<typeof sessionSchema>;

export const emailSchema = z
  .string()
  .trim()
  .toLowerCase()
  .max(254, 'expected at most 254 characters')
  .pipe(z.email('expected an e-mail address such as r.halloran@ternwick.example'));
export const newPasswordSchema = z
  .string()
  .min(12, 'expected at least 12 characters')
  .max(200, 'expected at most 200 characters');

/** POST /api/session → the session, with a new token; where a second step is set up, one that asks for it */
export const signInSchema = z.strictObject({
  email: emailSchema,
  password: z.string().min(1, 'expected a password').max(200, 'expected at most 200 characters'),
  keep: z.boolean().optional(),
});
/** Six digits from the authenticator app, or one of the recovery codes; spaces and hyphens don't count. */
export const secondStepCodeSchema = z
  .string()
  .trim()
  .min(6, 'expected six digits from your authenticator app, or a recovery code')
  .max(40, 'expected six digits from your authenticator app, or a recovery code');
/** POST /api/session/second-step → the session, signed in. A code works once. */
export const secondStepSchema = z.strictObject({ code: secondStepCodeSchema });
/** POST /api/session/demo → the session; 404 while the demo is off. (DELETE /api/session → 204.) */
export const demoSignInSchema = z.strictObject({ role: roleSchema });
/** PUT /api/account/password → the session, with a new token; the person's other sessions end. */
export const changePasswordSchema = z.strictObject({
  current: z.string().min(1, 'expected your current password').max(200, 'expected at most 200 characters'),
  next: newPasswordSchema,
});
/** The name of a person, as it stands on what they do. */
export const personNameSchema = oneLineSchema('expected a name, at least one character');
export type SignIn = z.infer<typeof signInSchema>;
