import type { Request, RequestHandler, Response } from 'express';
import { Router } from 'express';
import { sheetExportQuerySchema } from '#contract/sheet-exports.ts';
import { requirePerson } from '../auth/sessions.ts';
import type { Context } from '../services/context.ts';
import type { DrawnFile, Wanted } from '../services/sheet-drawing/export-sheet.ts';
import { exportRevision, exportSheet } from '../services/sheet-drawing/export-sheet.ts';
import { mountRoute } from './mount-route.ts';
import { readId, readQuery } from './read-request.ts';

/** The sheet of a design or of one of its revisions as a file. */
export function sheetExportRoutes(context: Context): Router {
  const router = Router();
  const design = (format: Format): RequestHandler =>
    answerWith(format, (personId, req, wanted) =>
      exportSheet(context, personId, readId(req, 'designId', 'design'), wanted),
    );
  const revision = (format: Format): RequestHandler =>
    answerWith(format, (personId, req, wanted) =>
      exportRevision(context, personId, readId(req, 'revisionId', 'revision'), wanted),
    );
  mountRoute(router, 'GET /api/designs/:designId/sheet.svg', design('svg'));
  mountRoute(router, 'GET /api/designs/:designId/sheet.pdf', design('pdf'));
  mountRoute(router, 'GET /api/revisions/:revisionId/sheet.svg', revision('svg'));
  mountRoute(router, 'GET /api/revisions/:revisionId/sheet.pdf', revision('pdf'));
  return router;
}

type Format = Wanted['format'];
const types = { svg: 'image/svg+xml', pdf: 'application/pdf' } as const;

const answerWith =
  (
    format: Format,
    draw: (personId: string, req: Request, wanted: Wanted) => Promise<DrawnFile>,
  ): RequestHandler =>
  async (req, res) => {
    const person = requirePerson(req);
    const query = readQuery(req, sheetExportQuerySchema);
    const signal = abortedWith(res);
    try {
      const { file, name } = await draw(person.id, req, { format, query, signal });
      res.setHeader('Cache-Control', 'private, no-cache');
      res.setHeader('Content-Disposition', `attachment; filename="${name}"`);
      // As a page of its own the drawing may do nothing at all.
      res.setHeader(
        'Content-Security-Policy',
        "default-src 'none'; style-src 'unsafe-inline'; font-src data:; sandbox",
      );
      res.type(types[format]).send(Buffer.from(file));
    } catch (error) {
      // Where nobody waits for the answer any more, none is due.
      if (!signal.aborted) throw error;
    }
  };

/** Aborts when the one who asked goes away before the answer is there. */
function abortedWith(res: Response): AbortSignal {
  const controller = new AbortController();
  res.on('close', () => {
    if (!res.writableEnded) controller.abort();
  });
  return controller.signal;
}
