import { Router } from 'express';
import type { Request, Response } from 'express';
import { sayPresenceSchema } from '#contract/live.ts';
import { liveQuerySchema } from '#contract/queries.ts';
import { requirePerson } from '../auth/sessions.ts';
import type { LiveHub } from '../live/live-hub.ts';
import { jsonBody } from '../middleware/json-body.ts';
import { isTokenStanding } from '../repositories/api-tokens.ts';
import { isSessionStanding } from '../repositories/sessions.ts';
import type { Context } from '../services/context.ts';
import { limits } from '../services/limits.ts';
import type { Stream } from '../services/live.ts';
import { followDesign, sayPresence } from '../services/live.ts';
import { mountRoute } from './mount-route.ts';
import { readBody, readId, readQuery } from './read-request.ts';

// What a browser waits before it asks again; after that its own patience counts.
const retryMs = 1_000;

/** What happens to a design while it is open. */
export function liveRoutes(context: Context, hub: LiveHub): Router {
  const router = Router();

  mountRoute(router, 'GET /api/designs/:designId/live', async (req, res) => {
    const person = requirePerson(req);
    const designId = readId(req, 'designId', 'design');
    const { connectionId } = readQuery(req, liveQuerySchema);
    const reader = {
      personId: person.id,
      connectionId,
      isSignedIn: () => isStillSignedIn(context, req),
    };
    let hasGone = false;
    req.once('close', () => (hasGone = true));
    const end = await followDesign(context, hub, reader, designId, eventStream(req, res));
    if (hasGone) end();
    else req.once('close', end);
  });

  mountRoute(
    router,
    'PUT /api/designs/:designId/presence',
    ...jsonBody(limits.bodyBytes),
    async (req, res) => {
      const person = requirePerson(req);
      const designId = readId(req, 'designId', 'design');
      await sayPresence(context, person.id, designId, readBody(req, sayPresenceSchema));
      res.status(204).end();
    },
  );

  return router;
}

/** Whether the session, or the token, that the request came with still counts. */
function isStillSignedIn(
  { database: { knex }, clock }: Context,
  { sessionID, tokenLimits }: Request,
): Promise<boolean> {
  return tokenLimits === undefined
    ? isSessionStanding(knex, sessionID, clock())
    : isTokenStanding(knex, tokenLimits.tokenId, clock());
}

/** The answer as server-sent events (HTML Standard, section 9.2); begun by the first of them. */
function eventStream(req: Request, res: Response): Stream {
  const begin = (): void => {
    if (res.headersSent) return;
    res.status(200);
    res.setHeader('Content-Type', 'text/event-stream');
    res.setHeader('Cache-Control', 'no-store');
    // Common practice, no source: reverse proxies that gather answers let this one through as it comes.
    res.setHeader('X-Accel-Buffering', 'no');
    req.socket.setNoDelay(true);
    res.write(`retry: ${retryMs}\n\n`);
  };
  return {
    send: (event, data) => {
      begin();
      // JSON holds no line break, so one data field carries it.
      res.write(`event: ${event}\ndata: ${JSON.stringify(data)}\n\n`);
    },
    beat: () => {
      begin();
      res.write(': here\n\n');
    },
    end: () => {
      begin();
      res.end();
    },
  };
}
