import type { z } from 'zod';
import type { ErrorCode, problemSchema } from '../contract/errors.ts';

export type Problem = z.infer<typeof problemSchema>;

/** A request that was refused or could not be made. Branch on `code`; `message` is for people. */
export class ApiError extends Error {
  readonly code: ErrorCode;
  readonly details: readonly Problem[];
  readonly requestId: string | null;
  readonly retryAfterSeconds: number | null;

  constructor(refusal: {
    readonly code: ErrorCode;
    readonly message: string;
    readonly details?: readonly Problem[];
    readonly requestId?: string;
    readonly retryAfterSeconds?: number;
  }) {
    super(refusal.message);
    this.name = 'ApiError';
    this.code = refusal.code;
    this.details = refusal.details ?? [];
    this.requestId = refusal.requestId ?? null;
    this.retryAfterSeconds = refusal.retryAfterSeconds ?? null;
  }

  /** What was expected of the field with this path, where it is at fault. */
  expectedOf(path: string): string | undefined {
    return this.details.find((problem) => problem.path === path)?.expected;
  }
}

/** Any thrown thing as an ApiError, so that a screen has one kind of error to show. */
export function asApiError(error: unknown): ApiError {
  if (error instanceof ApiError) return error;
  return new ApiError({
    code: 'internal',
    message: error instanceof Error ? error.message : 'Something went wrong',
  });
}
