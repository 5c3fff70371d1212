import { z } from 'zod';

// Neither route of the engine needs a sign-in or a token. POST /api/engine/wire is described by the engine's wireRequestSchema.

/** POST /api/engine/check: a design's own JSON in, findings out; nothing is kept. */
export const checkRequestSchema = z.strictObject({
  design: z.unknown(),
  /** Left out unless asked for, and then worked out for the 20 most severe findings: fixes cost a run of all checks each. */
  withFixes: z.boolean().optional(),
});
export const checkAnswerSchema = z.object({
  engineVersion: z.string(),
  counts: z.object({ blocking: z.int(), degrading: z.int(), advisory: z.int() }),
  /** The engine's findings, most severe first; the first with their `fixes` when they were asked for. */
  findings: z.array(z.record(z.string(), z.unknown())),
});
