import { readFileSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { routes } from '../../server/auth/permissions.ts';

const serverFolder = join(import.meta.dirname, '..', '..', 'server');
const sources = [
  'app.ts',
  ...readdirSync(join(serverFolder, 'routes')).map((name) => join('routes', name)),
  ...readdirSync(join(serverFolder, 'middleware')).map((name) => join('middleware', name)),
].map((path) => ({ path, text: readFileSync(join(serverFolder, path), 'utf8') }));

test('every route that is served has its entry in the table of permissions, and every entry is served once', () => {
  const mounted = sources.flatMap(({ text }) =>
    [...text.matchAll(/mountRoute\(\s*\w+,\s*'([A-Z]+ \/[^']*)'/g)].map(([, route]) => route),
  );
  expect(mounted.sort()).toEqual(Object.keys(routes).sort());
});

test('no route of the API is put past the table of permissions', () => {
  const past = sources
    .filter(({ path }) => path !== join('routes', 'mount-route.ts'))
    .flatMap(({ path, text }) =>
      [...text.matchAll(/\b(?:app|router)\s*\.(?:get|post|put|patch|delete|all|route)\(\s*['"`]([^'"`]*)/g)]
        // The client's own pages come from one catch-all outside the API.
        .filter(([, served]) => served !== '/{*path}')
        .map(([call]) => `${path}: ${call}`),
    );
  expect(past).toEqual([]);
});
