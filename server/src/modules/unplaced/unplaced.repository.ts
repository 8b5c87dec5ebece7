import type { UnplacedDecision } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Scope } from '../../common/scope.js';
import type { Trx } from '../../database/transaction.js';

/** Who kept which decisions of a spectrum, as far as its current analysis is concerned. */
export async function findKept(db: Knex, spectrumId: string): Promise<Map<string, NonNullable<UnplacedDecision['kept']>>> {
  const rows = await db('kept_decisions as k')
    .join('spectra as s', 's.current_analysis_id', 'k.analysis_id')
    .join('users as u', 'u.id', 'k.kept_by')
    .where('s.id', spectrumId)
    .select<{ id: string; by: string; at: Date }[]>({ id: 'k.identification_id', by: 'u.name', at: 'k.kept_at' });
  return new Map(rows.map(({ id, by, at }) => [id, { by, at: at.toISOString() }]));
}

export interface Held {
  readonly spectrumId: string;
  /** the spectrum's current one */
  readonly analysisId: string;
}

/** The spectrum of a decision, held like every decision holds it, so that no new analysis comes between; null when there is none. */
export async function holdSpectrum(trx: Trx, { programmeId }: Scope, identificationId: string): Promise<Held | null> {
  const place = await trx('identifications')
    .where({ programme_id: programmeId, id: identificationId })
    .first<{ spectrum_id: string } | undefined>('spectrum_id');
  if (!place) return null;
  const spectrum = await trx('spectra')
    .where({ id: place.spectrum_id })
    .forNoKeyUpdate()
    .first<{ current_analysis_id: string }>('current_analysis_id');
  await trx('identifications').where({ id: identificationId }).forUpdate().first('id');
  return { spectrumId: place.spectrum_id, analysisId: spectrum.current_analysis_id };
}

export async function insertKept(trx: Trx, kept: { identificationId: string; analysisId: string; userId: string }): Promise<void> {
  await trx('kept_decisions')
    .insert({ identification_id: kept.identificationId, analysis_id: kept.analysisId, kept_by: kept.userId })
    .onConflict(['identification_id', 'analysis_id'])
    .ignore();
}

export async function isTaken(trx: Trx, spectrumId: string, featureIndex: number): Promise<boolean> {
  return (await trx('identifications').where({ spectrum_id: spectrumId, feature_index: featureIndex }).first('id')) !== undefined;
}

/** The facts of the decision stay as they were when it was made: only where it stands changes. */
export async function setFeature(trx: Trx, id: string, featureIndex: number): Promise<void> {
  await trx('identifications')
    .where({ id })
    .update({ feature_index: featureIndex, version: trx.raw('version + 1') });
}
