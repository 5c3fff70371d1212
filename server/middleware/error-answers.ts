import type { ErrorRequestHandler, RequestHandler } from 'express';
import type { Logger } from 'pino';
import type { ErrorBody } from '#contract/errors.ts';
import { Refusal } from '../errors.ts';

/** What no route answered. */
export const answerUnknownPaths: RequestHandler = (req) => {
  throw new Refusal('not-found', `Nothing answers ${req.method} ${req.path}.`);
};

/** The only place that turns an error into an answer: `{ code, message, details, requestId }`. */
export function errorAnswers(log: Logger): ErrorRequestHandler {
  // Express knows an error handler by its four parameters.
  return (error: unknown, req, res, _next) => {
    const refusal = refusalOf(error);
    if (refusal.status >= 500) log.error({ err: error, requestId: req.requestId }, 'failed');
    if (res.headersSent) {
      res.destroy();
      return;
    }
    const body: ErrorBody = {
      code: refusal.code,
      message: refusal.message,
      ...(refusal.details === undefined ? {} : { details: [...refusal.details] }),
      ...(refusal.retryAfterSeconds === undefined ? {} : { retryAfterSeconds: refusal.retryAfterSeconds }),
      requestId: req.requestId,
    };
    if (refusal.retryAfterSeconds !== undefined) res.setHeader('Retry-After', refusal.retryAfterSeconds);
    res.setHeader('Cache-Control', 'no-store');
    res.status(refusal.status).json(body);
  };
}

type ForeignError = {
  readonly name?: unknown;
  readonly code?: unknown;
  readonly type?: unknown;
  readonly status?: unknown;
  readonly limit?: unknown;
  readonly message?: unknown;
};

/** Errors of the libraries in the way, in our words. What is not known here is a bug of ours: 500, its message for the log alone. */
function refusalOf(error: unknown): Refusal {
  if (error instanceof Refusal) return error;
  const { name, code, type, status, limit, message } = (error ?? {}) as ForeignError;
  if (code === 'EBADCSRFTOKEN') {
    return new Refusal(
      'csrf',
      'The request does not carry this session’s token; read GET /api/session and send its csrfToken as X-CSRF-Token.',
      { cause: error },
    );
  }
  if (type === 'entity.too.large') {
    return new Refusal('too-large', `The request is larger than ${String(limit)} bytes; send less at once.`, {
      cause: error,
    });
  }
  if (type === 'entity.parse.failed') {
    return new Refusal(
      'invalid-request',
      'The request’s body is not JSON; check its commas, quotes and brackets.',
      {
        cause: error,
      },
    );
  }
  if (isDatabaseAway(name, code, message)) {
    return new Refusal('unavailable', 'The database does not answer just now; try again in a moment.', {
      cause: error,
    });
  }
  // http-errors of Express and its body parser: bad escapes in the path, unknown charsets and encodings, cut-off bodies.
  if (typeof status === 'number' && status >= 400 && status < 500) {
    return new Refusal('invalid-request', `The request cannot be read: ${String(message)}.`, {
      status,
      cause: error,
    });
  }
  return new Refusal(
    'internal',
    'Something went wrong on our side; it is written down under this request’s id.',
    {
      cause: error,
    },
  );
}

// Appendix A of PostgreSQL's documentation: class 08 connection exceptions, 53 insufficient resources, 55P03 lock not
// available, 57 operator intervention (shutdown, crash, statement timeout), 40 transaction rollback.
function isDatabaseAway(name: unknown, code: unknown, message: unknown): boolean {
  if (name === 'KnexTimeoutError') return true;
  if (
    typeof code === 'string' &&
    /^(08...|53...|55P03|57...|40...|ECONNREFUSED|ECONNRESET|EPIPE|ETIMEDOUT)$/.test(code)
  )
    return true;
  return (
    typeof message === 'string' &&
    /^(Connection terminated|timeout exceeded when trying to connect)/.test(message)
  );
}
