import { apiPaths, type Me, type SignIn } from '@foreveil/shared';
import { queryOptions } from '@tanstack/react-query';
import { http } from '../http.js';

export const accountQueries = {
  /** who is signed in; a 401 is an answer here, not a reason to ask */
  me: () =>
    queryOptions({
      queryKey: ['me'] as const,
      queryFn: ({ signal }) => http.get<Me>(apiPaths.me, { signal, quiet: true }),
      staleTime: 5 * 60_000,
    }),
};

export const signIn = (who: SignIn) => http.post<Me>(apiPaths.signIn, who, { quiet: true });
export const signOut = () => http.post<void>(apiPaths.signOut, undefined, { quiet: true });
