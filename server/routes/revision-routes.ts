import { Router } from 'express';
import { pastDocumentQuerySchema } from '#contract/queries.ts';
import {
  askForReviewSchema,
  buildSchema,
  decideSchema,
  restoreSchema,
  supersedeSchema,
} from '#contract/revisions.ts';
import { requirePerson } from '../auth/sessions.ts';
import { jsonBody } from '../middleware/json-body.ts';
import { markBuilt, startNextRevision, supersedeRevision } from '../services/after-approval.ts';
import { askForReview } from '../services/ask-for-review.ts';
import type { Context } from '../services/context.ts';
import { decideReview, withdrawReview } from '../services/decide-review.ts';
import { readPastDocument, readSittings } from '../services/design-history.ts';
import { limits } from '../services/limits.ts';
import { restoreDesign } from '../services/restore-design.ts';
import { readRevision, readRevisions } from '../services/revisions.ts';
import { mountRoute } from './mount-route.ts';
import { readBody, readId, readQuery } from './read-request.ts';

/** What a design was: revisions and what becomes of them, and the log. */
export function revisionRoutes(context: Context): Router {
  const router = Router();
  const body = jsonBody(limits.bodyBytes);

  mountRoute(router, 'GET /api/designs/:designId/revisions', async (req, res) => {
    const person = requirePerson(req);
    res.json({ revisions: await readRevisions(context, person.id, readId(req, 'designId', 'design')) });
  });

  mountRoute(router, 'POST /api/designs/:designId/revisions', ...body, async (req, res) => {
    const person = requirePerson(req);
    const designId = readId(req, 'designId', 'design');
    res.status(201).json(await askForReview(context, person.id, designId, readBody(req, askForReviewSchema)));
  });

  mountRoute(router, 'GET /api/revisions/:revisionId', async (req, res) => {
    const person = requirePerson(req);
    res.json(await readRevision(context, person.id, readId(req, 'revisionId', 'revision')));
  });

  mountRoute(router, 'POST /api/revisions/:revisionId/withdrawal', async (req, res) => {
    const person = requirePerson(req);
    res.json(await withdrawReview(context, person.id, readId(req, 'revisionId', 'revision')));
  });

  mountRoute(router, 'POST /api/revisions/:revisionId/decision', ...body, async (req, res) => {
    const person = requirePerson(req);
    const revisionId = readId(req, 'revisionId', 'revision');
    res.json(await decideReview(context, person.id, revisionId, readBody(req, decideSchema)));
  });

  mountRoute(router, 'POST /api/revisions/:revisionId/build', ...body, async (req, res) => {
    const person = requirePerson(req);
    const revisionId = readId(req, 'revisionId', 'revision');
    const { builtOn } = readBody(req, buildSchema);
    res.json(await markBuilt(context, person.id, revisionId, builtOn));
  });

  mountRoute(router, 'POST /api/revisions/:revisionId/supersession', ...body, async (req, res) => {
    const person = requirePerson(req);
    const revisionId = readId(req, 'revisionId', 'revision');
    const { reason } = readBody(req, supersedeSchema);
    res.json(await supersedeRevision(context, person.id, revisionId, reason));
  });

  mountRoute(router, 'POST /api/designs/:designId/draft', async (req, res) => {
    const person = requirePerson(req);
    res.json(await startNextRevision(context, person.id, readId(req, 'designId', 'design')));
  });

  mountRoute(router, 'POST /api/designs/:designId/restoration', ...body, async (req, res) => {
    const person = requirePerson(req);
    const designId = readId(req, 'designId', 'design');
    res.json(await restoreDesign(context, person.id, designId, readBody(req, restoreSchema)));
  });

  mountRoute(router, 'GET /api/designs/:designId/document', async (req, res) => {
    const person = requirePerson(req);
    const designId = readId(req, 'designId', 'design');
    const { sequence } = readQuery(req, pastDocumentQuerySchema);
    res.json(await readPastDocument(context, person.id, designId, sequence));
  });

  mountRoute(router, 'GET /api/designs/:designId/sittings', async (req, res) => {
    const person = requirePerson(req);
    res.json(await readSittings(context, person.id, readId(req, 'designId', 'design')));
  });

  return router;
}
