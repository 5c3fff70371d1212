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
  'PUT /api/account/password': 'signed-in',
  'GET /api/workspaces/:workspaceId/engagements': 'workspace.read',
  'POST /api/workspaces/:workspaceId/engagements': 'engagement.create',
  'PATCH /api/engagements/:engagementId': 'engagement.edit',
  'POST /api/engagements/:engagementId/designs': 'design.create',
  'GET /api/designs/:designId': 'design.read',
  'PATCH /api/designs/:designId': 'design.edit',
  'GET /api/designs/:designId/patches': 'design.read',
  'POST /api/designs/:designId/patches': 'design.edit',
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
  'POST /api/revisions/:revisionId/withdrawal': 'review.ask',
  'POST /api/revisions/:revisionId/decision': 'review.decide',
  'POST /api/revisions/:revisionId/build': 'design.build',
  'POST /api/revisions/:revisionId/supersession': 'design.build',
  'POST /api/designs/:designId/draft': 'design.edit',
  'POST /api/designs/:designId/restoration': 'design.edit',
  'GET /api/designs/:designId/document': 'design.read',
  'GET /api/designs/:designId/sittings': 'design.read',
  'GET /api/workspaces/:workspaceId/pools': 'design.read',
  'PUT /api/workspaces/:workspaceId/pools': 'pools.edit',
  'GET /api/workspaces/:workspaceId/profiles': 'workspace.read',
  'POST /api/workspaces/:workspaceId/profiles': 'profile.edit',
  'PATCH /api/profiles/:profileId': 'profile.edit',
} as const satisfies { readonly [route: string]: Access };

export type Route = keyof typeof routes;

export function permits(role: Role, action: Action): boolean {
  return permissions[role].includes(action);
}
