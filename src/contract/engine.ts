import { z } from 'zod';
import { collections } from '../engine/model/design.ts';
import { severities } from '../engine/rules/finding.ts';
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

/**
 * POST /api/engine/rules: the catalogue of checks, whole or narrowed. With a design only the checks that are left run on it,
 * and each says what it found: so a script holds a design against the checks that it cares about.
 */
export const rulesRequestSchema = z.strictObject({
  /** Checks of these usual severities; a single finding may be milder or harder, and says why. */
  severities: z.array(z.enum(severities)).min(1, 'expected at least one severity').optional(),
  /** Checks that read one of these parts of a design. */
  collections: z
    .array(z.enum(['meta', ...collections]))
    .min(1, 'expected at least one part of a design')
    .optional(),
  ids: z.array(z.string()).min(1, 'expected at least one id').max(500, 'expected at most 500 ids').optional(),
  design: z.unknown().optional(),
});
const ruleSchema = z.object({
  id: z.string(),
  /** The good state. */
  title: z.string(),
  severity: z.enum(severities),
  why: z.string(),
  seen: z.string(),
  sources: z.array(z.union([z.string(), z.object({ document: z.string(), clause: z.string().optional() })])),
  messages: z.array(
    z.object({
      id: z.string(),
      words: z.string(),
      why: z.string().optional(),
      seen: z.string().optional(),
    }),
  ),
  looksAt: z.array(z.string()),
  canFix: z.boolean(),
  /** What it found in the design, most severe first; absent where none was sent. */
  findings: z.array(z.record(z.string(), z.unknown())).optional(),
});
export const rulesAnswerSchema = z.object({
  engineVersion: z.string(),
  /** Over the findings of the checks that ran; absent where no design was sent. */
  counts: z.object({ blocking: z.int(), degrading: z.int(), advisory: z.int() }).optional(),
  /** In order of id. */
  rules: z.array(ruleSchema),
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

const record = z.record(z.string(), z.unknown());

/** POST /api/engine/load: what the design's demands put on it. */
export const loadRequestSchema = z.strictObject({
  design: z.unknown(),
  /** All rates times this. */
  multiplier: z.number().optional(),
  /** The window of a TCP flow, in place of what the demands say themselves. */
  windowBytes: z.number().optional(),
});
export const loadAnswerSchema = z.object({
  engineVersion: z.string(),
  demands: z.array(record),
  elements: z.array(record),
  /** The fullest first. */
  limits: z.array(record),
  bottleneck: record.optional(),
  missing: z.array(record),
});

/** POST /api/engine/outage: what parts once these elements have failed together. */
export const outageRequestSchema = z.strictObject({
  design: z.unknown(),
  failed: z
    .array(
      z.strictObject({
        collection: z.enum(collections),
        id: z.string(),
        port: z.string().optional(),
        member: z.union([z.literal(1), z.literal(2)], 'expected member 1 or 2').optional(),
      }),
    )
    .min(1, 'expected at least one element')
    .max(200, 'expected at most 200 elements'),
  /** Lists the pairs of hosts that are parted, not only how many they are. */
  pairs: z.boolean().optional(),
});
export const outageAnswerSchema = z.object({
  engineVersion: z.string(),
  segments: z.array(record),
  pairCount: z.int(),
  gone: z.array(record),
  tunnelsDown: z.array(record),
  tunnelsMoved: z.array(record),
  failedOver: z.array(record),
});
