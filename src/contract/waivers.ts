import { z } from 'zod';
import { severities } from '../engine/rules/finding.ts';

/** A finding that somebody accepted for a time, and why. Whether it still holds is applyWaivers' to say. */
export const waiverSchema = z.object({
  id: z.string(),
  findingKey: z.string(),
  /** Of the finding as it was waived. */
  fingerprint: z.string(),
  rule: z.string(),
  severity: z.enum(severities),
  /** What the finding said when it was waived. */
  sentence: z.string(),
  reason: z.string(),
  /** The last day on which it holds, by UTC. */
  expiresOn: z.iso.date(),
  /** The person's name. */
  madeBy: z.string().nullable(),
  madeAt: z.iso.datetime(),
  withdrawnBy: z.string().nullable(),
  withdrawnAt: z.iso.datetime().nullable(),
});
export type Waiver = z.infer<typeof waiverSchema>;

/** GET /api/designs/:designId/waivers: those that stand, and the last that were withdrawn; the newest first. */
export const waiverListSchema = z.object({ waivers: z.array(waiverSchema) });

// eslint-disable-next-line no-control-regex
const noControls = /^[^\u0000-\u0008\u000b-\u001f\u007f]*$/;

/**
 * POST /api/designs/:designId/waivers → 201, the waiver. The finding must be the one that was looked at: the design as it is
 * stored has the key with this fingerprint, else 409. Waiving again takes the earlier waiver's place.
 */
export const waiveSchema = z.strictObject({
  findingKey: z.string().min(1, 'expected the key of a finding').max(20_000, 'expected the key of a finding'),
  fingerprint: z.string().regex(/^[0-9a-f]{16}$/, 'expected the fingerprint of the finding'),
  reason: z
    .string()
    .trim()
    .min(1, 'expected a reason, so that the next reader knows why')
    .max(1000, 'expected at most 1,000 characters')
    .regex(noControls, 'expected text without control characters'),
  /** From today to a year from today, by UTC. */
  expiresOn: z.iso.date('expected a day such as 2027-03-31'),
});
export type Waive = z.infer<typeof waiveSchema>;

/** DELETE /api/designs/:designId/waivers/:waiverId → the waiver, withdrawn; it stays on record. */
