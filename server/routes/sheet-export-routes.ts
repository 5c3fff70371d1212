import type { Request, RequestHandler } from 'express';
import { Router } from 'express';
import { sheetExportQuerySchema } from '#contract/sheet-exports.ts';
import { requirePerson } from '../auth/sessions.ts';
import type { Context } from '../services/context.ts';
import type { DrawnFile, Wanted } from '../services/sheet-drawing/export-sheet.ts';
import { exportRevision, exportSheet } from '../services/sheet-drawing/export-sheet.ts';
import { mountRoute } from './mount-route.ts';
import { readId, readQuery } from './read-request.ts';
import { sendDrawing } from './send-drawing.ts';

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
    await sendDrawing(res, types[format], (signal) => draw(person.id, req, { format, query, signal }));
  };
