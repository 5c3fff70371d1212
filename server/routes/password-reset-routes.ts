import { Router } from 'express';
import { askForResetSchema, openResetSchema, resetPasswordSchema } from '#contract/password-reset.ts';
import type { Throttles } from '../auth/throttles.ts';
import { jsonBody } from '../middleware/json-body.ts';
import type { Context } from '../services/context.ts';
import { limits } from '../services/limits.ts';
import { askForReset, readReset, resetPassword } from '../services/password-resets.ts';
import { mountRoute } from './mount-route.ts';
import { readBody } from './read-request.ts';

/** A new password for who has lost theirs. */
export function passwordResetRoutes(context: Context, throttles: Throttles): Router {
  const router = Router();
  const body = jsonBody(limits.bodyBytes);

  mountRoute(router, 'POST /api/password-reset', ...body, async (req, res) => {
    const { email } = readBody(req, askForResetSchema);
    await throttles.resetAsked(req.ip ?? '');
    askForReset(context, email, () => throttles.isResetMailDue(email));
    res.status(202).end();
  });

  mountRoute(router, 'POST /api/password-reset/link', ...body, async (req, res) => {
    const { token } = readBody(req, openResetSchema);
    await throttles.linkOpened(req.ip ?? '');
    res.json(await readReset(context, token));
  });

  mountRoute(router, 'POST /api/password-reset/password', ...body, async (req, res) => {
    const { token, password } = readBody(req, resetPasswordSchema);
    await throttles.linkOpened(req.ip ?? '');
    await resetPassword(context, token, password);
    res.status(204).end();
  });

  return router;
}
