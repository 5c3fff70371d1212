import type { z } from 'zod';
import { errorSchema } from '../contract/errors.ts';
import { sessionSchema, type Session } from '../contract/session.ts';
import { ApiError } from './api-error.ts';

interface Call {
  readonly method?: 'GET' | 'POST' | 'PATCH' | 'PUT' | 'DELETE';
  readonly body?: unknown;
  readonly signal?: AbortSignal;
}

let csrfToken: string | null = null;
let sessionEnded: () => void = () => undefined;
let secondStepRequired: () => void = () => undefined;

/** Tells the client what to do once the server no longer knows this session; undone by the returned function. */
export function onSessionEnded(listener: () => void): () => void {
  sessionEnded = listener;
  return () => {
    sessionEnded = () => undefined;
  };
}

/** Tells the client what to do once a workspace asks the reader for two-step sign-in; undone by the returned function. */
export function onSecondStepRequired(listener: () => void): () => void {
  secondStepRequired = listener;
  return () => {
    secondStepRequired = () => undefined;
  };
}

/** The session, and with it the token that every later change carries. */
export async function fetchSession(signal?: AbortSignal): Promise<Session> {
  const session = await readAnswer(sessionSchema, await send('/api/session', { signal }));
  csrfToken = session.csrfToken;
  return session;
}

/** One request by contract: the answer is checked against `schema`, a refusal is thrown as an ApiError. */
export async function callApi<T>(schema: z.ZodType<T>, path: string, call: Call = {}): Promise<T> {
  return readAnswer(schema, await sendSafely(path, call));
}

/** A file that the server makes. */
export async function fetchFile(path: string, signal: AbortSignal): Promise<Blob> {
  const response = await send(path, { signal });
  if (!response.ok) throw await refusalOf(response);
  return response.blob();
}

/** A file that the server makes of what is sent. */
export async function postForFile(path: string, body: unknown, signal: AbortSignal): Promise<Blob> {
  const response = await sendSafely(path, { method: 'POST', body, signal });
  if (!response.ok) throw await refusalOf(response);
  return response.blob();
}

/** A request whose answer carries nothing. */
export async function callApiForNothing(path: string, call: Call): Promise<void> {
  const response = await sendSafely(path, call);
  if (!response.ok) throw await refusalOf(response);
}

/**
 * Sends, and once more with a fresh token if the old one was refused: a token dies with its session, which another tab
 * may have replaced by signing in again.
 */
async function sendSafely(path: string, call: Call): Promise<Response> {
  const isChange = call.method !== undefined && call.method !== 'GET';
  if (isChange && csrfToken === null) await fetchSession(call.signal);
  const response = await send(path, call);
  if (response.status !== 403 || !isChange) return response;
  const refusal = errorSchema.safeParse(
    await response
      .clone()
      .json()
      .catch(() => null),
  );
  if (refusal.data?.code !== 'csrf') return response;
  await fetchSession(call.signal);
  return send(path, call);
}

async function send(path: string, { method = 'GET', body, signal }: Call): Promise<Response> {
  const headers: Record<string, string> = { accept: 'application/json' };
  if (body !== undefined) headers['content-type'] = 'application/json';
  if (method !== 'GET' && csrfToken !== null) headers['x-csrf-token'] = csrfToken;
  try {
    return await fetch(path, {
      method,
      headers,
      body: body === undefined ? undefined : JSON.stringify(body),
      signal,
      credentials: 'same-origin',
    });
  } catch (error) {
    if (signal?.aborted) throw error;
    throw new ApiError({
      code: 'unavailable',
      message: 'The server cannot be reached. Check your connection and try again.',
    });
  }
}

async function readAnswer<T>(schema: z.ZodType<T>, response: Response): Promise<T> {
  if (!response.ok) throw await refusalOf(response);
  const answer = schema.safeParse(await response.json().catch(() => undefined));
  if (answer.success) return answer.data;
  throw new ApiError({
    code: 'internal',
    message:
      'The server answered in a way that this page does not know. Load the page again to get its latest version.',
  });
}

async function refusalOf(response: Response): Promise<ApiError> {
  const refusal = errorSchema.safeParse(await response.json().catch(() => undefined));
  if (!refusal.success) {
    return new ApiError({
      code: response.status >= 500 ? 'unavailable' : 'internal',
      message: `The server answered with status ${response.status} and no reason. Try again in a moment.`,
    });
  }
  if (refusal.data.code === 'not-signed-in') sessionEnded();
  if (refusal.data.code === 'second-step-required') secondStepRequired();
  return new ApiError(refusal.data);
}
