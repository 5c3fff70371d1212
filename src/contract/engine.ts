import { z } from 'zod';
import { probeSchema } from '../engine/trace/probe.ts';

// No route of the engine needs a sign-in or a token. POST /api/engine/wire is described by the engine's wireRequestSchema.

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

/** POST /api/engine/trace: a design and one frame in, everything that happens to it out; nothing is kept. */
export const traceRequestSchema = z.strictObject({ design: z.unknown(), probe: probeSchema });
export const traceAnswerSchema = z.object({
  engineVersion: z.string(),
  /** In one sentence, what came of the frame. */
  words: z.string(),
  /** The hops of every copy, nearest first; each names the one before as `parent`. */
  steps: z.array(z.record(z.string(), z.unknown())),
  deliveries: z.array(z.record(z.string(), z.unknown())),
  storm: z.record(z.string(), z.unknown()).optional(),
  assumptions: z.array(z.record(z.string(), z.unknown())),
});
