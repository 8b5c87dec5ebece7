import {
  apiPaths,
  type NewProgramme,
  type NewTarget,
  type Invitation,
  type MemberDetail,
  type Programme,
  type ProgrammeSummary,
  type StagedProgramme,
  type Target,
  type TargetSummary,
} from '@foreveil/shared';
import { queryOptions } from '@tanstack/react-query';
import { http } from '../http.js';

export const programmeQueries = {
  /** all of one programme: prefix of every key below it */
  within: (programmeId: string) => ['programmes', programmeId] as const,
  list: () =>
    queryOptions({
      queryKey: ['programme-list'] as const,
      queryFn: ({ signal }) => http.get<ProgrammeSummary[]>(apiPaths.programmes, { signal }),
    }),
  detail: (programmeId: string) =>
    queryOptions({
      queryKey: [...programmeQueries.within(programmeId), 'programme'] as const,
      queryFn: ({ signal }) => http.get<Programme>(apiPaths.programme(programmeId), { signal }),
    }),
};

export const memberQueries = {
  list: (programmeId: string) =>
    queryOptions({
      queryKey: [...programmeQueries.within(programmeId), 'members'] as const,
      queryFn: ({ signal }) => http.get<MemberDetail[]>(apiPaths.members(programmeId), { signal }),
    }),
  invitations: (programmeId: string) =>
    queryOptions({
      queryKey: [...programmeQueries.within(programmeId), 'invitations'] as const,
      queryFn: ({ signal }) => http.get<Invitation[]>(apiPaths.invitations(programmeId), { signal }),
    }),
  staged: () =>
    queryOptions({
      queryKey: ['programme-list', 'staged'] as const,
      queryFn: ({ signal }) => http.get<StagedProgramme[]>(apiPaths.stagedProgrammes, { signal }),
    }),
};

export const targetQueries = {
  all: (programmeId: string) => [...programmeQueries.within(programmeId), 'targets'] as const,
  list: (programmeId: string) =>
    queryOptions({
      queryKey: [...targetQueries.all(programmeId), 'list'] as const,
      queryFn: ({ signal }) => http.get<TargetSummary[]>(apiPaths.targets(programmeId), { signal }),
    }),
  detail: (programmeId: string, targetId: string) =>
    queryOptions({
      queryKey: [...targetQueries.all(programmeId), targetId] as const,
      queryFn: ({ signal }) => http.get<Target>(apiPaths.target(programmeId, targetId), { signal }),
    }),
};

export const createProgramme = (wanted: NewProgramme) => http.post<Programme>(apiPaths.programmes, wanted);
export const createTarget = (programmeId: string, wanted: NewTarget) => http.post<Target>(apiPaths.targets(programmeId), wanted);
/** @param version the version the change is based on; a 412 carries the present row in `problem.current` */
export const changeTarget = (programmeId: string, targetId: string, version: number, change: Partial<NewTarget>) =>
  http.patch<Target>(apiPaths.target(programmeId, targetId), change, { ifMatch: version });
