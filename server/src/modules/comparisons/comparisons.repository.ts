import type { AnalysisPhase, ComparisonSettings } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Scope } from '../../common/scope.js';
import type { Trx } from '../../database/transaction.js';

export interface LockedComparison {
  readonly id: string;
  readonly name: string;
  readonly phase: AnalysisPhase;
  readonly version: number;
  readonly requestedBy: string;
  readonly spectrumA: string;
  readonly spectrumB: string;
  readonly settings: ComparisonSettings;
}

/** The row, held until the transaction ends; null when the programme has no such comparison. */
export async function lockComparison(trx: Trx, { programmeId }: Scope, id: string): Promise<LockedComparison | null> {
  const row = await trx('comparisons').where({ programme_id: programmeId, id }).forUpdate().first<LockedComparison | undefined>({
    id: 'id',
    name: 'name',
    phase: 'phase',
    version: 'version',
    requestedBy: 'requested_by',
    spectrumA: 'spectrum_a',
    spectrumB: 'spectrum_b',
    settings: 'settings',
  });
  return row ?? null;
}

export interface Analysed {
  readonly spectrumId: string;
  readonly label: string;
  readonly analysisId: string | null;
  readonly lineListId: string | null;
}

/** A spectrum with its current analysis; null when the programme has no such spectrum. */
export async function findAnalysed(db: Knex, { programmeId }: Scope, spectrumId: string): Promise<Analysed | null> {
  const row = await db('spectra as s')
    .join('targets as t', 't.id', 's.target_id')
    .leftJoin('analyses as a', 'a.id', 's.current_analysis_id')
    .where({ 's.programme_id': programmeId, 's.id': spectrumId, 's.removed_at': null })
    .first<Analysed | undefined>({
      spectrumId: 's.id',
      label: 't.name',
      analysisId: 's.current_analysis_id',
      lineListId: 'a.line_list_id',
    });
  return row ?? null;
}

interface NewRow {
  readonly name: string;
  readonly a: Analysed;
  readonly b: Analysed;
  readonly settings: ComparisonSettings;
  readonly programVersion: string;
  readonly userId: string;
  readonly supersedes: string | null;
}

/** @returns the id; null when another re-run has superseded the same comparison already */
export async function insertComparison(trx: Trx, { programmeId }: Scope, made: NewRow): Promise<string | null> {
  const [row] = await trx('comparisons')
    .insert({
      programme_id: programmeId,
      name: made.name,
      spectrum_a: made.a.spectrumId,
      spectrum_b: made.b.spectrumId,
      analysis_a: made.a.analysisId,
      analysis_b: made.b.analysisId,
      line_list_id: made.a.lineListId,
      supersedes: made.supersedes,
      settings: JSON.stringify(made.settings),
      program_version: made.programVersion,
      requested_by: made.userId,
    })
    .onConflict('supersedes')
    .ignore()
    .returning<{ id: string }[]>('id');
  return row?.id ?? null;
}
