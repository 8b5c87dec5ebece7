import {
  completeSettings,
  type AnalysisDetail,
  type AnalysisRun,
  type AnalysisSummary,
  type Identification,
  type MemberRole,
  type SpectrumDetail,
} from '@foreveil/shared';
import { keepPreviousData, useQuery } from '@tanstack/react-query';
import { isAtWork } from '../../../lib/analysis-words.js';
import { accountQueries } from '../../../lib/queries/account.js';
import { programmeQueries } from '../../../lib/queries/programmes.js';
import type { CurveData } from '../../../plot/curve-data.js';
import { prepareCurve } from '../../../plot/prepare-curve.js';
import { analysisQueries, identificationQueries, spectrumQueries } from '../../../lib/queries/spectra.js';

/** Asked again while a run is on, should the live events fail to come through. */
const POLL_MS = 2000;

export interface SpectrumData {
  spectrum: SpectrumDetail | undefined;
  /** samples, continuum and fits, ready to be drawn */
  curve: CurveData | undefined;
  /** the newest run that has ended well: what the page shows */
  analysis: AnalysisDetail | null | undefined;
  /** the newest run whatever became of it */
  latest: AnalysisSummary | null;
  /** all runs, newest first */
  runs: readonly AnalysisRun[];
  /** the run on the page is not the newest: its decisions are not told, since they belong to the newest */
  isOld: boolean;
  identifications: readonly Identification[];
  role: MemberRole | null;
  name: string;
  error: unknown;
  retry: () => void;
}

const NONE: readonly Identification[] = [];

/** All that the page of a spectrum shows. `analysis` is undefined while it is not known whether there is one. */
/** @param runId an older run to look at, instead of the newest that ended well */
export function useSpectrumData(programmeId: string, spectrumId: string, runId: string | null = null): SpectrumData {
  const spectrum = useQuery(spectrumQueries.detail(programmeId, spectrumId));
  const samples = useQuery(spectrumQueries.samples(programmeId, spectrumId));
  const programme = useQuery(programmeQueries.detail(programmeId));
  const me = useQuery(accountQueries.me());
  const runs = useQuery({
    ...analysisQueries.list(programmeId, spectrumId),
    refetchInterval: ({ state }) => (state.data?.some(isAtWork) ? POLL_MS : false),
  });
  const identifications = useQuery(identificationQueries.list(programmeId, spectrumId));
  const newestFirst = [...(runs.data ?? [])].sort((a, b) => b.requestedAt.localeCompare(a.requestedAt));
  // a run on an earlier reading of the file speaks of other wavelengths
  const revision = spectrum.data?.readingRevision;
  const ended = newestFirst.filter((a) => a.phase === 'COMPLETED' && a.readingRevision === revision);
  const newest = ended[0] ?? null;
  const done = ended.find((a) => a.id === runId) ?? newest;
  const isOld = done?.id !== newest?.id;
  const detail = useQuery({ ...analysisQueries.detail(programmeId, done?.id ?? ''), enabled: done !== null });
  const analysis = runs.data && spectrum.data && (done ? (detail.data?.result ? detail.data : undefined) : null);
  const curve = useQuery({
    queryKey: ['curve', programmeId, spectrumId, analysis?.id ?? null, samples.dataUpdatedAt] as const,
    queryFn: ({ signal }) =>
      prepareCurve(
        {
          samples: samples.data!,
          continuum: analysis?.result?.continuum ?? null,
          features: analysis?.result?.features ?? [],
          masks: analysis ? completeSettings(analysis.settings).maskedRegions : [],
        },
        signal,
      ),
    enabled: samples.data !== undefined && analysis !== undefined,
    staleTime: Infinity,
    gcTime: 60_000,
    structuralSharing: false,
    placeholderData: keepPreviousData,
  });
  const queries = [spectrum, samples, runs, identifications, curve, ...(done ? [detail] : [])];

  return {
    spectrum: spectrum.data,
    curve: curve.data,
    analysis,
    latest: newestFirst[0] ?? null,
    runs: newestFirst,
    isOld,
    identifications: isOld ? NONE : (identifications.data ?? NONE),
    role: programme.data?.role ?? null,
    name: me.data?.name ?? 'You',
    error: queries.find((q) => q.error && !q.data)?.error ?? null,
    retry: () => queries.filter((q) => q.error).forEach((q) => void q.refetch()),
  };
}
