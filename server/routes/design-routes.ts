import { Router } from 'express';
import { changeDesignSchema, savePatchesSchema } from '#contract/designs.ts';
import { patchesQuerySchema, thumbnailQuerySchema } from '#contract/queries.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { requirePerson } from '../auth/sessions.ts';
import { jsonBody } from '../middleware/json-body.ts';
import type { Context } from '../services/context.ts';
import { changeDesign, openDesign } from '../services/designs.ts';
import { limits } from '../services/limits.ts';
import { readPatches, saveEdits } from '../services/save-edits.ts';
import { readThumbnail } from '../services/thumbnails.ts';
import { mountRoute } from './mount-route.ts';
import { readBody, readId, readQuery } from './read-request.ts';

/** One design: its document, its log of patches, its place in the list. */
export function designRoutes(context: Context): Router {
  const router = Router();

  mountRoute(router, 'GET /api/designs/:designId', async (req, res) => {
    const person = requirePerson(req);
    res.json(await openDesign(context, person.id, readId(req, 'designId', 'design')));
  });

  mountRoute(router, 'PATCH /api/designs/:designId', ...jsonBody(limits.bodyBytes), async (req, res) => {
    const person = requirePerson(req);
    const designId = readId(req, 'designId', 'design');
    res.json(await changeDesign(context, person.id, designId, readBody(req, changeDesignSchema)));
  });

  mountRoute(router, 'GET /api/designs/:designId/patches', async (req, res) => {
    const person = requirePerson(req);
    const designId = readId(req, 'designId', 'design');
    const { after } = readQuery(req, patchesQuerySchema);
    res.json(await readPatches(context, person.id, designId, after));
  });

  const editsBody = jsonBody(limits.editsBodyBytes);
  mountRoute(router, 'POST /api/designs/:designId/patches', ...editsBody, async (req, res) => {
    const person = requirePerson(req);
    const designId = readId(req, 'designId', 'design');
    const { baseSequence, edits } = readBody(req, savePatchesSchema);
    res.json(
      await saveEdits(context, person.id, designId, {
        baseSequence,
        // Whatever came as JSON may stand in a patch; the design's schema decides about the outcome.
        edits: edits.map(({ editId, patch }) => ({ editId, patch: patch as MergePatch })),
      }),
    );
  });

  mountRoute(router, 'GET /api/designs/:designId/thumbnail', async (req, res) => {
    const person = requirePerson(req);
    const designId = readId(req, 'designId', 'design');
    const { v, theme } = readQuery(req, thumbnailQuerySchema);
    const { sequence, svg } = await readThumbnail(context, person.id, designId, theme);
    res.setHeader('Cache-Control', v === sequence ? 'private, max-age=86400' : 'private, no-cache');
    // As a page of its own the picture may do nothing at all.
    res.setHeader('Content-Security-Policy', "default-src 'none'; style-src 'unsafe-inline'; sandbox");
    res.type('image/svg+xml').send(svg);
  });

  return router;
}
