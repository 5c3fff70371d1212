import express from 'express';
import type { RequestHandler } from 'express';
import { Refusal } from '../errors.ts';
import { limits } from '../services/limits.ts';

/** Reads a JSON body of at most so many bytes; any other type of content is refused. */
export function jsonBody(limitBytes: number): readonly RequestHandler[] {
  return [
    refuseOtherTypes,
    express.json({
      limit: limitBytes,
      strict: false,
      verify: (_req, _res, body) => refuseDeepNesting(body),
    }),
  ];
}

const refuseOtherTypes: RequestHandler = (req, _res, next) => {
  // `is` answers null when there is no body at all; its schema says what is missing then.
  if (req.is('application/json') === false) {
    throw new Refusal(
      'invalid-request',
      `Content-Type is '${req.headers['content-type'] ?? ''}'; send the body as application/json.`,
      { status: 415 },
    );
  }
  next();
};

const quote = 0x22;
const backslash = 0x5c;
const openings = new Set([0x5b, 0x7b]);
const closings = new Set([0x5d, 0x7d]);

// What walks the parsed value does so by recursion; a body of nothing but brackets would overflow its stack.
function refuseDeepNesting(body: Buffer): void {
  let level = 0;
  let inString = false;
  for (let at = 0; at < body.length; at += 1) {
    const byte = body[at]!;
    if (inString) {
      if (byte === backslash) at += 1;
      else if (byte === quote) inString = false;
    } else if (byte === quote) inString = true;
    else if (openings.has(byte)) {
      level += 1;
      if (level > limits.nestedLevels) {
        throw new Refusal(
          'invalid-request',
          `The body nests objects and arrays more than ${limits.nestedLevels} levels deep; no request needs that.`,
        );
      }
    } else if (closings.has(byte)) level -= 1;
  }
}
