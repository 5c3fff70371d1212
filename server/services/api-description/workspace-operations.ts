import { activityFilterSchema, activityPageSchema, activityQuerySchema } from '#contract/activity.ts';
import {
  changeEngagementSchema,
  createDesignSchema,
  createEngagementSchema,
  designSummarySchema,
  engagementListSchema,
  engagementSchema,
} from '#contract/designs.ts';
import { invitationListSchema, invitationSchema, inviteSchema } from '#contract/invitations.ts';
import { mailboxSchema, openedMailSchema } from '#contract/mailbox.ts';
import { putPoolsSchema, workspacePoolsSchema } from '#contract/numbering.ts';
import {
  changeProfileSchema,
  createProfileSchema,
  equipmentProfileSchema,
  profileListSchema,
} from '#contract/profiles.ts';
import { engagementsQuerySchema } from '#contract/queries.ts';
import { membershipSchema } from '#contract/session.ts';
import {
  changeMemberSchema,
  changeWorkspaceSchema,
  createWorkspaceSchema,
  memberListSchema,
  memberSchema,
  workspaceListSchema,
  workspaceSettingsSchema,
} from '#contract/workspaces.ts';
import { deleteWorkspaceSchema, workspaceExportSchema } from '#contract/workspace-export.ts';
import type { Operation } from './operation.ts';

export const workspaceOperations = {
  'GET /api/workspaces': {
    summary: "List the reader's workspaces",
    answer: { schema: workspaceListSchema },
  },
  'POST /api/workspaces': {
    summary: 'Start a workspace',
    description: 'Whoever starts it owns it.',
    body: createWorkspaceSchema,
    answer: { status: 201, schema: membershipSchema },
  },
  'GET /api/workspaces/:workspaceId': {
    summary: 'Read the settings of a workspace',
    answer: { schema: workspaceSettingsSchema },
  },
  'PATCH /api/workspaces/:workspaceId': {
    summary: 'Change the settings of a workspace',
    body: changeWorkspaceSchema,
    answer: { schema: workspaceSettingsSchema },
  },
  'GET /api/workspaces/:workspaceId/export': {
    summary: 'Take everything of the workspace along',
    description:
      'As one JSON file: designs with every edit, revisions, comments and shares; no key to anything.',
    answer: { schema: workspaceExportSchema },
  },
  'POST /api/workspaces/:workspaceId/deletion': {
    summary: 'Delete the workspace for good',
    body: deleteWorkspaceSchema,
    answer: { status: 204 },
  },
  'GET /api/workspaces/:workspaceId/people': {
    summary: 'List the members',
    answer: { schema: memberListSchema },
  },
  'PATCH /api/workspaces/:workspaceId/people/:personId': {
    summary: "Change a member's role",
    body: changeMemberSchema,
    answer: { schema: memberSchema },
  },
  'DELETE /api/workspaces/:workspaceId/people/:personId': {
    summary: 'Remove a member',
    description: 'With the id of the reader: leave the workspace.',
    answer: { status: 204 },
  },
  'GET /api/workspaces/:workspaceId/activity': {
    summary: 'Read what was done',
    description: 'The newest first, a hundred at a time; `before` is the `next` of the page before.',
    query: activityQuerySchema,
    answer: { schema: activityPageSchema },
  },
  'GET /api/workspaces/:workspaceId/activity.csv': {
    summary: 'Read what was done as CSV',
    query: activityFilterSchema,
    answer: { mediaType: 'text/csv' },
  },
  'GET /api/workspaces/:workspaceId/invitations': {
    summary: 'List invitations',
    answer: { schema: invitationListSchema },
  },
  'POST /api/workspaces/:workspaceId/invitations': {
    summary: 'Invite somebody by mail',
    body: inviteSchema,
    answer: { status: 201, schema: invitationSchema },
  },
  'POST /api/workspaces/:workspaceId/invitations/:invitationId/mail': {
    summary: 'Send an invitation again, with a new link',
    answer: { schema: invitationSchema },
  },
  'DELETE /api/workspaces/:workspaceId/invitations/:invitationId': {
    summary: 'Take an invitation back',
    answer: { status: 204 },
  },
  'GET /api/workspaces/:workspaceId/mailbox': {
    summary: 'List the mails that were kept because no mail server is set up',
    answer: { schema: mailboxSchema },
  },
  'GET /api/workspaces/:workspaceId/mailbox/:mailId': {
    summary: 'Read a mail that was kept',
    answer: { schema: openedMailSchema },
  },
  'GET /api/workspaces/:workspaceId/mailbox/:mailId/page': {
    summary: 'Show a mail that was kept as its reader would see it',
    answer: { mediaType: 'text/html' },
  },
  'GET /api/workspaces/:workspaceId/pools': {
    summary: 'Read the pools of numbers',
    answer: { schema: workspacePoolsSchema },
  },
  'PUT /api/workspaces/:workspaceId/pools': {
    summary: 'Replace the pools of numbers',
    body: putPoolsSchema,
    answer: { schema: workspacePoolsSchema },
  },
  'GET /api/workspaces/:workspaceId/profiles': {
    summary: 'List equipment profiles',
    answer: { schema: profileListSchema },
  },
  'POST /api/workspaces/:workspaceId/profiles': {
    summary: 'Add an equipment profile',
    body: createProfileSchema,
    answer: { status: 201, schema: equipmentProfileSchema },
  },
  'PATCH /api/profiles/:profileId': {
    summary: 'Change or archive an equipment profile',
    body: changeProfileSchema,
    answer: { schema: equipmentProfileSchema },
  },
} as const satisfies { readonly [route: string]: Operation };

export const engagementOperations = {
  'GET /api/workspaces/:workspaceId/engagements': {
    summary: 'List engagements with their designs',
    query: engagementsQuerySchema,
    answer: { schema: engagementListSchema },
  },
  'POST /api/workspaces/:workspaceId/engagements': {
    summary: 'Start an engagement',
    body: createEngagementSchema,
    answer: { status: 201, schema: engagementSchema },
  },
  'PATCH /api/engagements/:engagementId': {
    summary: 'Change or archive an engagement',
    body: changeEngagementSchema,
    answer: { schema: engagementSchema },
  },
  'POST /api/engagements/:engagementId/designs': {
    summary: 'Start a design',
    description: 'Empty, from the demo, as a copy of another, or from a document.',
    body: createDesignSchema,
    answer: { status: 201, schema: designSummarySchema },
  },
} as const satisfies { readonly [route: string]: Operation };
