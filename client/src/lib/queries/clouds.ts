import { apiPaths, type Cloud, type CloudChange, type CloudSummary, type NewCloud } from '@foreveil/shared';
import { queryOptions } from '@tanstack/react-query';
import { http } from '../http.js';

export const cloudQueries = {
  all: (programmeId: string) => ['programmes', programmeId, 'clouds'] as const,
  list: (programmeId: string) =>
    queryOptions({
      queryKey: [...cloudQueries.all(programmeId), 'list'] as const,
      queryFn: ({ signal }) => http.get<CloudSummary[]>(apiPaths.clouds(programmeId), { signal }),
    }),
  detail: (programmeId: string, cloudId: string) =>
    queryOptions({
      queryKey: [...cloudQueries.all(programmeId), cloudId] as const,
      queryFn: ({ signal }) => http.get<Cloud>(apiPaths.cloud(programmeId, cloudId), { signal }),
    }),
};

type Seen = Pick<CloudSummary, 'programmeId' | 'id' | 'version'>;

export const createCloud = (programmeId: string, made: NewCloud) => http.post<Cloud>(apiPaths.clouds(programmeId), made);
/** A 412 tells that a teammate changed it. */
export const changeCloud = ({ programmeId, id, version }: Seen, change: CloudChange) =>
  http.patch<Cloud>(apiPaths.cloud(programmeId, id), change, { ifMatch: version });
export const deleteCloud = ({ programmeId, id, version }: Seen) => http.delete(apiPaths.cloud(programmeId, id), { ifMatch: version });
export const addSightline = ({ programmeId, id }: Seen, spectrumId: string) =>
  http.put<Cloud>(apiPaths.cloudSightline(programmeId, id, spectrumId), {});
export const removeSightline = ({ programmeId, id }: Seen, spectrumId: string) =>
  http.delete(apiPaths.cloudSightline(programmeId, id, spectrumId));
