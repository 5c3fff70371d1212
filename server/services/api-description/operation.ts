import type { z } from 'zod';
import type { Route } from '../../auth/permissions.ts';

/** What one route takes and answers, for people and programs that call it. */
export interface Operation {
  /** What it does, in a few words. */
  readonly summary: string;
  readonly description?: string;
  readonly query?: z.ZodType;
  readonly body?: z.ZodType;
  /** The answer that carries it out, whose status is 200 unless said otherwise. */
  readonly answer: Answer;
}

export type Answer =
  | { readonly status?: 200 | 201; readonly schema: z.ZodType }
  /** A status and nothing else. */
  | { readonly status: 202 | 204 }
  /** A file. */
  | { readonly status?: 200; readonly mediaType: string };

/** Operations that belong together, by what people call them. */
export type Operations<Known extends Route = Route> = { readonly [route in Known]: Operation };
