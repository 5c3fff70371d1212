import type { RequestHandler } from 'express';
import { Router } from 'express';
import {
  checkRequestSchema,
  loadRequestSchema,
  outageRequestSchema,
  rulesRequestSchema,
  traceRequestSchema,
} from '#contract/engine.ts';
import { wireRequestSchema } from '#engine/wire/wire-request.ts';
import type { Throttles } from '../auth/throttles.ts';
import { jsonBody } from '../middleware/json-body.ts';
import {
  checkDesign,
  loadAnswer,
  outageAnswer,
  rulesAnswer,
  traceAnswer,
  wireAnswer,
} from '../services/engine-answers.ts';
import { limits } from '../services/limits.ts';
import { mountRoute } from './mount-route.ts';
import { readBody } from './read-request.ts';

// Working out fixes runs the checks many times over.
const weightOfFixes = 10;
// Following each demand or host is more work than a check.
const weightOfFollowing = 4;

/** The engine for everybody: no sign-in, nothing kept, each address so many requests a minute. */
export function engineRoutes(throttles: Throttles): Router {
  const router = Router();
  const throttle: RequestHandler = async (req, _res, next) => {
    await throttles.engineRequest(req.ip ?? '');
    next();
  };
  const body = [throttle, ...jsonBody(limits.engineBodyBytes)];

  mountRoute(router, 'POST /api/engine/check', ...body, async (req, res) => {
    const { design, withFixes = false } = readBody(req, checkRequestSchema);
    if (withFixes) await throttles.engineRequest(req.ip ?? '', weightOfFixes - 1);
    res.json(checkDesign(design, withFixes));
  });

  mountRoute(router, 'POST /api/engine/wire', ...body, (req, res) => {
    res.json(wireAnswer(readBody(req, wireRequestSchema)));
  });

  mountRoute(router, 'POST /api/engine/rules', ...body, (req, res) => {
    res.json(rulesAnswer(readBody(req, rulesRequestSchema)));
  });

  mountRoute(router, 'POST /api/engine/trace', ...body, (req, res) => {
    const { design, probe } = readBody(req, traceRequestSchema);
    res.json(traceAnswer(design, probe));
  });

  mountRoute(router, 'POST /api/engine/load', ...body, async (req, res) => {
    const request = readBody(req, loadRequestSchema);
    await throttles.engineRequest(req.ip ?? '', weightOfFollowing - 1);
    res.json(loadAnswer(request));
  });

  mountRoute(router, 'POST /api/engine/outage', ...body, async (req, res) => {
    const request = readBody(req, outageRequestSchema);
    await throttles.engineRequest(req.ip ?? '', weightOfFollowing - 1);
    res.json(outageAnswer(request));
  });

  return router;
}
