import { Router } from 'express';
import { createShareSchema, openShareSchema, sharedSheetSchema } from '#contract/shares.ts';
import { requirePerson } from '../auth/sessions.ts';
import type { Throttles } from '../auth/throttles.ts';
import { jsonBody } from '../middleware/json-body.ts';
import type { Context } from '../services/context.ts';
import { limits } from '../services/limits.ts';
import type { PassphraseGuesses } from '../services/shared-view.ts';
import { drawShared, openShare } from '../services/shared-view.ts';
import { createShare, endShare, readShares } from '../services/shares.ts';
import { mountRoute } from './mount-route.ts';
import { readBody, readId } from './read-request.ts';
import { sendDrawing } from './send-drawing.ts';

/** Links to revisions: for the team that makes them, and for guests who have one. */
export function shareRoutes(context: Context, throttles: Throttles): Router {
  const router = Router();
  const body = jsonBody(limits.bodyBytes);
  const guesses: PassphraseGuesses = {
    attempt: (shareId) => throttles.passphraseAttempt(shareId),
    found: (shareId) => throttles.passphraseFound(shareId),
  };

  mountRoute(router, 'GET /api/designs/:designId/shares', async (req, res) => {
    const person = requirePerson(req);
    res.json({ shares: await readShares(context, person.id, readId(req, 'designId', 'design')) });
  });

  mountRoute(router, 'POST /api/designs/:designId/shares', ...body, async (req, res) => {
    const person = requirePerson(req);
    const designId = readId(req, 'designId', 'design');
    res.status(201).json(await createShare(context, person.id, designId, readBody(req, createShareSchema)));
  });

  mountRoute(router, 'DELETE /api/shares/:shareId', async (req, res) => {
    const person = requirePerson(req);
    res.json(await endShare(context, person.id, readId(req, 'shareId', 'share')));
  });

  mountRoute(router, 'POST /api/share', ...body, async (req, res) => {
    const key = readBody(req, openShareSchema);
    await throttles.linkOpened(req.ip ?? '');
    res.json(await openShare(context, key, guesses));
  });

  mountRoute(router, 'POST /api/share/sheet', ...body, async (req, res) => {
    const { look = 'paper', sheet, ...key } = readBody(req, sharedSheetSchema);
    await throttles.linkOpened(req.ip ?? '');
    await sendDrawing(res, 'image/svg+xml', (signal) =>
      drawShared(context, key, guesses, { look, sheet, signal }),
    );
  });

  return router;
}
