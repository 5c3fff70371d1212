import { Router } from 'express';
import { applySuggestionSchema, changeCommentSchema, writeCommentSchema } from '#contract/comments.ts';
import { requirePerson } from '../auth/sessions.ts';
import { jsonBody } from '../middleware/json-body.ts';
import {
  changeComment,
  deleteComment,
  readComments,
  resolveThread,
  writeComment,
} from '../services/comments.ts';
import type { Context } from '../services/context.ts';
import { limits } from '../services/limits.ts';
import { applySuggestion } from '../services/suggestions.ts';
import { mountRoute } from './mount-route.ts';
import { readBody, readId } from './read-request.ts';

/** What people say about a design, and the changes that they suggest. */
export function commentRoutes(context: Context): Router {
  const router = Router();

  mountRoute(router, 'GET /api/designs/:designId/comments', async (req, res) => {
    const person = requirePerson(req);
    res.json(await readComments(context, person.id, readId(req, 'designId', 'design')));
  });

  // A suggestion may place whole sites.
  const long = jsonBody(limits.suggestionBodyBytes);
  mountRoute(router, 'POST /api/designs/:designId/comments', ...long, async (req, res) => {
    const person = requirePerson(req);
    const designId = readId(req, 'designId', 'design');
    res.status(201).json(await writeComment(context, person.id, designId, readBody(req, writeCommentSchema)));
  });

  const body = jsonBody(limits.bodyBytes);
  mountRoute(router, 'PATCH /api/comments/:commentId', ...body, async (req, res) => {
    const person = requirePerson(req);
    const commentId = readId(req, 'commentId', 'comment');
    const { body: words } = readBody(req, changeCommentSchema);
    res.json(await changeComment(context, person.id, commentId, words));
  });

  mountRoute(router, 'DELETE /api/comments/:commentId', async (req, res) => {
    const person = requirePerson(req);
    await deleteComment(context, person.id, readId(req, 'commentId', 'comment'));
    res.status(204).end();
  });

  mountRoute(router, 'POST /api/comments/:commentId/resolution', async (req, res) => {
    const person = requirePerson(req);
    res.json(await resolveThread(context, person.id, readId(req, 'commentId', 'comment'), true));
  });

  mountRoute(router, 'DELETE /api/comments/:commentId/resolution', async (req, res) => {
    const person = requirePerson(req);
    res.json(await resolveThread(context, person.id, readId(req, 'commentId', 'comment'), false));
  });

  mountRoute(router, 'POST /api/comments/:commentId/application', ...body, async (req, res) => {
    const person = requirePerson(req);
    const commentId = readId(req, 'commentId', 'comment');
    res.json(await applySuggestion(context, person.id, commentId, readBody(req, applySuggestionSchema)));
  });

  return router;
}
