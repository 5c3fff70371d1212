import { describe, expect, test, vi } from 'vitest';
import { z } from 'zod';
import { callApi, callApiForNothing, fetchSession, onSessionEnded } from '../../src/lib/api-client.ts';
import { ApiError, asApiError } from '../../src/lib/api-error.ts';
import { fakeApi, json, nothing, refusal, sessionOf, strangerSession } from '../support/fake-api.ts';

const thingSchema = z.object({ name: z.string() });

async function refusalOf(call: Promise<unknown>): Promise<ApiError> {
  return call.then(
    () => Promise.reject(new Error('it was not refused')),
    (error: unknown) => {
      if (error instanceof ApiError) return error;
      throw error;
    },
  );
}

test('an answer by contract arrives parsed', async () => {
  fakeApi({ 'GET /api/things/1': json({ name: 'fw-ho', extra: 1 }) });
  expect(await callApi(thingSchema, '/api/things/1')).toEqual({ name: 'fw-ho' });
});

test('an answer that breaks the contract is told as such instead of being passed on', async () => {
  fakeApi({ 'GET /api/things/1': json({ name: 5 }) });
  const error = await refusalOf(callApi(thingSchema, '/api/things/1'));
  expect(error.code).toBe('internal');
  expect(error.message).toContain('Load the page again');
});

test('a refusal keeps its code, its fields and the number under which the server logged it', async () => {
  const details = [{ path: 'name', value: '""', expected: 'expected a title' }];
  fakeApi({ 'GET /api/things/1': refusal(400, 'invalid-request', { message: 'No.', details }) });
  const error = await refusalOf(callApi(thingSchema, '/api/things/1'));
  expect(error).toMatchObject({ code: 'invalid-request', message: 'No.', details, requestId: 'r-1' });
  expect(error.expectedOf('name')).toBe('expected a title');
  expect(error.expectedOf('other')).toBeUndefined();
});

test('a page of a proxy in place of an answer becomes a refusal with its status', async () => {
  fakeApi({ 'GET /api/things/1': () => new Response('<h1>Bad gateway</h1>', { status: 502 }) });
  const error = await refusalOf(callApi(thingSchema, '/api/things/1'));
  expect(error.code).toBe('unavailable');
  expect(error.message).toContain('502');
});

test('a server that cannot be reached is told apart from one that refuses', async () => {
  vi.stubGlobal('fetch', () => Promise.reject(new TypeError('failed to fetch')));
  const error = await refusalOf(callApi(thingSchema, '/api/things/1'));
  expect(error.code).toBe('unavailable');
});

test('a request that was called off rejects with the reason and is no failure of the server', async () => {
  const controller = new AbortController();
  controller.abort();
  vi.stubGlobal('fetch', (_: string, init: RequestInit) => Promise.reject(init.signal?.reason));
  await expect(callApi(thingSchema, '/api/things/1', { signal: controller.signal })).rejects.toMatchObject({
    name: 'AbortError',
  });
});

describe('the token against forged requests', () => {
  test('goes with every change and with no reading', async () => {
    const { asked } = fakeApi({
      'GET /api/session': json(sessionOf('architect')),
      'GET /api/things/1': json({ name: 'a' }),
      'PATCH /api/things/1': json({ name: 'b' }),
    });
    await fetchSession();
    await callApi(thingSchema, '/api/things/1');
    await callApi(thingSchema, '/api/things/1', { method: 'PATCH', body: { name: 'b' } });
    expect(asked.map(({ headers }) => headers.get('x-csrf-token'))).toEqual([null, null, 'token-1']);
    expect(asked[2]).toMatchObject({ body: { name: 'b' } });
  });

  test('is fetched anew and the change sent once more when it was refused', async () => {
    let token = 'old';
    const { asked } = fakeApi({
      'GET /api/session': () => Response.json({ ...strangerSession, csrfToken: token }),
      'POST /api/things': ({ headers }) =>
        headers.get('x-csrf-token') === 'new'
          ? new Response(null, { status: 204 })
          : Response.json({ code: 'csrf', message: 'no', requestId: 'r' }, { status: 403 }),
    });
    await fetchSession();
    token = 'new';
    await callApiForNothing('/api/things', { method: 'POST', body: {} });
    expect(asked.map(({ method, path }) => `${method} ${path}`)).toEqual([
      'GET /api/session',
      'POST /api/things',
      'GET /api/session',
      'POST /api/things',
    ]);
  });

  test('is not tried a third time', async () => {
    const { asked } = fakeApi({
      'GET /api/session': json(strangerSession),
      'POST /api/things': refusal(403, 'csrf'),
    });
    const error = await refusalOf(callApiForNothing('/api/things', { method: 'POST' }));
    expect(error.code).toBe('csrf');
    expect(asked.filter(({ method }) => method === 'POST')).toHaveLength(2);
  });

  test('a change that the reader may not make is refused at once', async () => {
    const { asked } = fakeApi({
      'GET /api/session': json(strangerSession),
      'POST /api/things': refusal(403, 'not-allowed'),
    });
    expect((await refusalOf(callApiForNothing('/api/things', { method: 'POST' }))).code).toBe('not-allowed');
    expect(asked.filter(({ method }) => method === 'POST')).toHaveLength(1);
  });
});

test('whoever listens hears that the session has ended, and not of a wrong password', async () => {
  const heard = vi.fn();
  const stop = onSessionEnded(heard);
  fakeApi({
    'GET /api/session': json(strangerSession),
    'GET /api/things/1': refusal(401, 'not-signed-in'),
    'POST /api/session': refusal(401, 'wrong-credentials'),
    'DELETE /api/things/1': nothing,
  });
  await refusalOf(callApiForNothing('/api/session', { method: 'POST', body: {} }));
  expect(heard).not.toHaveBeenCalled();
  await refusalOf(callApi(thingSchema, '/api/things/1'));
  expect(heard).toHaveBeenCalledTimes(1);
  stop();
  await refusalOf(callApi(thingSchema, '/api/things/1'));
  expect(heard).toHaveBeenCalledTimes(1);
});

test('any thrown thing can be shown', () => {
  expect(asApiError(new Error('odd')).message).toBe('odd');
  expect(asApiError('odd').code).toBe('internal');
});
