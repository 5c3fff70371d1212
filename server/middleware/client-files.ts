import { existsSync } from 'node:fs';
import { join } from 'node:path';
import express, { Router } from 'express';

const notBuilt = `<!doctype html>
<html lang="en">
<meta charset="utf-8">
<title>Longpatch is not built yet</title>
<h1>The pages are not built yet</h1>
<p>The server answers, but its folder <code>dist/</code> holds no pages. Run <code>npm start</code> in the checkout,
which builds them, and load this page again.</p>
</html>
`;

/** The built client. Every path that is no file is a page of its own, so that links into the application work. */
export function clientFiles(folder: string): Router {
  const router = Router();
  const firstPage = join(folder, 'index.html');
  // Names in assets/ carry a hash of their content; everything else may change under its name.
  router.use(
    '/assets',
    express.static(join(folder, 'assets'), {
      immutable: true,
      maxAge: '1y',
      index: false,
      fallthrough: true,
    }),
    (_req, res) => {
      noCache(res);
      res.status(404).type('text').send('No such file: the page was built again since. Load it anew.\n');
    },
  );
  router.use(
    express.static(folder, { index: false, dotfiles: 'ignore', cacheControl: false, setHeaders: noCache }),
  );
  router.get('/{*path}', (_req, res) => {
    noCache(res);
    if (existsSync(firstPage)) res.sendFile(firstPage, { cacheControl: false });
    else res.status(503).type('html').send(notBuilt);
  });
  return router;
}

function noCache(res: { setHeader(name: string, value: string): unknown }): void {
  res.setHeader('Cache-Control', 'no-cache');
}
