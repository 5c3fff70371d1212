import type { RequestHandler, Router } from 'express';
import type { Route } from '../auth/permissions.ts';

/** Puts a route under its entry in the table of permissions: a route that has none cannot be written. */
export function mountRoute(router: Router, route: Route, ...handlers: readonly RequestHandler[]): void {
  const [method, path] = route.split(' ') as ['GET' | 'POST' | 'PATCH' | 'PUT' | 'DELETE', string];
  const verb = method.toLowerCase() as Lowercase<typeof method>;
  router[verb](path, ...handlers);
}
