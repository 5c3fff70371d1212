import type { Request, Response } from 'express';
import { Router } from 'express';
import type { Session } from '#contract/session.ts';
import { changePasswordSchema, demoSignInSchema, signInSchema } from '#contract/session.ts';
import type { Sessions } from '../auth/sessions.ts';
import { csrfTokenOf, endSession, isKept, requirePerson, startSession } from '../auth/sessions.ts';
import type { Throttles } from '../auth/throttles.ts';
import { Refusal } from '../errors.ts';
import { jsonBody } from '../middleware/json-body.ts';
import { changePassword, findDemoAccount } from '../services/accounts.ts';
import type { Context } from '../services/context.ts';
import { describeSession } from '../services/describe-session.ts';
import { limits } from '../services/limits.ts';
import { mountRoute } from './mount-route.ts';
import { readBody } from './read-request.ts';

/** Signing in and out, and one's own password. */
export function sessionRoutes(context: Context, sessions: Sessions, throttles: Throttles): Router {
  const router = Router();
  const body = jsonBody(limits.bodyBytes);

  const answerSession = async (req: Request, res: Response): Promise<void> => {
    const session: Session = {
      ...(await describeSession(context, req.user ?? null)),
      csrfToken: csrfTokenOf(req),
    };
    res.json(session);
  };

  mountRoute(router, 'GET /api/session', answerSession);

  mountRoute(router, 'POST /api/session', ...body, async (req, res) => {
    const { email, password, keep = false } = readBody(req, signInSchema);
    const address = req.ip ?? '';
    await throttles.signInAttempt(email, address);
    req.body = { email, password };
    const account = await sessions.checkPassword(req, res);
    if (account === null) {
      throw new Refusal(
        'wrong-credentials',
        'E-mail and password do not belong together; check both and try again.',
      );
    }
    await throttles.signedIn(email, address);
    await startSession(req, account, keep);
    await answerSession(req, res);
  });

  mountRoute(router, 'POST /api/session/demo', ...body, async (req, res) => {
    const { role } = readBody(req, demoSignInSchema);
    await throttles.demoSignIn(req.ip ?? '');
    await startSession(req, await findDemoAccount(context, role), false);
    await answerSession(req, res);
  });

  mountRoute(router, 'DELETE /api/session', async (req, res) => {
    await endSession(req);
    res.status(204).end();
  });

  mountRoute(router, 'PUT /api/account/password', ...body, async (req, res) => {
    const person = requirePerson(req);
    const passwords = readBody(req, changePasswordSchema);
    await throttles.passwordAttempt(person.id);
    const keep = isKept(req);
    const changed = await changePassword(context, person, passwords, req.sessionID);
    await throttles.passwordFound(person.id);
    await startSession(req, changed, keep);
    await answerSession(req, res);
  });

  return router;
}
