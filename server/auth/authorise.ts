import type { Knex } from 'knex';
import type { Action, Role } from '#contract/session.ts';
import { Refusal, notFound } from '../errors.ts';
import { findPlace } from '../repositories/memberships.ts';
import { permits, tokenActions } from './permissions.ts';
import { tokenLimits } from './token-limits.ts';

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
 * members of too little right that their role does not allow it. A request with a token is held to the token's limits, and
 * a workspace that asks for two-step sign-in answers nobody who has not set it up.
 */
export async function authorise(
  knex: Knex,
  personId: string,
  action: Action,
  workspaceId: string,
  what: Parameters<typeof notFound>[0],
): Promise<Role> {
  const place = await findPlace(knex, workspaceId, personId);
  if (place === null) throw notFound(what);
  const token = tokenLimits();
  if (token !== undefined && token.workspaceId !== null && token.workspaceId !== workspaceId)
    throw notFound(what);
  const { role, lacksSecondStep } = place;
  if (!permits(role, action)) {
    throw new Refusal(
      'not-allowed',
      `Your role in this workspace, ${role}, may not ${words[action]}; ask an owner of the workspace.`,
    );
  }
  if (token !== undefined && !tokenActions[token.scope].includes(action)) {
    throw new Refusal(
      'not-allowed',
      `A token of the scope ${token.scope} may not ${words[action]}; ${tokenActions.write.includes(action) ? 'make one that may write' : 'sign in to do it'}.`,
    );
  }
  if (lacksSecondStep) {
    throw new Refusal(
      'second-step-required',
      'This workspace asks for two-step sign-in, which you have not set up; do so under Account, Two-step sign-in.',
    );
  }
  return role;
}
