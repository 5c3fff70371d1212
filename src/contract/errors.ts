import { z } from 'zod';

/** Codes that clients branch on; the message is for people. */
export const errorCodes = [
  'invalid-request',
  'not-signed-in',
  'wrong-credentials',
  'not-allowed',
  'second-step-required',
  'not-found',
  'conflict',
  'csrf',
  'too-large',
  'too-many-requests',
  'invalid-design',
  'unavailable',
  'internal',
] as const;
export type ErrorCode = (typeof errorCodes)[number];

export const problemSchema = z.object({ path: z.string(), value: z.string(), expected: z.string() });

export const errorSchema = z.object({
  code: z.enum(errorCodes),
  message: z.string(),
  /** One per field at fault, where there is one. */
  details: z.array(problemSchema).optional(),
  /** Seconds to wait, with `too-many-requests`. */
  retryAfterSeconds: z.int().optional(),
  requestId: z.string(),
});
export type ErrorBody = z.infer<typeof errorSchema>;
