import { Router } from 'express';
import { firstOwnerSchema } from '#contract/workspaces.ts';
import { startSession } from '../auth/sessions.ts';
import type { Throttles } from '../auth/throttles.ts';
import { jsonBody } from '../middleware/json-body.ts';
import type { Context } from '../services/context.ts';
import { createFirstOwner, isFirstOwnerAwaited } from '../services/first-owner.ts';
import { limits } from '../services/limits.ts';
import { mountRoute } from './mount-route.ts';
import { readBody } from './read-request.ts';
import { answerSession } from './session-routes.ts';

/** How an empty server gets its first person. */
export function firstOwnerRoutes(context: Context, throttles: Throttles): Router {
  const router = Router();

  mountRoute(router, 'GET /api/first-owner', async (_req, res) => {
    res.json({ isAwaited: await isFirstOwnerAwaited(context) });
  });

  mountRoute(router, 'POST /api/first-owner', ...jsonBody(limits.bodyBytes), async (req, res) => {
    const wanted = readBody(req, firstOwnerSchema);
    await throttles.firstOwnerAttempt(req.ip ?? '');
    await startSession(req, await createFirstOwner(context, wanted), false);
    res.status(201);
    await answerSession(context, req, res);
  });

  return router;
}
