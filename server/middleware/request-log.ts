import { randomUUID } from 'node:crypto';
import type { RequestHandler } from 'express';
import type { Logger } from 'pino';

declare module 'express-serve-static-core' {
  interface Request {
    /** Names this request in the log and in the answer to it. */
    requestId: string;
  }
}

/** Gives every request an id and the log one line about it. Neither keys in links, query, headers nor bodies are written down. */
export function requestLog(log: Logger): RequestHandler {
  return (req, res, next) => {
    req.requestId = randomUUID();
    res.setHeader('X-Request-Id', req.requestId);
    const startedAt = process.hrtime.bigint();
    res.once('close', () => {
      const line = {
        requestId: req.requestId,
        method: req.method,
        path: withoutKeys(req.originalUrl.split('?', 1)[0]!),
        status: res.statusCode,
        durationUs: Number((process.hrtime.bigint() - startedAt) / 1000n),
        personId: req.user?.id,
        ...(res.writableFinished ? {} : { aborted: true }),
      };
      if (res.statusCode >= 500) log.error(line, 'answered');
      else log.info(line, 'answered');
    });
    next();
  };
}

// A link that is a key has 43 letters or more in one piece; ids have 36.
const keyLike = /[\w-]{40,}/g;

/** A path such that who reads the log can't open what a link in a mail opens. */
function withoutKeys(path: string): string {
  return path.replace(keyLike, '…');
}
