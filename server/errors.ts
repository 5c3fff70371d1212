import type { z } from 'zod';
import type { ErrorCode, problemSchema } from '#contract/errors.ts';

export type Detail = z.infer<typeof problemSchema>;

export const statusOfCode: { readonly [code in ErrorCode]: number } = {
  'invalid-request': 400,
  'not-signed-in': 401,
  'wrong-credentials': 401,
  'not-allowed': 403,
  'second-step-required': 403,
  csrf: 403,
  'not-found': 404,
  conflict: 409,
  'too-large': 413,
  'invalid-design': 422,
  'too-many-requests': 429,
  internal: 500,
  unavailable: 503,
};

interface RefusalOptions {
  /** Where the code's usual status is not the most exact one. */
  readonly status?: number;
  readonly details?: readonly Detail[];
  readonly retryAfterSeconds?: number;
  readonly cause?: unknown;
}

/** A request that the server understood and does not carry out; the message is for the person who asked. */
export class Refusal extends Error {
  readonly code: ErrorCode;
  readonly status: number;
  readonly details: readonly Detail[] | undefined;
  readonly retryAfterSeconds: number | undefined;

  constructor(code: ErrorCode, message: string, options: RefusalOptions = {}) {
    super(message, { cause: options.cause });
    this.name = 'Refusal';
    this.code = code;
    this.status = options.status ?? statusOfCode[code];
    this.details = options.details;
    this.retryAfterSeconds = options.retryAfterSeconds;
  }
}

/** The same answer for what does not exist and for what belongs to others, so that nobody can probe for ids. */
export function notFound(
  what:
    | 'workspace'
    | 'engagement'
    | 'design'
    | 'revision'
    | 'share'
    | 'waiver'
    | 'comment'
    | 'equipment profile'
    | 'person'
    | 'session'
    | 'token'
    | 'invitation'
    | 'mail'
    | 'page',
): Refusal {
  return new Refusal(
    'not-found',
    `There is no such ${what}, or it belongs to a workspace that you are not in.`,
  );
}
