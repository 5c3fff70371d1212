import { Router } from 'express';
import { mailSettingsSchema } from '#contract/mail-settings.ts';
import { requirePerson } from '../auth/sessions.ts';
import { readMailSettings, writeMailSettings } from '../mail/mail-wishes.ts';
import { jsonBody } from '../middleware/json-body.ts';
import type { Context } from '../services/context.ts';
import { limits } from '../services/limits.ts';
import { readKeptMail, readMailPage, readMailbox } from '../services/mailbox.ts';
import { mountRoute } from './mount-route.ts';
import { readBody, readId } from './read-request.ts';

// A kept mail runs nothing, loads nothing, is shown by our own pages alone, and its links open beside them.
const mailPagePolicy =
  "default-src 'none'; style-src 'unsafe-inline'; frame-ancestors 'self'; base-uri 'none'; form-action 'none'; sandbox allow-popups allow-popups-to-escape-sandbox";

/** What a person wants to be told by mail, and mails that were kept instead of delivered. */
export function mailRoutes(context: Context, { isKeeping }: { readonly isKeeping: boolean }): Router {
  const router = Router();
  const body = jsonBody(limits.bodyBytes);

  mountRoute(router, 'GET /api/account/mail', async (req, res) => {
    res.json(await readMailSettings(context.database.knex, requirePerson(req).id));
  });

  mountRoute(router, 'PUT /api/account/mail', ...body, async (req, res) => {
    const person = requirePerson(req);
    const settings = readBody(req, mailSettingsSchema);
    await writeMailSettings(context.database.knex, person.id, settings);
    res.json(settings);
  });

  mountRoute(router, 'GET /api/workspaces/:workspaceId/mailbox', async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'workspace');
    res.json({ isKeeping, mails: await readMailbox(context, person.id, workspaceId) });
  });

  mountRoute(router, 'GET /api/workspaces/:workspaceId/mailbox/:mailId', async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'mail');
    res.json(await readKeptMail(context, person.id, workspaceId, readId(req, 'mailId', 'mail')));
  });

  mountRoute(router, 'GET /api/workspaces/:workspaceId/mailbox/:mailId/page', async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'mail');
    const page = await readMailPage(context, person.id, workspaceId, readId(req, 'mailId', 'mail'));
    res.setHeader('Content-Security-Policy', mailPagePolicy);
    res.setHeader('X-Frame-Options', 'SAMEORIGIN');
    res.type('html').send(page);
  });

  return router;
}
