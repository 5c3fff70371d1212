import { z } from 'zod';
import { severities } from '../engine/rules/finding.ts';
import { countsSchema } from './designs.ts';
import { linkTokenSchema } from './invitations.ts';
import { oneLineSchema } from './one-line.ts';
import { revisionStates } from './revisions.ts';
import { exportLooks } from './sheet-exports.ts';

/** For how long a link may lead to a revision. */
export const longestShareDays = 365;

/** A link that shows one revision to whoever has it. The link itself is nowhere kept. */
export const shareSchema = z.object({
  id: z.string(),
  revisionId: z.string(),
  revisionLabel: z.string(),
  revisionState: z.enum(revisionStates),
  /** Who it is for, in the words of who made it. */
  label: z.string(),
  hasPassphrase: z.boolean(),
  showsAddresses: z.boolean(),
  showsFindings: z.boolean(),
  tellsMaker: z.boolean(),
  /** The last day on which it opens. */
  expiresOn: z.iso.date(),
  /** Names of people. */
  madeBy: z.string().nullable(),
  madeAt: z.iso.datetime(),
  revokedBy: z.string().nullable(),
  revokedAt: z.iso.datetime().nullable(),
  /** How often it was opened, and when last. */
  views: z.int(),
  viewedAt: z.iso.datetime().nullable(),
});
export type Share = z.infer<typeof shareSchema>;

/** GET /api/designs/:designId/shares: the newest first. DELETE /api/shares/:shareId → the share, revoked; it stays on record. */
export const shareListSchema = z.object({ shares: z.array(shareSchema) });

/** POST /api/designs/:designId/shares → 201, the share and its link, which is in this answer and never again. */
export const createShareSchema = z.strictObject({
  revisionId: z.guid('expected the id of a revision'),
  label: oneLineSchema('expected who it is for, at least one character'),
  expiresOn: z.iso.date('expected a day such as 2027-03-31'),
  passphrase: z
    .string()
    .min(8, 'expected at least 8 characters')
    .max(200, 'expected at most 200 characters')
    .optional(),
  showsAddresses: z.boolean(),
  showsFindings: z.boolean(),
  tellsMaker: z.boolean().optional(),
});
export type CreateShare = z.infer<typeof createShareSchema>;
export const createdShareSchema = z.object({ link: z.string(), share: shareSchema });

const keySchema = {
  token: linkTokenSchema,
  passphrase: z.string().max(200, 'expected at most 200 characters').optional(),
};
/** POST /api/share → what the link shows; locked until the passphrase comes with it. 404 where it opens no longer. */
export const openShareSchema = z.strictObject(keySchema);
/** POST /api/share/sheet → image/svg+xml: one sheet of it. */
export const sharedSheetSchema = z.strictObject({
  ...keySchema,
  look: z.enum(exportLooks).optional(),
  sheet: z.int().min(1, 'expected the number of a sheet, from 1').optional(),
});

export const sharedViewSchema = z.object({
  label: z.string(),
  /** The firm that shares it. */
  workspaceName: z.string(),
  engagementName: z.string(),
  title: z.string(),
  identification: z.string().nullable(),
  revision: z.string(),
  state: z.enum(revisionStates),
  approvedBy: z.string().nullable(),
  dateOfIssue: z.string().nullable(),
  expiresOn: z.iso.date(),
  sheets: z.int(),
  sites: z.array(z.string()),
  transports: z.array(z.object({ name: z.string(), trusted: z.boolean() })),
  segments: z.array(
    z.object({
      name: z.string(),
      /** Left out with the addresses. */
      subnets: z.array(z.string()),
      sites: z.array(z.string()),
      tunnels: z.int(),
      /** Of those, how many are protected by an IPsec association. */
      protected: z.int(),
    }),
  ),
  /** Null where the sharer left findings out. */
  findings: z
    .object({
      counts: countsSchema,
      open: z.array(z.object({ severity: z.enum(severities), sentence: z.string() })),
      waived: z.array(z.object({ sentence: z.string(), reason: z.string(), expiresOn: z.string() })),
    })
    .nullable(),
  leftOut: z.array(z.enum(['addresses', 'findings'])),
});
export type SharedView = z.infer<typeof sharedViewSchema>;
export const openedShareSchema = z.discriminatedUnion('isLocked', [
  z.object({ isLocked: z.literal(true) }),
  z.object({ isLocked: z.literal(false), view: sharedViewSchema }),
]);
export type OpenedShare = z.infer<typeof openedShareSchema>;
