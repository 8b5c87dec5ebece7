import type { AnalysisSettings } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Scope } from '../../common/scope.js';
import { SUMMARY, filteredAnalyses, toSummary, type Row } from './find-analyses.js';

/** An analysis with its settings, and its result as the text that the pipeline made: it can be megabytes, and only passes through. */
export async function findAnalysisWithResult(db: Knex, scope: Scope, id: string) {
  const [row] = await filteredAnalyses(db, scope, { ids: [id] }).select<
    (Row & { settings: AnalysisSettings; resultText: string | null })[]
  >(SUMMARY, { settings: 'a.settings' }, db.raw('a.result::text as "resultText"'));
  return row ? toSummary(row) : null;
}

interface NewAnalysisRow {
  readonly spectrumId: string;
  readonly lineListId: string;
  readonly settings: AnalysisSettings;
  readonly programVersion: string;
  readonly userId: string;
}

/** @returns the id, or null while another analysis of the spectrum is queued or at work */
export async function insertAnalysis(db: Knex, { programmeId }: Scope, made: NewAnalysisRow): Promise<string | null> {
  const [row] = await db('analyses')
    .insert({
      programme_id: programmeId,
      spectrum_id: made.spectrumId,
      reading_revision: db('spectra').where({ id: made.spectrumId }).select('reading_revision'),
      line_list_id: made.lineListId,
      settings: JSON.stringify(made.settings),
      program_version: made.programVersion,
      requested_by: made.userId,
    })
    .onConflict(db.raw(`(spectrum_id) where phase in ('QUEUED', 'EXECUTING')`))
    .ignore()
    .returning<{ id: string }[]>('id');
  return row?.id ?? null;
}
