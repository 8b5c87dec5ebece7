import {
  apiPaths,
  decodeSamples,
  type AnalysisDetail,
  type AnalysisRun,
  type AnalysisSummary,
  type Decision,
  type Identification,
  type NewAnalysis,
  type SpectrumDetail,
} from '@foreveil/shared';
import { queryOptions } from '@tanstack/react-query';
import { http } from '../http.js';
import { programmeQueries } from './programmes.js';

const ofSpectrum = (programmeId: string, spectrumId: string) => [...programmeQueries.within(programmeId), 'spectra', spectrumId] as const;

export const spectrumQueries = {
  all: ofSpectrum,
  detail: (programmeId: string, spectrumId: string) =>
    queryOptions({
      queryKey: [...ofSpectrum(programmeId, spectrumId), 'spectrum'] as const,
      queryFn: ({ signal }) => http.get<SpectrumDetail>(apiPaths.spectrum(programmeId, spectrumId), { signal }),
    }),
  /** the same until its file is read anew, which an event tells */
  samples: (programmeId: string, spectrumId: string) =>
    queryOptions({
      queryKey: ['samples', programmeId, spectrumId] as const,
      queryFn: async ({ signal }) => decodeSamples(await http.bytes(apiPaths.samples(programmeId, spectrumId), { signal })),
      staleTime: Infinity,
      gcTime: 60_000,
      structuralSharing: false,
    }),
};

export const analysisQueries = {
  list: (programmeId: string, spectrumId: string) =>
    queryOptions({
      queryKey: [...ofSpectrum(programmeId, spectrumId), 'analyses'] as const,
      queryFn: ({ signal }) => http.get<AnalysisRun[]>(apiPaths.analyses(programmeId, spectrumId), { signal }),
    }),
  detail: (programmeId: string, analysisId: string) =>
    queryOptions({
      queryKey: [...programmeQueries.within(programmeId), 'analyses', analysisId] as const,
      queryFn: ({ signal }) => http.get<AnalysisDetail>(apiPaths.analysis(programmeId, analysisId), { signal }),
    }),
};

export const identificationQueries = {
  list: (programmeId: string, spectrumId: string) =>
    queryOptions({
      queryKey: [...ofSpectrum(programmeId, spectrumId), 'identifications'] as const,
      queryFn: ({ signal }) => http.get<Identification[]>(apiPaths.identifications(programmeId, spectrumId), { signal }),
    }),
};

export const requestAnalysis = (programmeId: string, spectrumId: string, wanted: NewAnalysis) =>
  http.post<AnalysisSummary>(apiPaths.analyses(programmeId, spectrumId), wanted);
export const cancelAnalysis = (programmeId: string, analysisId: string) =>
  http.post<AnalysisSummary>(apiPaths.cancelAnalysis(programmeId, analysisId));
/** @param version of the identification that was seen, 0 when there is none yet; a 412 carries the present one in `problem.current` */
export const decide = (programmeId: string, analysisId: string, featureIndex: number, version: number, decision: Decision) =>
  http.post<Identification>(apiPaths.decide(programmeId, analysisId, featureIndex), decision, { ifMatch: version });
