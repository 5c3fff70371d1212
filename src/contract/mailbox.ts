import { z } from 'zod';

/** A mail that the local catcher kept. */
const keptMailSchema = z.object({
  id: z.string(),
  to: z.string(),
  subject: z.string(),
  keptAt: z.iso.datetime(),
});
export type KeptMail = z.infer<typeof keptMailSchema>;

/** GET /api/workspaces/:workspaceId/mailbox, for owners: the newest first. */
export const mailboxSchema = z.object({
  /** False where a mail server is configured: nothing is kept any more. */
  isKeeping: z.boolean(),
  mails: z.array(keptMailSchema),
});
/** GET /api/workspaces/:workspaceId/mailbox/:mailId; its HTML is the page at …/:mailId/page. */
export const openedMailSchema = keptMailSchema.extend({
  from: z.string(),
  text: z.string(),
  /** Every line as it came over the wire. */
  source: z.string(),
});
export type OpenedMail = z.infer<typeof openedMailSchema>;
