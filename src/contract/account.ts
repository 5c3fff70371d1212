import { z } from 'zod';
import { oneLineSchema } from './one-line.ts';
import { secondStepCodeSchema } from './session.ts';

export const passwordSchema = z
  .string()
  .min(1, 'expected your password')
  .max(200, 'expected at most 200 characters');

/** GET /api/account/second-step: whether the reader's sign-in asks for a code besides the password. */
export const secondStepStateSchema = z.object({
  isOn: z.boolean(),
  since: z.iso.datetime().nullable(),
  recoveryCodesLeft: z.int(),
  /** Names of the reader's workspaces that ask for it. */
  askedBy: z.array(z.string()),
  /** False for the people of the demo, who sign in with one press. */
  isOffered: z.boolean(),
});
export type SecondStepState = z.infer<typeof secondStepStateSchema>;

/** POST /api/account/second-step → what an authenticator app has to be told; nothing changes until it is confirmed. */
export const secondStepOfferSchema = z.object({
  /** Base 32 (RFC 4648 section 6). */
  secret: z.string(),
  uri: z.string(),
  /** The same as a picture to scan: a data URL. */
  picture: z.string(),
});

/**
 * PUT /api/account/second-step with a code of the new secret and the password: switches it on → the recovery codes; the
 * person's other sessions end.
 * POST /api/account/second-step/off → 204. POST /api/account/second-step/recovery-codes → new codes; the old ones end.
 */
export const secondStepProofSchema = z.strictObject({ code: secondStepCodeSchema, password: passwordSchema });
export const recoveryCodesSchema = z.object({ recoveryCodes: z.array(z.string()) });

/** GET /api/account/sessions: where the reader is signed in, the last used first. */
export const sessionListSchema = z.object({
  sessions: z.array(
    z.object({
      id: z.string(),
      isThisOne: z.boolean(),
      /** What the browser said of itself. */
      userAgent: z.string(),
      address: z.string(),
      startedAt: z.iso.datetime().nullable(),
      lastUsedAt: z.iso.datetime(),
      /** Stays when the browser is closed. */
      isKept: z.boolean(),
    }),
  ),
});
export type SignedInSession = z.infer<typeof sessionListSchema>['sessions'][number];
/** DELETE /api/account/sessions/:sessionId → 204. DELETE /api/account/sessions → 204: all but the reader's own. */

export const tokenScopes = ['read', 'write'] as const;
export type TokenScope = (typeof tokenScopes)[number];
/** A personal token: what a script sends as `Authorization: Bearer …`. It never may more than its owner. */
export const apiTokenSchema = z.object({
  id: z.string(),
  name: z.string(),
  /** Its first characters. */
  prefix: z.string(),
  scope: z.enum(tokenScopes),
  /** Null: every workspace of its owner. */
  workspaceName: z.string().nullable(),
  createdAt: z.iso.datetime(),
  expiresAt: z.iso.datetime(),
  lastUsedAt: z.iso.datetime().nullable(),
  revokedAt: z.iso.datetime().nullable(),
});
export type ApiToken = z.infer<typeof apiTokenSchema>;
/** GET /api/account/tokens: the reader's, the newest first. DELETE /api/account/tokens/:tokenId → the token, revoked. */
export const apiTokenListSchema = z.object({ tokens: z.array(apiTokenSchema) });
/** POST /api/account/tokens → 201 */
export const createApiTokenSchema = z.strictObject({
  name: oneLineSchema('expected a name, such as what will use the token'),
  scope: z.enum(tokenScopes),
  workspaceId: z.guid('expected the id of a workspace, or null for all').nullable(),
  /** The last day on which it works, by UTC: from today to a year from today. */
  expiresOn: z.iso.date('expected a day such as 2027-03-31'),
});
/** The token itself is in this answer alone; it is stored as a hash. */
export const createdApiTokenSchema = z.object({ secret: z.string(), token: apiTokenSchema });

/** GET /api/account/deletion: what deleting the reader's account would mean. */
export const deletionPreviewSchema = z.object({
  /** Workspaces with others in them that would be left without an owner; while there are any it is refused. */
  lastOwnerOf: z.array(z.object({ workspaceId: z.string(), workspaceName: z.string() })),
  /** Workspaces that nobody else is in; they go with the account. */
  aloneIn: z.array(z.object({ workspaceId: z.string(), workspaceName: z.string() })),
  /** A code is asked for besides the password. */
  needsCode: z.boolean(),
  isOffered: z.boolean(),
});
export type DeletionPreview = z.infer<typeof deletionPreviewSchema>;
/** POST /api/account/deletion → 204, signed out. The name stays on what the person did. */
export const deleteAccountSchema = z.strictObject({
  password: passwordSchema,
  code: secondStepCodeSchema.optional(),
});
