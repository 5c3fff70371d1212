import type { RequestHandler, Response } from 'express';
import { Router } from 'express';
import { sheetExportQuerySchema } from '#contract/sheet-exports.ts';
import { requirePerson } from '../auth/sessions.ts';
import type { Context } from '../services/context.ts';
import { exportSheet } from '../services/sheet-drawing/export-sheet.ts';
import { mountRoute } from './mount-route.ts';
import { readId, readQuery } from './read-request.ts';

/** A design's sheet as a file. */
export function sheetExportRoutes(context: Context): Router {
  const router = Router();
  mountRoute(router, 'GET /api/designs/:designId/sheet.svg', answerWith(context, 'svg', 'image/svg+xml'));
  mountRoute(router, 'GET /api/designs/:designId/sheet.pdf', answerWith(context, 'pdf', 'application/pdf'));
  return router;
}

const answerWith =
  (context: Context, format: 'svg' | 'pdf', type: string): RequestHandler =>
  async (req, res) => {
    const person = requirePerson(req);
    const designId = readId(req, 'designId', 'design');
    const query = readQuery(req, sheetExportQuerySchema);
    const signal = abortedWith(res);
    try {
      const { file, name } = await exportSheet(context, person.id, designId, format, query, signal);
      res.setHeader('Cache-Control', 'private, no-cache');
      res.setHeader('Content-Disposition', `attachment; filename="${name}"`);
      // As a page of its own the drawing may do nothing at all.
      res.setHeader(
        'Content-Security-Policy',
        "default-src 'none'; style-src 'unsafe-inline'; font-src data:; sandbox",
      );
      res.type(type).send(Buffer.from(file));
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
