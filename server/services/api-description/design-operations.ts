import {
  appliedSuggestionSchema,
  applySuggestionSchema,
  changeCommentSchema,
  commentListSchema,
  threadSchema,
  writeCommentSchema,
} from '#contract/comments.ts';
import {
  changeDesignSchema,
  designSummarySchema,
  openDesignSchema,
  patchListSchema,
  savePatchesSchema,
  savedPatchesSchema,
} from '#contract/designs.ts';
import { sayPresenceSchema } from '#contract/live.ts';
import { designContextSchema } from '#contract/numbering.ts';
import {
  liveQuerySchema,
  pastDocumentQuerySchema,
  patchesQuerySchema,
  thumbnailQuerySchema,
} from '#contract/queries.ts';
import {
  askForReviewSchema,
  buildSchema,
  decideSchema,
  frozenRevisionSchema,
  pastDocumentSchema,
  restoreSchema,
  restoredSchema,
  revisionListSchema,
  revisionSchema,
  sittingListSchema,
  supersedeSchema,
} from '#contract/revisions.ts';
import {
  createShareSchema,
  createdShareSchema,
  openShareSchema,
  openedShareSchema,
  shareListSchema,
  shareSchema,
  sharedSheetSchema,
} from '#contract/shares.ts';
import { sheetExportQuerySchema } from '#contract/sheet-exports.ts';
import { waiveSchema, waiverListSchema, waiverSchema } from '#contract/waivers.ts';
import type { Operation } from './operation.ts';

export const designOperations = {
  'GET /api/designs/:designId': {
    summary: 'Open a design',
    description: 'Its document, its sequence number, and what the reader may do with it.',
    answer: { schema: openDesignSchema },
  },
  'PATCH /api/designs/:designId': {
    summary: 'Rename, archive, delete or restore a design',
    body: changeDesignSchema,
    answer: { schema: designSummarySchema },
  },
  'GET /api/designs/:designId/patches': {
    summary: 'Read the log of edits from a sequence number on',
    query: patchesQuerySchema,
    answer: { schema: patchListSchema },
  },
  'POST /api/designs/:designId/patches': {
    summary: 'Save edits',
    description:
      'JSON merge patches (RFC 7396) on the document, made on top of a sequence number; all are taken or none. The same edit sent twice is applied once.',
    body: savePatchesSchema,
    answer: { schema: savedPatchesSchema },
  },
  'GET /api/designs/:designId/live': {
    summary: 'Follow a design',
    description:
      'Server-sent events (HTML Standard, section 9.2), one for each thing that changes: what it is called, and with edits the sequence number of the last.',
    query: liveQuerySchema,
    answer: { mediaType: 'text/event-stream' },
  },
  'PUT /api/designs/:designId/presence': {
    summary: 'Say where in a design one is',
    body: sayPresenceSchema,
    answer: { status: 204 },
  },
  'GET /api/designs/:designId/thumbnail': {
    summary: 'Draw a design small',
    query: thumbnailQuerySchema,
    answer: { mediaType: 'image/svg+xml' },
  },
  'GET /api/designs/:designId/sheet.svg': {
    summary: 'Draw the sheet as SVG',
    query: sheetExportQuerySchema,
    answer: { mediaType: 'image/svg+xml' },
  },
  'GET /api/designs/:designId/sheet.pdf': {
    summary: 'Draw the sheet as PDF',
    query: sheetExportQuerySchema,
    answer: { mediaType: 'application/pdf' },
  },
  'GET /api/designs/:designId/context': {
    summary: 'Read what checks and numbering know beyond the design',
    answer: { schema: designContextSchema },
  },
} as const satisfies { readonly [route: string]: Operation };

export const reviewOperations = {
  'GET /api/designs/:designId/waivers': { summary: 'List waivers', answer: { schema: waiverListSchema } },
  'POST /api/designs/:designId/waivers': {
    summary: 'Waive a finding for a time',
    body: waiveSchema,
    answer: { status: 201, schema: waiverSchema },
  },
  'DELETE /api/designs/:designId/waivers/:waiverId': {
    summary: 'Withdraw a waiver',
    answer: { schema: waiverSchema },
  },
  'GET /api/designs/:designId/comments': { summary: 'List comments', answer: { schema: commentListSchema } },
  'POST /api/designs/:designId/comments': {
    summary: 'Comment, reply or suggest a change',
    body: writeCommentSchema,
    answer: { status: 201, schema: threadSchema },
  },
  'PATCH /api/comments/:commentId': {
    summary: "Change one's own comment",
    body: changeCommentSchema,
    answer: { schema: threadSchema },
  },
  'DELETE /api/comments/:commentId': { summary: "Delete one's own comment", answer: { status: 204 } },
  'POST /api/comments/:commentId/resolution': {
    summary: 'Resolve a thread',
    answer: { schema: threadSchema },
  },
  'DELETE /api/comments/:commentId/resolution': {
    summary: 'Open a thread again',
    answer: { schema: threadSchema },
  },
  'POST /api/comments/:commentId/application': {
    summary: 'Apply a suggestion',
    body: applySuggestionSchema,
    answer: { schema: appliedSuggestionSchema },
  },
  'GET /api/designs/:designId/revisions': {
    summary: 'List revisions',
    description: 'Who reads no drafts is told of approved and built ones alone.',
    answer: { schema: revisionListSchema },
  },
  'POST /api/designs/:designId/revisions': {
    summary: 'Ask for a review',
    description: 'Freezes the design, its findings and its waivers as a revision.',
    body: askForReviewSchema,
    answer: { status: 201, schema: revisionSchema },
  },
  'GET /api/revisions/:revisionId': {
    summary: 'Open a revision',
    answer: { schema: frozenRevisionSchema },
  },
  'GET /api/revisions/:revisionId/sheet.svg': {
    summary: 'Draw the sheet of a revision as SVG',
    query: sheetExportQuerySchema,
    answer: { mediaType: 'image/svg+xml' },
  },
  'GET /api/revisions/:revisionId/sheet.pdf': {
    summary: 'Draw the sheet of a revision as PDF',
    query: sheetExportQuerySchema,
    answer: { mediaType: 'application/pdf' },
  },
  'POST /api/revisions/:revisionId/withdrawal': {
    summary: 'Take the question for a review back',
    answer: { schema: revisionSchema },
  },
  'POST /api/revisions/:revisionId/decision': {
    summary: 'Approve a revision or send it back',
    body: decideSchema,
    answer: { schema: revisionSchema },
  },
  'POST /api/revisions/:revisionId/build': {
    summary: 'Say that a revision was built',
    body: buildSchema,
    answer: { schema: revisionSchema },
  },
  'POST /api/revisions/:revisionId/supersession': {
    summary: 'Say that nobody is to build from a revision any more',
    body: supersedeSchema,
    answer: { schema: revisionSchema },
  },
  'POST /api/designs/:designId/draft': {
    summary: 'Start the next revision',
    answer: { schema: designSummarySchema },
  },
  'POST /api/designs/:designId/restoration': {
    summary: 'Restore an earlier state as a new draft',
    body: restoreSchema,
    answer: { schema: restoredSchema },
  },
  'GET /api/designs/:designId/document': {
    summary: 'Read a design as it was',
    query: pastDocumentQuerySchema,
    answer: { schema: pastDocumentSchema },
  },
  'GET /api/designs/:designId/shares': {
    summary: 'List links that show revisions to guests',
    answer: { schema: shareListSchema },
  },
  'POST /api/designs/:designId/shares': {
    summary: 'Make a link that shows a revision to guests',
    description: 'The link is in this answer and never again.',
    body: createShareSchema,
    answer: { status: 201, schema: createdShareSchema },
  },
  'DELETE /api/shares/:shareId': { summary: 'Revoke a link', answer: { schema: shareSchema } },
  'POST /api/share': {
    summary: 'Open a link as a guest',
    description: 'Locked until the passphrase comes with it, where there is one.',
    body: openShareSchema,
    answer: { schema: openedShareSchema },
  },
  'POST /api/share/sheet': {
    summary: 'Draw a sheet of what a link shows',
    body: sharedSheetSchema,
    answer: { mediaType: 'image/svg+xml' },
  },
  'GET /api/designs/:designId/sittings': {
    summary: 'Read who changed a design when',
    answer: { schema: sittingListSchema },
  },
} as const satisfies { readonly [route: string]: Operation };
