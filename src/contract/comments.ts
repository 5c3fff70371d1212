import { z } from 'zod';
import { collections } from '../engine/model/design.ts';
import type { MergePatch } from '../engine/model/merge-patch.ts';
import { roleSchema } from './session.ts';

export const mostCommentCharacters = 4000;
/** For how long one's own words can be changed after they were sent. */
export const commentEditableForMinutes = 60;

/** Stands for a person in a comment's words; shown as '@' and the name that they have now. */
export const mentionToken = (personId: string): string => `@{${personId}}`;
export const mentionPattern = /@\{([0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12})\}/g;
export const mentionedIn = (body: string): readonly string[] => [
  ...new Set([...body.matchAll(mentionPattern)].map(([, id]) => id!)),
];

const elementRefSchema = z.strictObject({
  collection: z.enum(collections),
  id: z.string().min(1, 'expected the id of an element').max(64, 'expected the id of an element'),
  port: z.string().min(1).max(64).optional(),
  member: z.union([z.literal(1), z.literal(2)]).optional(),
});

const commenterSchema = z.object({ id: z.string(), name: z.string(), initials: z.string() });
export type Commenter = z.infer<typeof commenterSchema>;

/** What a thread is about, with what that was called when the thread began. */
export const pinSchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('design') }),
  z.object({
    kind: z.literal('element'),
    ref: elementRefSchema,
    /** Keys below the element's entry that lead to one property; none: the whole element. */
    path: z.array(z.string()),
    called: z.string(),
  }),
  z.object({
    kind: z.literal('finding'),
    key: z.string(),
    /** Where the finding's balloon points. */
    ref: elementRefSchema.nullable(),
    called: z.string(),
  }),
]);
export type Pin = z.infer<typeof pinSchema>;

const patchSchema = z.custom<MergePatch>(
  (value) => typeof value === 'object' && value !== null && !Array.isArray(value),
  'expected a merge patch (RFC 7396) of the design, as an object',
);

/** A change that somebody proposes. `before` is the patch that would take it back: the values that it was meant to change. */
export const suggestionSchema = z.object({
  patch: patchSchema,
  before: patchSchema,
  /** Number of the last patch that its author had seen. */
  baseSequence: z.int(),
  appliedBy: commenterSchema.nullable(),
  appliedAt: z.iso.datetime().nullable(),
  /** Number of the patch that it became. */
  appliedSequence: z.int().nullable(),
});
export type Suggestion = z.infer<typeof suggestionSchema>;

export const commentSchema = z.object({
  id: z.string(),
  /** Null when that person is gone. */
  author: commenterSchema.nullable(),
  writtenAt: z.iso.datetime(),
  editedAt: z.iso.datetime().nullable(),
  /** Its words are gone and its place stays, because others replied. */
  deletedAt: z.iso.datetime().nullable(),
  /** Plain text with line breaks; people stand as mention tokens. */
  body: z.string(),
  mentions: z.array(z.object({ id: z.string(), name: z.string() })),
  /** The revision that was in review when it was written. */
  revision: z.object({ id: z.string(), label: z.string() }).nullable(),
  suggestion: suggestionSchema.nullable(),
});
export type Comment = z.infer<typeof commentSchema>;

export const threadSchema = z.object({
  /** Also the id of its first comment. */
  id: z.string(),
  pin: pinSchema,
  resolvedBy: commenterSchema.nullable(),
  resolvedAt: z.iso.datetime().nullable(),
  /** In the order in which they were written. */
  comments: z.array(commentSchema),
});
export type Thread = z.infer<typeof threadSchema>;

/** GET /api/designs/:designId/comments: all threads, the last begun first, and who can be mentioned in them. */
export const commentListSchema = z.object({
  threads: z.array(threadSchema),
  members: z.array(z.object({ ...commenterSchema.shape, role: roleSchema })),
});
export type CommentList = z.infer<typeof commentListSchema>;
export type Mentionable = CommentList['members'][number];

// eslint-disable-next-line no-control-regex
const noControls = /^[^\u0000-\u0008\u000b-\u001f\u007f]*$/;
const bodySchema = z
  .string()
  .trim()
  .min(1, 'expected words')
  .max(mostCommentCharacters, `expected at most ${mostCommentCharacters.toLocaleString('en-GB')} characters`)
  .regex(noControls, 'expected text without control characters');

/** What a new thread is about. A property's path leads to something that the element has or may have. */
export const pinToSchema = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('design') }),
  z.strictObject({
    kind: z.literal('element'),
    ref: elementRefSchema,
    path: z.array(z.string().min(1).max(64)).max(8, 'expected at most 8 keys').optional(),
  }),
  z.strictObject({
    kind: z.literal('finding'),
    key: z.string().min(1, 'expected the key of a finding').max(20_000, 'expected the key of a finding'),
  }),
]);
export type PinTo = z.infer<typeof pinToSchema>;

/**
 * POST /api/designs/:designId/comments → 201, the thread. Begins one, about the whole design unless `pin` says otherwise, or
 * replies to one. With a suggestion: a patch made on `baseSequence` that leaves a valid design, else 422.
 */
export const writeCommentSchema = z
  .strictObject({
    body: bodySchema,
    pin: pinToSchema.optional(),
    /** Id of a thread. */
    replyTo: z.guid('expected the id of a thread').optional(),
    suggestion: z
      .strictObject({
        patch: patchSchema,
        baseSequence: z.int().min(0, 'expected the sequence number that you have seen'),
      })
      .optional(),
  })
  .refine(({ pin, replyTo }) => pin === undefined || replyTo === undefined, {
    path: ['pin'],
    message: 'expected no pin in a reply; it is about what its thread is about',
  });
export type WriteComment = z.infer<typeof writeCommentSchema>;

/** PATCH /api/comments/:commentId → the thread. One's own, for an hour. */
export const changeCommentSchema = z.strictObject({ body: bodySchema });

/**
 * DELETE /api/comments/:commentId → 204. One's own. The first of a thread leaves its place while there are replies.
 * POST /api/comments/:commentId/resolution (no body) → the thread, resolved; DELETE → the thread, open again.
 */

/**
 * POST /api/comments/:commentId/application → the suggestion becomes a patch of the design. Where the design has moved on in
 * what the suggestion changes, 409 with a detail for each such place, unless `confirmed`.
 */
export const applySuggestionSchema = z.strictObject({
  /** A fresh UUID: the patch's edit id. */
  editId: z.guid('expected a UUID'),
  confirmed: z.boolean().optional(),
});
export const appliedSuggestionSchema = z.object({ thread: threadSchema, sequence: z.int() });
