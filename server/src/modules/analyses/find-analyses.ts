import { completeSettings, type AnalysisRun, type AnalysisSettings, type AnalysisSummary } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Scope } from '../../common/scope.js';

interface Filter {
  readonly ids?: readonly string[];
  readonly spectrumId?: string;
}

export type Row = Omit<AnalysisSummary, 'requestedAt' | 'endedAt'> & { requestedAt: Date; endedAt: Date | null };

export const SUMMARY = {
  id: 'a.id',
  spectrumId: 'a.spectrum_id',
  phase: 'a.phase',
  progress: 'a.progress',
  step: 'a.step',
  error: 'a.error',
  requestedBy: 'u.name',
  requestedAt: 'a.requested_at',
  endedAt: 'a.ended_at',
  features: 'a.feature_count',
  temperatureK: 'a.temperature_k',
  temperatureSigmaK: 'a.temperature_sigma_k',
  temperatureConstrained: 'a.temperature_constrained',
  programVersion: 'a.program_version',
  lineListName: 'l.name',
  lineListVersion: 'l.version',
  readingRevision: 'a.reading_revision',
};

export const filteredAnalyses = (db: Knex, { programmeId }: Scope, { ids, spectrumId }: Filter) => {
  const query = db('analyses as a')
    .join('users as u', 'u.id', 'a.requested_by')
    .join('line_lists as l', 'l.id', 'a.line_list_id')
    .where('a.programme_id', programmeId);
  if (ids) query.whereIn('a.id', ids);
  if (spectrumId) query.where('a.spectrum_id', spectrumId);
  return query.orderBy('a.requested_at', 'desc').orderBy('a.id');
};

export const toSummary = <R extends Row>({ requestedAt, endedAt, ...row }: R) => ({
  ...row,
  requestedAt: requestedAt.toISOString(),
  endedAt: endedAt?.toISOString() ?? null,
});

/** Analyses of a programme, newest first, without their results. */
export async function findAnalyses(db: Knex, scope: Scope, filter: Filter): Promise<AnalysisSummary[]> {
  if (filter.ids?.length === 0) return [];
  return (await filteredAnalyses(db, scope, filter).select<Row[]>(SUMMARY)).map(toSummary);
}

/** Runs of a spectrum with their settings, newest first, without their results. */
export async function findRuns(db: Knex, scope: Scope, spectrumId: string): Promise<AnalysisRun[]> {
  const rows = await filteredAnalyses(db, scope, { spectrumId }).select<(Row & { settings: AnalysisSettings })[]>(SUMMARY, {
    settings: 'a.settings',
  });
  return rows.map(({ settings, ...row }) => ({ ...toSummary(row), settings: completeSettings(settings) }));
}

export async function findAnalysis(db: Knex, scope: Scope, id: string): Promise<AnalysisSummary | null> {
  const [summary] = await findAnalyses(db, scope, { ids: [id] });
  return summary ?? null;
}
