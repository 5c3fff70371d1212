import type { Request, Response } from 'express';
import { Router } from 'express';
import type { Session } from '#contract/session.ts';
import { changePasswordSchema, demoSignInSchema, secondStepSchema, signInSchema } from '#contract/session.ts';
import type { Sessions } from '../auth/sessions.ts';
import {
  askForSecondStep,
  csrfTokenOf,
  endSession,
  isKept,
  pendingSignInOf,
  requirePerson,
  startSession,
} from '../auth/sessions.ts';
import type { Throttles } from '../auth/throttles.ts';
import { Refusal } from '../errors.ts';
import { jsonBody } from '../middleware/json-body.ts';
import { changePassword, findDemoAccount, findSigningIn, isSecondStepNeeded } from '../services/accounts.ts';
import type { Context } from '../services/context.ts';
import { describeSession } from '../services/describe-session.ts';
import { limits } from '../services/limits.ts';
import { requireSecondStep } from '../services/second-step.ts';
import { mountRoute } from './mount-route.ts';
import { readBody } from './read-request.ts';

/** The session as its answer says it. */
export async function answerSession(context: Context, req: Request, res: Response): Promise<void> {
  const session: Session = {
    ...(await describeSession(context, req.user ?? null)),
    secondStepAsked: pendingSignInOf(req) !== null,
    csrfToken: csrfTokenOf(req),
  };
  res.json(session);
}

/** Signing in and out, and one's own password. */
export function sessionRoutes(context: Context, sessions: Sessions, throttles: Throttles): Router {
  const router = Router();
  const body = jsonBody(limits.bodyBytes);

  const answer = (req: Request, res: Response): Promise<void> => answerSession(context, req, res);

  mountRoute(router, 'GET /api/session', answer);

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
    if (await isSecondStepNeeded(context, account.id)) await askForSecondStep(req, account, keep);
    else await startSession(req, account, keep);
    await answer(req, res);
  });

  mountRoute(router, 'POST /api/session/second-step', ...body, async (req, res) => {
    const { code } = readBody(req, secondStepSchema);
    const pending = pendingSignInOf(req);
    const account = pending === null ? null : await findSigningIn(context, pending);
    if (pending === null || account === null) {
      throw new Refusal(
        'conflict',
        'No sign-in waits for a code, or it has waited too long; begin again with e-mail and password.',
      );
    }
    await throttles.secondStepAttempt(account.id);
    await requireSecondStep(context, account.id, code);
    await throttles.secondStepTaken(account.id);
    await startSession(req, account, pending.keep);
    await answer(req, res);
  });

  mountRoute(router, 'POST /api/session/demo', ...body, async (req, res) => {
    const { role } = readBody(req, demoSignInSchema);
    await throttles.demoSignIn(req.ip ?? '');
    await startSession(req, await findDemoAccount(context, role), false);
    await answer(req, res);
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
    await answer(req, res);
  });

  return router;
}
