import { Router } from 'express';
import { describeApi } from '../services/api-description/describe-api.ts';
import manifest from '../../package.json' with { type: 'json' };
import { mountRoute } from './mount-route.ts';

/** The description of all routes, made once: nothing of it changes while the server runs. */
export function apiDescriptionRoutes(publicUrl: string): Router {
  const router = Router();
  let description: object | undefined;

  mountRoute(router, 'GET /api/openapi.json', (_req, res) => {
    description ??= describeApi({ version: manifest.version, publicUrl });
    res.setHeader('Cache-Control', 'no-cache');
    res.json(description);
  });

  return router;
}
