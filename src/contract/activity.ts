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
