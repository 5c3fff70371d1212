import type { RequestHandler, Router } from 'express';
import type { Route } from '../auth/permissions.ts';
import { isOpenToToken } from '../auth/permissions.ts';
import { withinTokenLimits } from '../auth/token-limits.ts';
import { Refusal } from '../errors.ts';

/**
 * Puts a route under its entry in the table of permissions: a route that has none cannot be written. What a token may not
 * reach is refused here, and what it may reach is done within its limits.
 */
export function mountRoute(router: Router, route: Route, ...handlers: readonly RequestHandler[]): void {
  const [method, path] = route.split(' ') as ['GET' | 'POST' | 'PATCH' | 'PUT' | 'DELETE', string];
  const verb = method.toLowerCase() as Lowercase<typeof method>;
  router[verb](path, refuseOtherTokens(route), ...handlers.map(withinLimits));
}

const refuseOtherTokens =
  (route: Route): RequestHandler =>
  (req, _res, next) => {
    const limits = req.tokenLimits;
    if (limits !== undefined && !isOpenToToken(route, limits.scope)) {
      const wayOut = isOpenToToken(route, 'write') ? 'make one that may write' : 'sign in to do this';
      throw new Refusal(
        'not-allowed',
        `A token of the scope ${limits.scope} is not answered at ${route}; ${wayOut}.`,
      );
    }
    next();
  };

const withinLimits =
  (handler: RequestHandler): RequestHandler =>
  (req, res, next) =>
    withinTokenLimits(req.tokenLimits, () => handler(req, res, next));
