import type { Knex } from 'knex';
import type { Action, Role } from '#contract/session.ts';
import { Refusal, notFound } from '../errors.ts';
import { findRole } from '../repositories/memberships.ts';
import { permits } from './permissions.ts';

const words: { readonly [action in Action]: string } = {
  'workspace.read': 'look into the workspace',
  'engagement.create': 'start an engagement',
  'engagement.edit': 'change an engagement',
  'design.read': 'open drafts of designs',
  'design.create': 'start a design',
  'design.edit': 'edit designs',
  'design.archive': 'archive or restore designs',
  'finding.waive': 'waive findings',
  'pools.edit': 'change the pools of numbers',
  'profile.edit': 'change equipment profiles',
  'comment.write': 'write comments',
  'review.ask': 'ask for a review or take the question back',
  'review.decide': 'approve designs or send them back',
  'design.build': 'say that a design was built or superseded',
  'revision.read': 'open revisions of designs',
  'share.manage': 'share revisions or end shares',
  'people.manage': 'invite people, change their roles or remove them',
  'workspace.manage': 'change the workspace itself',
  'activity.read': 'read who did what',
};

/**
 * The person's role in the workspace, if it allows the action. Strangers are told that there is no such thing (`what`),
 * members of too little right that their role does not allow it.
 */
export async function authorise(
  knex: Knex,
  personId: string,
  action: Action,
  workspaceId: string,
  what: Parameters<typeof notFound>[0],
): Promise<Role> {
  const role = await findRole(knex, workspaceId, personId);
  if (role === null) throw notFound(what);
  if (!permits(role, action)) {
    throw new Refusal(
      'not-allowed',
      `Your role in this workspace, ${role}, may not ${words[action]}; ask an owner of the workspace.`,
    );
  }
  return role;
}
