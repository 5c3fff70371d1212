import { z } from 'zod';

// Neither route of the engine needs a sign-in or a token. POST /api/engine/wire is described by the engine's wireRequestSchema.

/** POST /api/engine/check: a design's own JSON in, findings out; nothing is kept. */
export const checkRequestSchema = z.strictObject({
  design: z.unknown(),
  /** Fixes cost a run of all rules each; left out unless asked for. */
  withFixes: z.boolean().optional(),
});
export const checkAnswerSchema = z.object({
  engineVersion: z.string(),
  counts: z.object({ blocking: z.int(), degrading: z.int(), advisory: z.int() }),
  /** The engine's findings, most severe first; each with its `fixes` when they were asked for. */
  findings: z.array(z.record(z.string(), z.unknown())),
});
