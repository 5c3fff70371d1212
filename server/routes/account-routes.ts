import type { Request } from 'express';
import { Router } from 'express';
import { createApiTokenSchema, deleteAccountSchema, secondStepProofSchema } from '#contract/account.ts';
import { endSession, requirePerson } from '../auth/sessions.ts';
import type { Throttles } from '../auth/throttles.ts';
import { jsonBody } from '../middleware/json-body.ts';
import { deleteAccount, previewDeletion } from '../services/account-deletion.ts';
import { createToken, endToken, readTokens } from '../services/api-tokens.ts';
import type { Context } from '../services/context.ts';
import { limits } from '../services/limits.ts';
import {
  confirmSecondStep,
  endSecondStep,
  offerSecondStep,
  readSecondStep,
  renewRecoveryCodes,
} from '../services/second-step.ts';
import { endOneSession, endOtherSessions, readSessions } from '../services/signed-in-sessions.ts';
import { mountRoute } from './mount-route.ts';
import { readBody, readId } from './read-request.ts';

/** One's own account: two-step sign-in, sessions, tokens, and the end of it. */
export function accountRoutes(context: Context, throttles: Throttles): Router {
  const router = Router();
  const body = jsonBody(limits.bodyBytes);

  /** Guesses at password and code of somebody who is signed in count; right ones don't. */
  const withProof = async <T>(personId: string, hasCode: boolean, work: () => Promise<T>): Promise<T> => {
    await throttles.passwordAttempt(personId);
    if (hasCode) await throttles.secondStepAttempt(personId);
    const done = await work();
    await throttles.passwordFound(personId);
    if (hasCode) await throttles.secondStepTaken(personId);
    return done;
  };
  const readProof = (req: Request) => {
    const person = requirePerson(req);
    return { person, proof: readBody(req, secondStepProofSchema) };
  };

  mountRoute(router, 'GET /api/account/second-step', async (req, res) => {
    res.json(await readSecondStep(context, requirePerson(req).id));
  });

  mountRoute(router, 'POST /api/account/second-step', async (req, res) => {
    res.json(await offerSecondStep(context, requirePerson(req)));
  });

  mountRoute(router, 'PUT /api/account/second-step', ...body, async (req, res) => {
    const { person, proof } = readProof(req);
    const recoveryCodes = await withProof(person.id, true, () =>
      confirmSecondStep(context, person, proof, req.sessionID),
    );
    res.json({ recoveryCodes });
  });

  mountRoute(router, 'POST /api/account/second-step/off', ...body, async (req, res) => {
    const { person, proof } = readProof(req);
    await withProof(person.id, true, () => endSecondStep(context, person.id, proof));
    res.status(204).end();
  });

  mountRoute(router, 'POST /api/account/second-step/recovery-codes', ...body, async (req, res) => {
    const { person, proof } = readProof(req);
    const recoveryCodes = await withProof(person.id, true, () =>
      renewRecoveryCodes(context, person.id, proof),
    );
    res.json({ recoveryCodes });
  });

  mountRoute(router, 'GET /api/account/sessions', async (req, res) => {
    res.json({ sessions: await readSessions(context, requirePerson(req).id, req.sessionID) });
  });

  mountRoute(router, 'DELETE /api/account/sessions', async (req, res) => {
    await endOtherSessions(context, requirePerson(req).id, req.sessionID);
    res.status(204).end();
  });

  mountRoute(router, 'DELETE /api/account/sessions/:sessionId', async (req, res) => {
    const person = requirePerson(req);
    await endOneSession(context, person.id, readId(req, 'sessionId', 'session'));
    res.status(204).end();
  });

  mountRoute(router, 'GET /api/account/tokens', async (req, res) => {
    res.json({ tokens: await readTokens(context, requirePerson(req).id) });
  });

  mountRoute(router, 'POST /api/account/tokens', ...body, async (req, res) => {
    const person = requirePerson(req);
    res.status(201).json(await createToken(context, person.id, readBody(req, createApiTokenSchema)));
  });

  mountRoute(router, 'DELETE /api/account/tokens/:tokenId', async (req, res) => {
    const person = requirePerson(req);
    res.json(await endToken(context, person.id, readId(req, 'tokenId', 'token')));
  });

  mountRoute(router, 'GET /api/account/deletion', async (req, res) => {
    res.json(await previewDeletion(context, requirePerson(req).id));
  });

  mountRoute(router, 'POST /api/account/deletion', ...body, async (req, res) => {
    const person = requirePerson(req);
    const proof = readBody(req, deleteAccountSchema);
    await withProof(person.id, proof.code !== undefined, () => deleteAccount(context, person, proof));
    await endSession(req);
    res.status(204).end();
  });

  return router;
}
