import type { RequestHandler } from 'express';
import type { Throttles } from '../auth/throttles.ts';
import { Refusal } from '../errors.ts';
import { holderOfToken } from '../services/api-tokens.ts';
import type { Context } from '../services/context.ts';

// RFC 6750 section 2.1; the scheme's name is compared without case (RFC 9110 section 11.1).
const bearer = /^Bearer +([A-Za-z0-9._~+/=-]+) *$/i;

/** Reads whose token a request carries. Such a request has no session, and needs no proof that a page of ours sent it. */
export function bearerTokens(context: Context, throttles: Throttles): RequestHandler {
  return async (req, res, next) => {
    const { authorization = '' } = req.headers;
    if (!/^Bearer\b/i.test(authorization)) return next();
    const secret = bearer.exec(authorization)?.[1];
    const holder =
      secret === undefined
        ? {
            ok: false as const,
            message: 'The Authorization header is no Bearer token; send Bearer, a space and the token.',
          }
        : await holderOfToken(context, secret);
    if (!holder.ok) {
      await throttles.badToken(req.ip ?? '');
      // RFC 6750 section 3.1.
      res.setHeader('WWW-Authenticate', 'Bearer error="invalid_token"');
      throw new Refusal('not-signed-in', holder.message);
    }
    await throttles.tokenRequest(holder.limits.tokenId);
    req.user = holder.account;
    req.tokenLimits = holder.limits;
    next();
  };
}

/** For what serves sessions alone: cookies, and proof that a page of ours sent the request. */
export const unlessByToken =
  (handler: RequestHandler): RequestHandler =>
  (req, res, next) =>
    req.tokenLimits === undefined ? handler(req, res, next) : next();
