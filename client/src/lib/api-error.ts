import { ERROR_CODES, type ErrorCode, type Problem } from '@foreveil/shared';

/** What the server can answer, and the two ways in which no answer of ours comes back. */
export type ClientErrorCode = ErrorCode | 'no_connection' | 'strange_answer';

/** A request that was refused or did not reach the server. `problem` is what the server said, null when it said nothing of ours. */
export class ApiError extends Error {
  override readonly name = 'ApiError';

  constructor(
    readonly code: ClientErrorCode,
    /** HTTP status, 0 when there was no answer */
    readonly status: number,
    readonly problem: Problem | null = null,
    /** from Retry-After */
    readonly retryAfterSeconds: number | null = null,
  ) {
    super(problem?.detail ?? code);
  }

  /** What a field was refused for; the pointer is that of the request body, '/name'. */
  detailAt(pointer: string): string | null {
    return this.problem?.errors?.find((error) => error.pointer === pointer)?.detail ?? null;
  }
}

export const isApiError = (error: unknown, code?: ClientErrorCode): error is ApiError =>
  error instanceof ApiError && (code === undefined || error.code === code);

const isCode = (code: unknown): code is ErrorCode => (ERROR_CODES as readonly unknown[]).includes(code);

/** @param body text of the answer, problem+json when it comes from our server */
export function errorFrom(status: number, body: string, retryAfter: string | null): ApiError {
  const seconds = retryAfter !== null && /^\d+$/.test(retryAfter) ? Number(retryAfter) : null;
  try {
    const problem = JSON.parse(body) as Problem;
    if (isCode(problem.code)) return new ApiError(problem.code, status, problem, seconds);
  } catch {
    // a proxy's page or an answer cut short: no problem of ours
  }
  return new ApiError(status >= 502 && status <= 504 ? 'unavailable' : 'strange_answer', status, null, seconds);
}
