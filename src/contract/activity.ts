import { z } from 'zod';

/** What people do that is kept on record: thing first, then what became of it. */
export const activityActions = [
  'engagement.created',
  'engagement.changed',
  'design.created',
  'design.archived',
  'design.restored',
  'design.deleted',
  'finding.waived',
  'waiver.withdrawn',
  'pools.changed',
  'profile.changed',
  'review.asked',
  'review.withdrawn',
  'review.approved',
  'review.sent-back',
  'design.built',
  'design.superseded',
  'revision.restored',
  'comment.written',
  'comment.resolved',
  'comment.reopened',
  'suggestion.applied',
  'share.created',
  'share.revoked',
  'share.opened',
  'person.invited',
  'invitation.revoked',
  'person.joined',
  'person.role-changed',
  'person.removed',
  'person.left',
  'workspace.created',
  'workspace.changed',
  'workspace.exported',
] as const;
export type ActivityAction = (typeof activityActions)[number];

export const activityObjectKinds = [
  'workspace',
  'engagement',
  'design',
  'revision',
  'comment',
  'waiver',
  'share',
  'person',
  'profile',
] as const;
export const activityObjectKindSchema = z.enum(activityObjectKinds);
export type ActivityObjectKind = z.infer<typeof activityObjectKindSchema>;

/** Something that somebody did. Names are as they were then, so that it stays readable when its object or person is gone. */
export const activitySchema = z.object({
  id: z.string(),
  at: z.iso.datetime(),
  action: z.enum(activityActions),
  /** Null for what a guest or the server did. */
  person: z.object({ id: z.string(), name: z.string() }).nullable(),
  object: z.object({
    kind: activityObjectKindSchema,
    id: z.string().nullable(),
    name: z.string(),
    /** It can still be opened. */
    isThere: z.boolean(),
  }),
  /** The design that it concerns as it is called today; null where there is none, or none any more. */
  design: z.object({ id: z.string(), title: z.string() }).nullable(),
  /** Values that belong to the sentence, such as a role before and after. */
  details: z.record(z.string(), z.string()),
});
export type Activity = z.infer<typeof activitySchema>;

export const activityPageSize = 100;

const choiceSchema = z.object({ id: z.string(), name: z.string() });
/** GET /api/workspaces/:workspaceId/activity: the newest first, a hundred at a time. */
export const activityPageSchema = z.object({
  activity: z.array(activitySchema),
  /** The `before` of the next page; null on the last. */
  next: z.string().nullable(),
  /** Everybody who did something here, and every design that was done something with: what can be filtered by. */
  people: z.array(choiceSchema),
  designs: z.array(choiceSchema),
});
export type ActivityPage = z.infer<typeof activityPageSchema>;

const daySchema = z.iso.date('expected a day such as 2027-03-31');
/** GET /api/workspaces/:workspaceId/activity.csv: all that fits, as CSV. Days are by UTC, both included. */
export const activityFilterSchema = z.strictObject({
  person: z.guid('expected the id of a person').optional(),
  action: z.enum(activityActions, 'expected the name of an action such as design.created').optional(),
  design: z.guid('expected the id of a design').optional(),
  from: daySchema.optional(),
  to: daySchema.optional(),
});
export type ActivityFilter = z.infer<typeof activityFilterSchema>;
export const activityQuerySchema = activityFilterSchema.extend({
  before: z
    .string()
    .regex(/^\d{1,18}$/, 'expected the number that the page before names as its next')
    .optional(),
});
