import { QueryClient } from '@tanstack/react-query';
import { ApiError } from './api-error.js';

const MOST_RETRIES = 3;

/** Only what may pass by itself is tried again: no connection, the server's own failures, and "too many". Never a refusal. */
export function mayRetry(failures: number, error: unknown): boolean {
  if (failures >= MOST_RETRIES || !(error instanceof ApiError)) return false;
  return error.code === 'no_connection' || error.status === 429 || error.status >= 500;
}

/** As long as the server asked for, else 1, 2, 4 s. */
export const retryDelayMs = (failures: number, error: unknown): number =>
  error instanceof ApiError && error.retryAfterSeconds !== null ? error.retryAfterSeconds * 1000 : 1000 * 2 ** failures;

export const makeQueryClient = () =>
  new QueryClient({
    defaultOptions: {
      queries: { staleTime: 30_000, retry: mayRetry, retryDelay: retryDelayMs },
      mutations: { retry: false },
    },
  });
