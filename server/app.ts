import { join } from 'node:path';
import express from 'express';
import type { Express } from 'express';
import { pino } from 'pino';
import type { Logger } from 'pino';
import { createSecretBox } from './auth/secret-box.ts';
import { createSessions, refuseForgedRequests } from './auth/sessions.ts';
import { createThrottles } from './auth/throttles.ts';
import type { Config } from './config.ts';
import { serverSecrets } from './config.ts';
import type { Database } from './db/open-database.ts';
import type { LiveHub } from './live/live-hub.ts';
import { createLiveHub } from './live/live-hub.ts';
import { bearerTokens, unlessByToken } from './middleware/bearer-tokens.ts';
import { clientFiles } from './middleware/client-files.ts';
import { answerUnknownPaths, errorAnswers } from './middleware/error-answers.ts';
import { lastSeen } from './middleware/last-seen.ts';
import { requestLog } from './middleware/request-log.ts';
import { securityHeaders } from './middleware/security-headers.ts';
import { accountRoutes } from './routes/account-routes.ts';
import { activityRoutes } from './routes/activity-routes.ts';
import { apiDescriptionRoutes } from './routes/api-description-routes.ts';
import { commentRoutes } from './routes/comment-routes.ts';
import { designRoutes } from './routes/design-routes.ts';
import { engagementRoutes } from './routes/engagement-routes.ts';
import { engineRoutes } from './routes/engine-routes.ts';
import { firstOwnerRoutes } from './routes/first-owner-routes.ts';
import { healthRoutes } from './routes/health-routes.ts';
import { liveRoutes } from './routes/live-routes.ts';
import { invitationRoutes } from './routes/invitation-routes.ts';
import { mailRoutes } from './routes/mail-routes.ts';
import { numberingRoutes } from './routes/numbering-routes.ts';
import { passwordResetRoutes } from './routes/password-reset-routes.ts';
import { profileRoutes } from './routes/profile-routes.ts';
import { revisionRoutes } from './routes/revision-routes.ts';
import { sessionRoutes } from './routes/session-routes.ts';
import { shareRoutes } from './routes/share-routes.ts';
import { sheetExportRoutes } from './routes/sheet-export-routes.ts';
import { waiverRoutes } from './routes/waiver-routes.ts';
import { workspaceRoutes } from './routes/workspace-routes.ts';
import type { Context } from './services/context.ts';
import { createNumberingCache } from './services/numbering.ts';
import { createDocumentCache } from './services/stored-documents.ts';
import { createThumbnailCache } from './services/thumbnails.ts';

export interface AppOptions {
  readonly database: Database;
  readonly config: Config;
  readonly clock?: () => Date;
  readonly log?: Logger;
  /** Whoever ends the process closes it first. */
  readonly live?: LiveHub;
  /** The built client. */
  readonly clientFolder?: string;
}

const builtClient = join(import.meta.dirname, '..', 'dist');

export function createApp({
  database,
  config,
  clock = () => new Date(),
  log = pino({ level: 'silent' }),
  live = createLiveHub(database),
  clientFolder = builtClient,
}: AppOptions): Express {
  const context: Context = {
    database,
    clock,
    publicUrl: config.publicUrl,
    secretBox: createSecretBox(serverSecrets(config)),
    documents: createDocumentCache(),
    thumbnails: createThumbnailCache(),
    numbering: createNumberingCache(),
  };
  const sessions = createSessions(database, config, (error) => log.error({ err: error }, 'session store'));
  const throttles = createThrottles(database.pool);

  const app = express();
  app.disable('x-powered-by');
  app.set('query parser', 'simple');
  app.set('etag', 'strong');
  // A site under https stands behind one proxy that ends TLS; its word about the visitor's address counts, nobody else's.
  app.set('trust proxy', config.publicUrl.startsWith('https:') ? 1 : false);

  app.use(requestLog(log));
  app.use(securityHeaders(config));
  // Nothing here is for search engines: plans, links to them, and pages that ask for a password.
  app.use((_req, res, next) => {
    res.setHeader('X-Robots-Tag', 'noindex, nofollow');
    next();
  });
  app.use('/api', (_req, res, next) => {
    res.setHeader('Cache-Control', 'no-store');
    next();
  });
  app.use(healthRoutes(database));
  app.use(apiDescriptionRoutes(config.publicUrl));
  app.use(engineRoutes(throttles));
  app.use('/api', bearerTokens(context, throttles));
  app.use('/api', ...[...sessions.handlers, lastSeen(context), refuseForgedRequests].map(unlessByToken));
  app.use(sessionRoutes(context, sessions, throttles));
  app.use(firstOwnerRoutes(context, throttles));
  app.use(accountRoutes(context, throttles));
  app.use(passwordResetRoutes(context, throttles));
  app.use(workspaceRoutes(context, throttles));
  app.use(activityRoutes(context));
  app.use(invitationRoutes(context, throttles));
  app.use(mailRoutes(context, { isKeeping: config.smtpUrl === null }));
  app.use(engagementRoutes(context));
  app.use(designRoutes(context));
  app.use(liveRoutes(context, live));
  app.use(sheetExportRoutes(context));
  app.use(shareRoutes(context, throttles));
  app.use(waiverRoutes(context));
  app.use(commentRoutes(context));
  app.use(revisionRoutes(context));
  app.use(numberingRoutes(context));
  app.use(profileRoutes(context));
  app.use('/api', answerUnknownPaths);
  app.use(clientFiles(clientFolder));
  app.use(answerUnknownPaths);
  app.use(errorAnswers(log));
  return app;
}
