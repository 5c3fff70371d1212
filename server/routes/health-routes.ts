import { Router } from 'express';
import type { Database } from '../db/open-database.ts';
import { isSchemaCurrent } from '../db/migrate.ts';
import { Refusal } from '../errors.ts';
import { mountRoute } from './mount-route.ts';

/** Whether requests can be served: the database answers and has this program's schema. */
export function healthRoutes(database: Database): Router {
  const router = Router();
  mountRoute(router, 'GET /api/health', async (_req, res) => {
    let isCurrent: boolean;
    try {
      isCurrent = await isSchemaCurrent(database.knex);
    } catch (error) {
      throw new Refusal('unavailable', 'The database does not answer.', { cause: error });
    }
    if (!isCurrent) {
      throw new Refusal('unavailable', 'The database has not got this version’s schema; run the migrations.');
    }
    res.json({ status: 'ok' });
  });
  return router;
}
