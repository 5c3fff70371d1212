import { z } from 'zod';
import type { Issue } from '../engine/model/issue.ts';
import { severities } from '../engine/rules/finding.ts';
import type { Finding } from '../engine/rules/finding.ts';
import { countsSchema } from './designs.ts';
import { waiverSchema } from './waivers.ts';

export const revisionStates = [
  'in-review',
  'withdrawn',
  'sent-back',
  'approved',
  'built',
  'superseded',
] as const;
export type RevisionState = (typeof revisionStates)[number];

/** Who did something: the name as it was then, and the id unless that person is gone. */
const actorSchema = z.object({ id: z.string().nullable(), name: z.string() });

/** A design frozen when a review was asked for, without its document. */
export const revisionSchema = z.object({
  id: z.string(),
  designId: z.string(),
  /** 1, 2, 3 … in the order in which reviews were asked for. */
  number: z.int(),
  /** What the title block says, such as C. None is used twice in a design, whatever became of the review. */
  label: z.string(),
  state: z.enum(revisionStates),
  /** Number of the last patch that is in it. */
  sequence: z.int(),
  /** SHA-256 of the document as canonical JSON (RFC 8785), hex. */
  contentHash: z.string(),
  engineVersion: z.string(),
  /** Open findings, those that no waiver covers: when review was asked for, and for good when it was decided. */
  counts: countsSchema,
  /** How many findings waivers cover. */
  waived: z.int(),
  /** What the one who asked tells the reviewers. */
  message: z.string(),
  askedBy: actorSchema,
  askedAt: z.iso.datetime(),
  /** Who approved, sent back or took back; null while in review. */
  decidedBy: actorSchema.nullable(),
  decidedAt: z.iso.datetime().nullable(),
  /** The approver's note, or the reason for sending back. */
  note: z.string(),
  builtBy: actorSchema.nullable(),
  builtOn: z.iso.date().nullable(),
  supersededBy: actorSchema.nullable(),
  supersededAt: z.iso.datetime().nullable(),
  /** By which revision, or why it is not to be built from any more. */
  supersededNote: z.string(),
});
export type Revision = z.infer<typeof revisionSchema>;

/** GET /api/designs/:designId/revisions, the newest first. Who reads no drafts is told of approved and built ones alone. */
export const revisionListSchema = z.object({ revisions: z.array(revisionSchema) });

const findingSchema = z.custom<Finding>(
  (value) => z.looseObject({ key: z.string(), severity: z.enum(severities) }).safeParse(value).success,
);

/** GET /api/revisions/:revisionId: all that was frozen. */
export const frozenRevisionSchema = z.object({
  revision: revisionSchema,
  workspaceId: z.string(),
  engagementName: z.string(),
  /** Exactly as frozen: `contentHash` is of it. Draw `asIssued(document, issueOf(revision))`. */
  document: z.unknown(),
  /** What the checks said, with pools and other designs' numbers as they were; waived ones among them. */
  findings: z.array(findingSchema),
  /** Those that covered a finding, with reason and last day. */
  waivers: z.array(waiverSchema),
});
export type FrozenRevision = z.infer<typeof frozenRevisionSchema>;

// eslint-disable-next-line no-control-regex
const noControls = /^[^\u0000-\u0008\u000b-\u001f\u007f]*$/;
const words = z
  .string()
  .trim()
  .max(2000, 'expected at most 2,000 characters')
  .regex(noControls, 'expected text without control characters');

/**
 * POST /api/designs/:designId/revisions → 201, the revision: asks for a review. `sequence` is what the one who asks has seen:
 * when others saved since, 409 and nothing is frozen.
 */
export const askForReviewSchema = z.strictObject({
  message: words.optional(),
  sequence: z.int().min(0, 'expected the sequence number that you have seen'),
});
export type AskForReview = z.infer<typeof askForReviewSchema>;

/** POST /api/revisions/:revisionId/withdrawal (no body) → the revision; the design is a draft again. */

/** POST /api/revisions/:revisionId/decision → the revision. Sending back takes a reason. */
export const decideSchema = z.discriminatedUnion('decision', [
  z.strictObject({ decision: z.literal('approve'), note: words.optional() }),
  z.strictObject({
    decision: z.literal('send-back'),
    note: words.min(1, 'expected a reason, so that the author knows what to mend'),
  }),
]);
export type Decide = z.infer<typeof decideSchema>;

/** POST /api/revisions/:revisionId/build → the revision. The day is not before the approval and not to come. */
export const buildSchema = z.strictObject({ builtOn: z.iso.date('expected a day such as 2027-03-31') });

/**
 * POST /api/revisions/:revisionId/supersession → the revision: nobody is to build from it any more, though no other takes its
 * place. (The approval of the next one does that by itself.)
 */
export const supersedeSchema = z.strictObject({
  reason: words.min(1, 'expected a reason, so that who finds it later knows why'),
});

/** POST /api/designs/:designId/draft (no body) → the design's summary: it is a draft again, what was approved stays. */

/**
 * POST /api/designs/:designId/restoration → the patch that was logged, none where nothing differs: the draft becomes what it
 * was in a revision or after a patch. A design that is approved or built becomes a draft by it. One of the two is given.
 */
export const restoreSchema = z
  .strictObject({
    revisionId: z.guid('expected the id of a revision').optional(),
    sequence: z.int().min(0, 'expected a sequence number such as 17').optional(),
  })
  .refine(({ revisionId, sequence }) => (revisionId === undefined) !== (sequence === undefined), {
    path: ['revisionId'],
    message: 'expected either revisionId or sequence',
  });
export type Restore = z.infer<typeof restoreSchema>;
export const restoredSchema = z.object({ sequence: z.int(), editId: z.string().nullable() });
export type Restored = z.infer<typeof restoredSchema>;

/** GET /api/designs/:designId/document?sequence=N: the design as it was after that patch. */
export const pastDocumentSchema = z.object({ sequence: z.int(), document: z.unknown() });

/** GET /api/designs/:designId/sittings, the newest first: what one person saved without a long pause, as one line of the log. */
export const sittingSchema = z.object({
  /** The person's name; null for a repair and for who is gone. */
  by: z.string().nullable(),
  from: z.iso.datetime(),
  until: z.iso.datetime(),
  /** Numbers of its first and last patch. */
  firstSequence: z.int(),
  lastSequence: z.int(),
});
export type Sitting = z.infer<typeof sittingSchema>;
export const sittingListSchema = z.object({
  sittings: z.array(sittingSchema),
  /** Who began the design, and when. */
  createdBy: z.string().nullable(),
  createdAt: z.iso.datetime(),
});
export type SittingList = z.infer<typeof sittingListSchema>;

/** The title block of a revision, from its state rather than from what somebody typed (ISO 7200:2004, 5.1.2, 5.1.4 and 5.2, from memory). */
export const issueOf = ({
  label,
  state,
  decidedBy,
  decidedAt,
}: Pick<Revision, 'label' | 'state' | 'decidedBy' | 'decidedAt'>): Issue => ({
  revision: label,
  status: revisionStateWords[state],
  ...(isIssued(state) && decidedBy !== null && decidedAt !== null
    ? { approvedBy: decidedBy.name.slice(0, 80), dateOfIssue: decidedAt.slice(0, 10) }
    : {}),
});

export const revisionStateWords: { readonly [state in RevisionState]: string } = {
  'in-review': 'In review',
  withdrawn: 'Taken back',
  'sent-back': 'Sent back',
  approved: 'Approved',
  built: 'Built',
  superseded: 'Superseded',
};

/** Whether somebody approved it, whatever became of it then. */
export const isIssued = (state: RevisionState): boolean =>
  state === 'approved' || state === 'built' || state === 'superseded';
