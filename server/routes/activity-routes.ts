import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { Router } from 'express';
import { activityFilterSchema, activityQuerySchema } from '#contract/activity.ts';
import { requirePerson } from '../auth/sessions.ts';
import { activityAsCsv, readActivity } from '../services/activity.ts';
import type { Context } from '../services/context.ts';
import { mountRoute } from './mount-route.ts';
import { readId, readQuery } from './read-request.ts';

/** What was done in a workspace. */
export function activityRoutes(context: Context): Router {
  const router = Router();

  mountRoute(router, 'GET /api/workspaces/:workspaceId/activity', async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'workspace');
    res.json(await readActivity(context, person.id, workspaceId, readQuery(req, activityQuerySchema)));
  });

  mountRoute(router, 'GET /api/workspaces/:workspaceId/activity.csv', async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'workspace');
    const filter = readQuery(req, activityFilterSchema);
    const pieces = await activityAsCsv(context, person.id, workspaceId, filter);
    res.setHeader('Content-Disposition', 'attachment; filename="activity.csv"');
    res.type('text/csv; charset=utf-8');
    await pipeline(Readable.from(pieces), res);
  });

  return router;
}
