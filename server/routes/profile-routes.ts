import { Router } from 'express';
import { changeProfileSchema, createProfileSchema } from '#contract/profiles.ts';
import { requirePerson } from '../auth/sessions.ts';
import { jsonBody } from '../middleware/json-body.ts';
import type { Context } from '../services/context.ts';
import { changeProfile, createProfile, readProfiles } from '../services/equipment-profiles.ts';
import { limits } from '../services/limits.ts';
import { mountRoute } from './mount-route.ts';
import { readBody, readId } from './read-request.ts';

/** What classes of equipment can do, as the team measured it. */
export function profileRoutes(context: Context): Router {
  const router = Router();
  const body = jsonBody(limits.bodyBytes);

  mountRoute(router, 'GET /api/workspaces/:workspaceId/profiles', async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'workspace');
    res.json({ profiles: await readProfiles(context, person.id, workspaceId) });
  });

  mountRoute(router, 'POST /api/workspaces/:workspaceId/profiles', ...body, async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'workspace');
    const { profile } = readBody(req, createProfileSchema);
    res.status(201).json(await createProfile(context, person.id, workspaceId, profile));
  });

  mountRoute(router, 'PATCH /api/profiles/:profileId', ...body, async (req, res) => {
    const person = requirePerson(req);
    const profileId = readId(req, 'profileId', 'equipment profile');
    res.json(await changeProfile(context, person.id, profileId, readBody(req, changeProfileSchema)));
  });

  return router;
}
