import { afterEach, beforeEach, expect, test, vi } from 'vitest';
import { aProblem, answer } from '../test/things.js';
import { http } from './http.js';
import { mayRetry, retryDelayMs } from './query-client.js';
import { ApiError } from './api-error.js';
import { onSignedOut } from './session.js';

const fetched = vi.fn<typeof fetch>();
beforeEach(() => vi.stubGlobal('fetch', fetched));
afterEach(() => fetched.mockReset());

const headersOf = (call: number) => fetched.mock.calls[call]![1]!.headers as Record<string, string>;
const signedOut = () => answer(401, aProblem({ code: 'not_signed_in', status: 401 }));

test('a change carries our header and the version it is based on; a question carries neither', async () => {
  fetched.mockImplementation(() => Promise.resolve(answer(200, { id: 1 })));
  await http.patch('/api/x', { notes: 'new' }, { ifMatch: 3 });
  expect(headersOf(0)).toMatchObject({ 'X-Foreveil': '1', 'If-Match': '"3"', 'Content-Type': 'application/json' });
  await http.get('/api/x');
  expect(headersOf(1)).not.toHaveProperty('X-Foreveil');
  expect(headersOf(1)).not.toHaveProperty('If-Match');
});

test('a refusal rejects with its code, its fields and what the row is now', async () => {
  const current = { id: 'target-1', version: 4 };
  fetched.mockResolvedValue(
    answer(412, aProblem({ code: 'stale_version', status: 412, current, errors: [{ pointer: '/name', detail: 'is taken' }] })),
  );
  const error = await http.patch('/api/x', {}, { ifMatch: 3 }).catch((e: unknown) => e as ApiError);
  expect(error).toBeInstanceOf(ApiError);
  expect(error).toMatchObject({ code: 'stale_version', status: 412 });
  expect((error as ApiError).problem?.current).toEqual(current);
  expect((error as ApiError).detailAt('/name')).toBe('is taken');
  expect((error as ApiError).detailAt('/kind')).toBeNull();
});

test('no answer at all is no connection; an aborted request is an abort', async () => {
  fetched.mockRejectedValueOnce(new TypeError('Failed to fetch'));
  await expect(http.get('/api/x')).rejects.toMatchObject({ code: 'no_connection' });
  const abort = new AbortController();
  abort.abort();
  fetched.mockRejectedValueOnce(new DOMException('gone', 'AbortError'));
  await expect(http.get('/api/x', { signal: abort.signal })).rejects.toMatchObject({ name: 'AbortError' });
});

test('when the session has ended, the person is asked once and every refused request goes on', async () => {
  let session = false;
  fetched.mockImplementation(() => Promise.resolve(session ? answer(200, 'done') : signedOut()));
  const ask = vi.fn(() => {
    session = true;
    return Promise.resolve(true);
  });
  const stop = onSignedOut(ask);
  await expect(Promise.all([http.post('/api/a'), http.post('/api/b')])).resolves.toEqual(['done', 'done']);
  expect(ask).toHaveBeenCalledOnce();
  stop();
});

test('a person who does not sign in again gets the refusal, and a quiet request never asks', async () => {
  fetched.mockImplementation(() => Promise.resolve(signedOut()));
  const ask = vi.fn(() => Promise.resolve(false));
  const stop = onSignedOut(ask);
  await expect(http.post('/api/a')).rejects.toMatchObject({ code: 'not_signed_in' });
  await expect(http.get('/api/a', { quiet: true })).rejects.toMatchObject({ code: 'not_signed_in' });
  expect(ask).toHaveBeenCalledOnce();
  stop();
});

test('only what may pass by itself is tried again, at most three times, as late as the server asked', () => {
  const of = (code: ConstructorParameters<typeof ApiError>[0], status: number, wait: number | null = null) =>
    new ApiError(code, status, null, wait);
  for (const error of [of('no_connection', 0), of('unavailable', 503), of('internal', 500), of('too_many_requests', 429)]) {
    expect(mayRetry(0, error)).toBe(true);
    expect(mayRetry(3, error)).toBe(false);
  }
  for (const error of [of('not_found', 404), of('stale_version', 412), of('forbidden_role', 403), new Error('own')])
    expect(mayRetry(0, error)).toBe(false);
  expect(retryDelayMs(1, of('too_many_requests', 429, 30))).toBe(30_000);
  expect(retryDelayMs(2, of('unavailable', 503))).toBe(4000);
});
