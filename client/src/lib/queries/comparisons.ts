import {
  apiPaths,
  type ComparisonDetail,
  type ComparisonSettings,
  type ComparisonSummary,
  type NewComparison,
  type NewRuling,
  type VerdictRuling,
} from '@foreveil/shared';
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

export const createComparison = (programmeId: string, made: NewComparison) =>
  http.post<ComparisonSummary>(apiPaths.comparisons(programmeId), made);
export const rerunComparison = (programmeId: string, id: string, settings: Partial<ComparisonSettings>, name?: string) =>
  http.post<ComparisonSummary>(apiPaths.comparisonRerun(programmeId, id), { settings, name });
/** @param version that was seen; a 412 tells that a teammate changed it */
export const deleteComparison = (programmeId: string, id: string, version: number) =>
  http.delete(apiPaths.comparison(programmeId, id), { ifMatch: version });
/** @param version of the ruling that was seen; 0 when there is none yet */
export const ruleOnLine = (programmeId: string, id: string, lineKey: string, version: number, ruling: NewRuling) =>
  http.put<VerdictRuling>(apiPaths.comparisonRuling(programmeId, id, encodeURIComponent(lineKey)), ruling, { ifMatch: version });
