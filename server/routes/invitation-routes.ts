import { Router } from 'express';
import { acceptInvitationSchema, inviteSchema, openInvitationSchema } from '#contract/invitations.ts';
import { requirePerson, startSession } from '../auth/sessions.ts';
import type { Throttles } from '../auth/throttles.ts';
import { jsonBody } from '../middleware/json-body.ts';
import { acceptInvitation, readOfferedInvitation } from '../services/accept-invitation.ts';
import type { Context } from '../services/context.ts';
import { invite, readInvitations, resendInvitation, revokeInvitation } from '../services/invitations.ts';
import { limits } from '../services/limits.ts';
import { mountRoute } from './mount-route.ts';
import { readBody, readId } from './read-request.ts';

/** Asking people into a workspace, and coming. Links are keys, so they travel in bodies and never in paths of the API. */
export function invitationRoutes(context: Context, throttles: Throttles): Router {
  const router = Router();
  const body = jsonBody(limits.bodyBytes);

  mountRoute(router, 'GET /api/workspaces/:workspaceId/invitations', async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'workspace');
    res.json({ invitations: await readInvitations(context, person.id, workspaceId) });
  });

  mountRoute(router, 'POST /api/workspaces/:workspaceId/invitations', ...body, async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'workspace');
    const invitation = readBody(req, inviteSchema);
    await throttles.invitation(person.id);
    res.status(201).json(await invite(context, person, workspaceId, invitation));
  });

  mountRoute(router, 'POST /api/workspaces/:workspaceId/invitations/:invitationId/mail', async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'invitation');
    const invitationId = readId(req, 'invitationId', 'invitation');
    await throttles.invitation(person.id);
    res.json(await resendInvitation(context, person, workspaceId, invitationId));
  });

  mountRoute(router, 'DELETE /api/workspaces/:workspaceId/invitations/:invitationId', async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'invitation');
    const invitationId = readId(req, 'invitationId', 'invitation');
    await revokeInvitation(context, person.id, workspaceId, invitationId);
    res.status(204).end();
  });

  mountRoute(router, 'POST /api/invitation', ...body, async (req, res) => {
    const { token } = readBody(req, openInvitationSchema);
    await throttles.linkOpened(req.ip ?? '');
    res.json(await readOfferedInvitation(context, token));
  });

  mountRoute(router, 'POST /api/invitation/acceptance', ...body, async (req, res) => {
    const { token, newcomer } = readBody(req, acceptInvitationSchema);
    await throttles.linkOpened(req.ip ?? '');
    const signedIn = req.user ?? null;
    const { workspaceId, account } = await acceptInvitation(context, token, { signedIn, newcomer });
    if (signedIn === null) await startSession(req, account, false);
    res.json({ workspaceId });
  });

  return router;
}
