import { ApiError, errorFrom, isApiError } from './api-error.js';
import { signInAgain } from './session.js';

export interface RequestOptions {
  readonly signal?: AbortSignal;
  /** version that was seen; sent as If-Match: "3" */
  readonly ifMatch?: number;
  /** leave a 401 to the caller instead of asking the person to sign in again */
  readonly quiet?: boolean;
}

type Method = 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE';

/** Marks a change as coming from our own pages; the server asks for it. */
export const OWN_HEADER = { 'X-Foreveil': '1' } as const;

function headersFor(method: Method, body: unknown, { ifMatch }: RequestOptions): Record<string, string> {
  return {
    Accept: 'application/json, application/problem+json',
    ...(method === 'GET' ? {} : OWN_HEADER),
    ...(body === undefined ? {} : { 'Content-Type': 'application/json' }),
    ...(ifMatch === undefined ? {} : { 'If-Match': `"${ifMatch}"` }),
  };
}

async function once(method: Method, path: string, body: unknown, options: RequestOptions): Promise<Response> {
  let response: Response;
  try {
    response = await fetch(path, {
      method,
      credentials: 'same-origin',
      headers: headersFor(method, body, options),
      ...(body === undefined ? {} : { body: JSON.stringify(body) }),
      ...(options.signal ? { signal: options.signal } : {}),
    });
  } catch (error) {
    if (options.signal?.aborted) throw error;
    throw new ApiError('no_connection', 0);
  }
  if (!response.ok) throw errorFrom(response.status, await response.text(), response.headers.get('Retry-After'));
  return response;
}

/** Does `send`; when the session has ended, asks the person to sign in again and does it once more. */
export async function withSession<T>(send: () => Promise<T>, quiet = false): Promise<T> {
  try {
    return await send();
  } catch (error) {
    if (quiet || !isApiError(error, 'not_signed_in') || !(await signInAgain())) throw error;
    return send();
  }
}

async function json<T>(method: Method, path: string, body: unknown, options: RequestOptions = {}): Promise<T> {
  const response = await withSession(() => once(method, path, body, options), options.quiet);
  if (response.status === 204 || response.status === 202) return undefined as T; // done, or taken on: neither says more
  try {
    return (await response.json()) as T;
  } catch (error) {
    if (options.signal?.aborted) throw error;
    throw new ApiError('strange_answer', response.status);
  }
}

/** The API over HTTP. Every failure is an ApiError, except that an aborted request rejects with the abort itself. */
export const http = {
  get: <T>(path: string, options?: RequestOptions) => json<T>('GET', path, undefined, options),
  post: <T>(path: string, body?: unknown, options?: RequestOptions) => json<T>('POST', path, body, options),
  put: <T>(path: string, body?: unknown, options?: RequestOptions) => json<T>('PUT', path, body, options),
  patch: <T>(path: string, body: unknown, options?: RequestOptions) => json<T>('PATCH', path, body, options),
  delete: (path: string, options?: RequestOptions) => json<void>('DELETE', path, undefined, options),
  /** the answer's bytes, for columns of samples */
  bytes: async (path: string, options: RequestOptions = {}): Promise<ArrayBuffer> => {
    const response = await withSession(() => once('GET', path, undefined, options), options.quiet);
    return response.arrayBuffer();
  },
};
