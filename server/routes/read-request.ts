import type { Request } from 'express';
import { z } from 'zod';
import type { Detail } from '../errors.ts';
import { Refusal, notFound } from '../errors.ts';

/** The request's body by contract; refuses with one detail per field at fault. */
export function readBody<T>(req: Request, schema: z.ZodType<T>): T {
  return read(req.body, schema, 'body');
}

/** The request's query by contract. */
export function readQuery<T>(req: Request, schema: z.ZodType<T>): T {
  return read(req.query, schema, 'query');
}

const idSchema = z.guid();

/** An id from the path; what cannot be an id names nothing. */
export function readId(req: Request, name: string, what: Parameters<typeof notFound>[0]): string {
  const id = idSchema.safeParse(req.params[name]);
  if (!id.success) throw notFound(what);
  return id.data;
}

function read<T>(value: unknown, schema: z.ZodType<T>, place: 'body' | 'query'): T {
  const result = schema.safeParse(value, { reportInput: true });
  if (result.success) return result.data;
  const details = result.error.issues.flatMap(detailsOf);
  const first = details[0]!;
  const field = first.path === '' ? `The ${place}` : `'${first.path}'`;
  throw new Refusal('invalid-request', `${field} is ${first.value}: ${first.expected}.`, { details });
}

function detailsOf(issue: z.core.$ZodIssue): readonly Detail[] {
  const path = issue.path.map(String).join('.');
  if (issue.code === 'unrecognized_keys') {
    return issue.keys.map((key) => ({
      path: path === '' ? key : `${path}.${key}`,
      value: 'given',
      expected: 'expected no field of that name',
    }));
  }
  const expected = expectedOf(issue);
  return [{ path, value: shown(path, issue.input), expected }];
}

function expectedOf(issue: z.core.$ZodIssue): string {
  const isOurs = !issue.message.startsWith('Invalid');
  if (!isOurs && issue.code === 'invalid_type') return `expected ${issue.expected}`;
  if (!isOurs && issue.code === 'invalid_value')
    return `expected one of ${issue.values.map((each) => JSON.stringify(each)).join(', ')}`;
  return issue.message.startsWith('expected') ? issue.message : `expected ${issue.message}`;
}

// The answer may be seen over a shoulder.
function shown(path: string, value: unknown): string {
  if (value === undefined) return 'missing';
  if (/password|passphrase|token|current|next|^code$/.test(path)) return 'not usable';
  const text = JSON.stringify(value) ?? 'not JSON';
  return text.length > 80 ? `${text.slice(0, 77)}…` : text;
}
