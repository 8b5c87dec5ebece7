import type { SpectrumDetail, SpectrumSummary } from '@foreveil/shared';
import type { Knex } from 'knex';
import { findAnalyses } from '../analyses/find-analyses.js';
import type { Scope } from '../../common/scope.js';

interface Filter {
  readonly id?: string;
  readonly targetId?: string;
}

type SummaryRow = Omit<SpectrumSummary, 'createdAt' | 'analysis'> & { createdAt: Date; shownAnalysisId: string | null };

const SUMMARY = {
  id: 's.id',
  targetId: 's.target_id',
  label: 's.label',
  fileName: 's.file_name',
  points: 's.points',
  fromNm: 's.from_nm',
  toNm: 's.to_nm',
  resolvingPower: 's.resolving_power',
  observedAt: 's.observed_at',
  instrument: 's.instrument',
  createdAt: 's.created_at',
  createdBy: 'u.name',
  preview: 's.preview',
};

/** The analysis that a screen shows: the one at work, else the newest completed one, else the newest. */
const SHOWN_ANALYSIS = `(
  select a.id from analyses a where a.spectrum_id = s.id and a.reading_revision = s.reading_revision
  order by a.phase in ('QUEUED', 'EXECUTING') desc, (a.id is not distinct from s.current_analysis_id) desc, a.requested_at desc limit 1)`;

const filtered = (db: Knex, { programmeId }: Scope, { id, targetId }: Filter) => {
  const query = db('spectra as s')
    .join('users as u', 'u.id', 's.created_by')
    .where({ 's.programme_id': programmeId, 's.removed_at': null });
  if (id) query.where('s.id', id);
  if (targetId) query.where('s.target_id', targetId);
  return query.orderBy('s.created_at').orderBy('s.id');
};

/** Spectra of a programme, oldest first, without their columns and bytes. */
export async function findSpectra(db: Knex, scope: Scope, filter: Filter = {}): Promise<SpectrumSummary[]> {
  const rows = await filtered(db, scope, filter).select<SummaryRow[]>(SUMMARY, db.raw(`${SHOWN_ANALYSIS} as "shownAnalysisId"`));
  return withAnalyses(db, scope, rows);
}

type DetailRow = SummaryRow & Omit<SpectrumDetail, keyof SpectrumSummary>;

export async function findSpectrum(db: Knex, scope: Scope, id: string): Promise<SpectrumDetail | null> {
  const rows = await filtered(db, scope, { id })
    .join('targets as t', 't.id', 's.target_id')
    .select<DetailRow[]>(
      SUMMARY,
      {
        programmeId: 's.programme_id',
        targetName: 't.name',
        simulated: 't.simulated',
        sizeBytes: 's.size_bytes',
        sha256: 's.sha256',
        reading: 's.reading',
        corrections: 's.corrections',
        version: 's.version',
        readingRevision: 's.reading_revision',
        recipe: 's.recipe_name',
      },
      db.raw('s.sigma is not null as "hasSigma"'),
      db.raw(`${SHOWN_ANALYSIS} as "shownAnalysisId"`),
    );
  const [detail] = await withAnalyses(db, scope, rows);
  return detail ?? null;
}

async function withAnalyses<R extends SummaryRow>(db: Knex, scope: Scope, rows: R[]) {
  const ids = rows.flatMap(({ shownAnalysisId }) => shownAnalysisId ?? []);
  const analyses = new Map((await findAnalyses(db, scope, { ids })).map((analysis) => [analysis.id, analysis]));
  return rows.map(({ shownAnalysisId, createdAt, ...row }) => ({
    ...row,
    createdAt: createdAt.toISOString(),
    analysis: analyses.get(shownAnalysisId ?? '') ?? null,
  }));
}

export async function spectrumExists(db: Knex, { programmeId }: Scope, id: string): Promise<boolean> {
  return (await db('spectra').where({ programme_id: programmeId, id, removed_at: null }).first('id')) !== undefined;
}
