import { Router } from 'express';
import { waiveSchema } from '#contract/waivers.ts';
import { requirePerson } from '../auth/sessions.ts';
import { jsonBody } from '../middleware/json-body.ts';
import type { Context } from '../services/context.ts';
import { limits } from '../services/limits.ts';
import { readWaivers, waiveFinding, withdrawWaiver } from '../services/waivers.ts';
import { mountRoute } from './mount-route.ts';
import { readBody, readId } from './read-request.ts';

/** Findings that somebody accepted for a time. */
export function waiverRoutes(context: Context): Router {
  const router = Router();

  mountRoute(router, 'GET /api/designs/:designId/waivers', async (req, res) => {
    const person = requirePerson(req);
    res.json({ waivers: await readWaivers(context, person.id, readId(req, 'designId', 'design')) });
  });

  const body = jsonBody(limits.bodyBytes);
  mountRoute(router, 'POST /api/designs/:designId/waivers', ...body, async (req, res) => {
    const person = requirePerson(req);
    const designId = readId(req, 'designId', 'design');
    res.status(201).json(await waiveFinding(context, person.id, designId, readBody(req, waiveSchema)));
  });

  mountRoute(router, 'DELETE /api/designs/:designId/waivers/:waiverId', async (req, res) => {
    const person = requirePerson(req);
    const designId = readId(req, 'designId', 'design');
    res.json(await withdrawWaiver(context, person.id, designId, readId(req, 'waiverId', 'waiver')));
  });

  return router;
}
