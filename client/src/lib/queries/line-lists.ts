import {
  apiPaths,
  type Line,
  type LineListAnswer,
  type LineListChanges,
  type LineListDetail,
  type LineListSummary,
  type LineQuery,
  type NewLineList,
  type Page,
} from '@foreveil/shared';
import { infiniteQueryOptions, queryOptions } from '@tanstack/react-query';
import { http } from '../http.js';
import { upload, type UploadOptions } from '../http-upload.js';
import { programmeQueries } from './programmes.js';

const within = (programmeId: string) => [...programmeQueries.within(programmeId), 'line-lists'] as const;

function lineParameters(query: LineQuery): string {
  const set = Object.entries(query).filter(([, value]) => value !== undefined && value !== '');
  return new URLSearchParams(set.map(([name, value]) => [name, String(value)])).toString();
}

export const lineListQueries = {
  all: within,
  list: (programmeId: string) =>
    queryOptions({
      queryKey: [...within(programmeId), 'list'] as const,
      queryFn: ({ signal }) => http.get<LineListSummary[]>(apiPaths.programmeLineLists(programmeId), { signal }),
    }),
  detail: (programmeId: string, id: string) =>
    queryOptions({
      queryKey: [...within(programmeId), id] as const,
      queryFn: ({ signal }) => http.get<LineListDetail>(apiPaths.programmeLineList(programmeId, id), { signal }),
    }),
  lines: (programmeId: string, id: string, query: LineQuery) =>
    infiniteQueryOptions({
      queryKey: [...within(programmeId), id, 'lines', lineParameters(query)] as const,
      queryFn: ({ signal, pageParam }) => {
        const asked = lineParameters({ ...query, ...(pageParam === null ? {} : { after: pageParam }) });
        return http.get<Page<Line>>(`${apiPaths.linesOfList(programmeId, id)}?${asked}`, { signal });
      },
      initialPageParam: null as string | null,
      getNextPageParam: (page) => page.next,
      staleTime: Infinity, // a version never changes
    }),
  diff: (programmeId: string, id: string, other: string) =>
    queryOptions({
      queryKey: [...within(programmeId), id, 'diff', other] as const,
      queryFn: ({ signal }) => http.get<LineListChanges>(apiPaths.lineListDiff(programmeId, id, other), { signal }),
      staleTime: Infinity,
    }),
};

export function sendLineList(programmeId: string, file: Blob, wanted: NewLineList, options?: UploadOptions): Promise<LineListAnswer> {
  const form = new FormData();
  form.append('meta', JSON.stringify(wanted));
  form.append('file', file, 'lines');
  return upload<LineListAnswer>(apiPaths.programmeLineLists(programmeId), form, options);
}

export const setArchived = (programmeId: string, id: string, archived: boolean) =>
  archived
    ? http.put<LineListSummary>(apiPaths.archiveLineList(programmeId, id), undefined)
    : http.delete(apiPaths.archiveLineList(programmeId, id));
