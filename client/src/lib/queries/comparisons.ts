import { apiPaths, type ComparisonDetail, type ComparisonSummary } from '@foreveil/shared';
import { queryOptions } from '@tanstack/react-query';
import { http } from '../http.js';

export const comparisonQueries = {
  all: (programmeId: string) => ['programmes', programmeId, 'comparisons'] as const,
  list: (programmeId: string) =>
    queryOptions({
      queryKey: [...comparisonQueries.all(programmeId), 'list'] as const,
      queryFn: ({ signal }) => http.get<ComparisonSummary[]>(apiPaths.comparisons(programmeId), { signal }),
    }),
  detail: (programmeId: string, comparisonId: string) =>
    queryOptions({
      queryKey: [...comparisonQueries.all(programmeId), comparisonId] as const,
      queryFn: ({ signal }) => http.get<ComparisonDetail>(apiPaths.comparison(programmeId, comparisonId), { signal }),
    }),
};
