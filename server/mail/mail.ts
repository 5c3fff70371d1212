import { z } from 'zod';
import { roleSchema } from '#contract/session.ts';

const personSchema = z.object({ email: z.string(), name: z.string(), personId: z.string() });

const notificationSchema = z.discriminatedUnion('kind', [
  z.object({
    kind: z.enum(['review-asked', 'approved', 'sent-back']),
    workspaceId: z.string(),
    to: personSchema,
    designTitle: z.string(),
    /** Name of who asked or decided. */
    by: z.string(),
    /** What they wrote with it; may be empty. */
    message: z.string(),
    link: z.string(),
  }),
  z.object({
    kind: z.literal('mention'),
    workspaceId: z.string(),
    to: personSchema,
    designTitle: z.string(),
    by: z.string(),
    /** What of the comment is worth reading before opening it. */
    excerpt: z.string(),
    link: z.string(),
  }),
  z.object({
    kind: z.literal('share-opened'),
    workspaceId: z.string(),
    to: personSchema,
    designTitle: z.string(),
    /** What the share was called by who made it. */
    label: z.string(),
    link: z.string(),
  }),
]);

/** Every mail that others may queue. Links begin with the public address of the site. */
export const mailSchema = z.discriminatedUnion('kind', [
  z.object({
    kind: z.literal('invitation'),
    workspaceId: z.string(),
    to: z.string(),
    workspaceName: z.string(),
    inviterName: z.string(),
    role: roleSchema,
    link: z.string(),
    expiresAt: z.coerce.date(),
  }),
  z.object({
    kind: z.literal('reset'),
    to: personSchema,
    link: z.string(),
    expiresAt: z.coerce.date(),
  }),
  notificationSchema,
]);
export type Mail = z.infer<typeof mailSchema>;

/** A mail that a person may have at once, in one mail a day, or not at all. */
export type Notification = z.infer<typeof notificationSchema>;

/** What a person wants to have in one mail a day. */
const digestSchema = z.object({
  kind: z.literal('digest'),
  to: personSchema,
  items: z.array(notificationSchema),
});
export type Digest = z.infer<typeof digestSchema>;

/** What the table of mails holds. */
export const queuedMailSchema = z.union([mailSchema, digestSchema]);
