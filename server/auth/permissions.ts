import type { TokenScope } from '#contract/account.ts';
import type { Action, Role } from '#contract/session.ts';
import { actions } from '#contract/session.ts';

const ofOwnersAlone: readonly Action[] = ['pools.edit', 'profile.edit', 'people.manage', 'workspace.manage'];
const ofSecondPairsOfEyes: readonly Action[] = ['finding.waive', 'review.decide'];

/** What each role may do. Installers work from approved revisions alone: drafts they see in lists and can't open. */
export const permissions: { readonly [role in Role]: readonly Action[] } = {
  owner: actions,
  // Who draws neither waives nor approves. Pools and profiles are the team's, not one design's.
  architect: actions.filter(
    (action) => !ofOwnersAlone.includes(action) && !ofSecondPairsOfEyes.includes(action),
  ),
  reviewer: [
    'workspace.read',
    'design.read',
    'finding.waive',
    'comment.write',
    'review.decide',
    'revision.read',
    'activity.read',
  ],
  presales: [
    'workspace.read',
    'design.read',
    'design.create',
    'comment.write',
    'revision.read',
    'share.manage',
  ],
  installer: ['workspace.read', 'revision.read'],
};

/** An action that a membership must allow, or the weaker wishes of routes that belong to no workspace. */
export type Access = Action | 'signed-in' | 'anyone';

/** Every route of the server, and what one must be allowed to do to be answered. */
export const routes = {
  'GET /api/health': 'anyone',
  'GET /api/openapi.json': 'anyone',
  'POST /api/engine/check': 'anyone',
  'POST /api/engine/wire': 'anyone',
  'POST /api/engine/load': 'anyone',
  'POST /api/engine/outage': 'anyone',
  'POST /api/engine/rules': 'anyone',
  'POST /api/engine/trace': 'anyone',
  'GET /api/session': 'anyone',
  'POST /api/session': 'anyone',
  'POST /api/session/demo': 'anyone',
  'DELETE /api/session': 'anyone',
  'POST /api/session/second-step': 'anyone',
  'PUT /api/account/password': 'signed-in',
  'GET /api/account/second-step': 'signed-in',
  'POST /api/account/second-step': 'signed-in',
  'PUT /api/account/second-step': 'signed-in',
  'POST /api/account/second-step/off': 'signed-in',
  'POST /api/account/second-step/recovery-codes': 'signed-in',
  'GET /api/account/sessions': 'signed-in',
  'DELETE /api/account/sessions': 'signed-in',
  'DELETE /api/account/sessions/:sessionId': 'signed-in',
  'GET /api/account/tokens': 'signed-in',
  'POST /api/account/tokens': 'signed-in',
  'DELETE /api/account/tokens/:tokenId': 'signed-in',
  'GET /api/account/deletion': 'signed-in',
  'POST /api/account/deletion': 'signed-in',
  'GET /api/account/mail': 'signed-in',
  'PUT /api/account/mail': 'signed-in',
  'POST /api/password-reset': 'anyone',
  'POST /api/password-reset/link': 'anyone',
  'POST /api/password-reset/password': 'anyone',
  'POST /api/invitation': 'anyone',
  'POST /api/invitation/acceptance': 'anyone',
  'GET /api/first-owner': 'anyone',
  'POST /api/first-owner': 'anyone',
  'GET /api/workspaces': 'signed-in',
  'POST /api/workspaces': 'signed-in',
  'GET /api/workspaces/:workspaceId': 'workspace.manage',
  'PATCH /api/workspaces/:workspaceId': 'workspace.manage',
  'GET /api/workspaces/:workspaceId/export': 'workspace.manage',
  'POST /api/workspaces/:workspaceId/deletion': 'workspace.manage',
  'GET /api/workspaces/:workspaceId/people': 'workspace.read',
  'PATCH /api/workspaces/:workspaceId/people/:personId': 'people.manage',
  'DELETE /api/workspaces/:workspaceId/people/:personId': 'people.manage',
  'GET /api/workspaces/:workspaceId/activity': 'activity.read',
  'GET /api/workspaces/:workspaceId/activity.csv': 'activity.read',
  'GET /api/workspaces/:workspaceId/invitations': 'people.manage',
  'POST /api/workspaces/:workspaceId/invitations': 'people.manage',
  'POST /api/workspaces/:workspaceId/invitations/:invitationId/mail': 'people.manage',
  'DELETE /api/workspaces/:workspaceId/invitations/:invitationId': 'people.manage',
  'GET /api/workspaces/:workspaceId/mailbox': 'people.manage',
  'GET /api/workspaces/:workspaceId/mailbox/:mailId': 'people.manage',
  'GET /api/workspaces/:workspaceId/mailbox/:mailId/page': 'people.manage',
  'GET /api/workspaces/:workspaceId/engagements': 'workspace.read',
  'POST /api/workspaces/:workspaceId/engagements': 'engagement.create',
  'PATCH /api/engagements/:engagementId': 'engagement.edit',
  'POST /api/engagements/:engagementId/designs': 'design.create',
  'GET /api/designs/:designId': 'design.read',
  'PATCH /api/designs/:designId': 'design.edit',
  'GET /api/designs/:designId/patches': 'design.read',
  'POST /api/designs/:designId/patches': 'design.edit',
  'GET /api/designs/:designId/live': 'design.read',
  'PUT /api/designs/:designId/presence': 'design.read',
  'GET /api/designs/:designId/thumbnail': 'design.read',
  'GET /api/designs/:designId/sheet.svg': 'design.read',
  'GET /api/designs/:designId/sheet.pdf': 'design.read',
  'GET /api/designs/:designId/context': 'design.read',
  'GET /api/designs/:designId/waivers': 'design.read',
  'POST /api/designs/:designId/waivers': 'finding.waive',
  'DELETE /api/designs/:designId/waivers/:waiverId': 'finding.waive',
  'GET /api/designs/:designId/revisions': 'revision.read',
  'POST /api/designs/:designId/revisions': 'review.ask',
  'GET /api/revisions/:revisionId': 'revision.read',
  'GET /api/revisions/:revisionId/sheet.svg': 'revision.read',
  'GET /api/revisions/:revisionId/sheet.pdf': 'revision.read',
  'POST /api/revisions/:revisionId/withdrawal': 'review.ask',
  'POST /api/revisions/:revisionId/decision': 'review.decide',
  'POST /api/revisions/:revisionId/build': 'design.build',
  'POST /api/revisions/:revisionId/supersession': 'design.build',
  'POST /api/designs/:designId/draft': 'design.edit',
  'POST /api/designs/:designId/restoration': 'design.edit',
  'GET /api/designs/:designId/document': 'design.read',
  'GET /api/designs/:designId/sittings': 'design.read',
  'GET /api/designs/:designId/comments': 'design.read',
  'POST /api/designs/:designId/comments': 'comment.write',
  'PATCH /api/comments/:commentId': 'comment.write',
  'DELETE /api/comments/:commentId': 'comment.write',
  'POST /api/comments/:commentId/resolution': 'comment.write',
  'DELETE /api/comments/:commentId/resolution': 'comment.write',
  'POST /api/comments/:commentId/application': 'design.edit',
  'GET /api/designs/:designId/shares': 'share.manage',
  'POST /api/designs/:designId/shares': 'share.manage',
  'DELETE /api/shares/:shareId': 'share.manage',
  'POST /api/share': 'anyone',
  'POST /api/share/sheet': 'anyone',
  'GET /api/workspaces/:workspaceId/pools': 'design.read',
  'PUT /api/workspaces/:workspaceId/pools': 'pools.edit',
  'GET /api/workspaces/:workspaceId/profiles': 'workspace.read',
  'POST /api/workspaces/:workspaceId/profiles': 'profile.edit',
  'PATCH /api/profiles/:profileId': 'profile.edit',
} as const satisfies { readonly [route: string]: Access };

export type Route = keyof typeof routes;

/**
 * What personal tokens reach, besides what their owner may anyway. Judging, sharing and whatever concerns people or the
 * workspace itself stays with people.
 */
export const tokenActions: { readonly [scope in TokenScope]: readonly Action[] } = {
  read: ['workspace.read', 'design.read', 'revision.read', 'activity.read'],
  write: [
    'workspace.read',
    'design.read',
    'revision.read',
    'activity.read',
    'engagement.create',
    'engagement.edit',
    'design.create',
    'design.edit',
    'design.archive',
    'pools.edit',
    'profile.edit',
    'comment.write',
    'review.ask',
  ],
};

/** Routes of no workspace that tokens are answered at. */
const openToTokens: readonly Route[] = ['GET /api/workspaces'];

/** Whether a token of this scope is answered at a route at all; `authorise` holds it to its actions again. */
export function isOpenToToken(route: Route, scope: TokenScope): boolean {
  const access: Access = routes[route];
  if (access === 'signed-in' || access === 'anyone') return openToTokens.includes(route);
  return tokenActions[scope].includes(access) && (scope === 'write' || route.startsWith('GET '));
}

export function permits(role: Role, action: Action): boolean {
  return permissions[role].includes(action);
}
