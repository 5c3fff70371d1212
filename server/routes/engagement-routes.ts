import { Router } from 'express';
import { changeEngagementSchema, createDesignSchema, createEngagementSchema } from '#contract/designs.ts';
import { engagementsQuerySchema } from '#contract/queries.ts';
import { requirePerson } from '../auth/sessions.ts';
import { jsonBody } from '../middleware/json-body.ts';
import type { Context } from '../services/context.ts';
import { createDesign } from '../services/designs.ts';
import { changeEngagement, createEngagement, readEngagements } from '../services/engagements.ts';
import { limits } from '../services/limits.ts';
import { mountRoute } from './mount-route.ts';
import { readBody, readId, readQuery } from './read-request.ts';

/** The customers' pieces of work, and the designs started in them. */
export function engagementRoutes(context: Context): Router {
  const router = Router();
  const body = jsonBody(limits.bodyBytes);

  mountRoute(router, 'GET /api/workspaces/:workspaceId/engagements', async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'workspace');
    const { archived } = readQuery(req, engagementsQuerySchema);
    const engagements = await readEngagements(context, person.id, workspaceId, archived === 'true');
    res.json({ engagements });
  });

  mountRoute(router, 'POST /api/workspaces/:workspaceId/engagements', ...body, async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'workspace');
    const wanted = readBody(req, createEngagementSchema);
    res.status(201).json(await createEngagement(context, person.id, workspaceId, wanted));
  });

  mountRoute(router, 'PATCH /api/engagements/:engagementId', ...body, async (req, res) => {
    const person = requirePerson(req);
    const engagementId = readId(req, 'engagementId', 'engagement');
    const change = readBody(req, changeEngagementSchema);
    res.json(await changeEngagement(context, person.id, engagementId, change));
  });

  const documentBody = jsonBody(limits.editsBodyBytes);
  mountRoute(router, 'POST /api/engagements/:engagementId/designs', ...documentBody, async (req, res) => {
    const person = requirePerson(req);
    const engagementId = readId(req, 'engagementId', 'engagement');
    const wanted = readBody(req, createDesignSchema);
    res.status(201).json(await createDesign(context, person.id, engagementId, wanted));
  });

  return router;
}
