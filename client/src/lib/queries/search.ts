import {
  apiPaths,
  type FoundIdentification,
  type IdentificationQuery,
  type NewSavedSearch,
  type Page,
  type SavedSearch,
} from '@foreveil/shared';
import { infiniteQueryOptions, queryOptions } from '@tanstack/react-query';
import { http } from '../http.js';

/** A query as the part of an address after '?': only what is set, in the order of its names, so that equal queries are equal text. */
export function searchText(query: IdentificationQuery): string {
  const parts = Object.entries(query).filter(([, value]) => value !== undefined && value !== '');
  return new URLSearchParams(
    parts.map(([name, value]): [string, string] => [name, String(value)]).sort(([a], [b]) => a.localeCompare(b)),
  ).toString();
}

export const searchCsvPath = (query: IdentificationQuery): string => `${apiPaths.searchCsv}?${searchText(query)}`;

export const searchQueries = {
  identifications: (query: IdentificationQuery) =>
    infiniteQueryOptions({
      queryKey: ['search', searchText(query)] as const,
      queryFn: ({ signal, pageParam }) => {
        const after = pageParam === null ? '' : `&after=${encodeURIComponent(pageParam)}`;
        return http.get<Page<FoundIdentification>>(`${apiPaths.searchIdentifications}?${searchText(query)}${after}`, { signal });
      },
      initialPageParam: null as string | null,
      getNextPageParam: (page) => page.next,
    }),
  saved: () =>
    queryOptions({
      queryKey: ['saved-searches'] as const,
      queryFn: ({ signal }) => http.get<SavedSearch[]>(apiPaths.savedSearches, { signal }),
    }),
};

export const saveSearch = (search: NewSavedSearch) => http.post<SavedSearch>(apiPaths.savedSearches, search);
export const removeSearch = (id: string) => http.delete(apiPaths.savedSearch(id));
