import { Router } from 'express';
import { putPoolsSchema } from '#contract/numbering.ts';
import { requirePerson } from '../auth/sessions.ts';
import { jsonBody } from '../middleware/json-body.ts';
import type { Context } from '../services/context.ts';
import { limits } from '../services/limits.ts';
import { changePools, readDesignContext, readPools } from '../services/numbering.ts';
import { mountRoute } from './mount-route.ts';
import { readBody, readId } from './read-request.ts';

/** Where numbers come from, and what others hold. */
export function numberingRoutes(context: Context): Router {
  const router = Router();

  mountRoute(router, 'GET /api/workspaces/:workspaceId/pools', async (req, res) => {
    const person = requirePerson(req);
    res.json(await readPools(context, person.id, readId(req, 'workspaceId', 'workspace')));
  });

  const body = jsonBody(limits.bodyBytes);
  mountRoute(router, 'PUT /api/workspaces/:workspaceId/pools', ...body, async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'workspace');
    res.json(await changePools(context, person.id, workspaceId, readBody(req, putPoolsSchema)));
  });

  mountRoute(router, 'GET /api/designs/:designId/context', async (req, res) => {
    const person = requirePerson(req);
    res.json(await readDesignContext(context, person.id, readId(req, 'designId', 'design')));
  });

  return router;
}
