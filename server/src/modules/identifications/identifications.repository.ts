import type { ReviewAction, ReviewState } from '@foreveil/shared';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import type { Scope } from '../../common/scope.js';
import type { Trx } from '../../database/transaction.js';
import type { DecidedFeature, Reading } from './facts.js';

/**
 * The feature to be decided on, its spectrum held so that no other decision and no new analysis comes between.
 * @throws not_found, analysis_not_complete, and bad_transition when the analysis is not the spectrum's current one
 */
export async function lockFeature(trx: Trx, { programmeId }: Scope, analysisId: string, index: number): Promise<DecidedFeature> {
  const analysis = await trx('analyses')
    .where({ programme_id: programmeId, id: analysisId })
    .first<{ spectrum_id: string; phase: string; line_list_id: string } | undefined>('spectrum_id', 'phase', 'line_list_id');
  if (!analysis) throw notFound();
  if (analysis.phase !== 'COMPLETED')
    throw new DomainError('analysis_not_complete', 'This analysis is not complete, so it has no lines yet.');
  const spectrum = await trx('spectra')
    .where({ id: analysis.spectrum_id, removed_at: null })
    .forNoKeyUpdate()
    .first<{ id: string; target_id: string; current_analysis_id: string } | undefined>('id', 'target_id', 'current_analysis_id');
  if (!spectrum) throw notFound();
  if (spectrum.current_analysis_id !== analysisId) {
    throw new DomainError('bad_transition', 'The spectrum was analysed again meanwhile. Decide on the lines of the new analysis.');
  }
  const feature = await trx('features').where({ analysis_id: analysisId, feature_index: index }).first<FeatureRow | undefined>(FEATURE);
  if (!feature) throw notFound();
  return { ...feature, analysisId, spectrumId: spectrum.id, targetId: spectrum.target_id, lineListId: analysis.line_list_id };
}

type FeatureRow = Omit<DecidedFeature, 'analysisId' | 'spectrumId' | 'targetId' | 'lineListId'>;

const FEATURE: Record<keyof FeatureRow, string> = {
  index: 'feature_index',
  kind: 'kind',
  wavelengthNm: 'wavelength_nm',
  wavelengthSigmaNm: 'wavelength_sigma_nm',
  equivalentWidthNm: 'equivalent_width_nm',
  equivalentWidthSigmaNm: 'equivalent_width_sigma_nm',
  fwhmNm: 'fwhm_nm',
  depth: 'depth',
  snr: 'snr',
  flags: 'flags',
  unidentifiedProbability: 'unidentified_probability',
};

const featureColumns = ({ flags, ...f }: DecidedFeature) => ({
  feature_index: f.index,
  kind: f.kind,
  wavelength_nm: f.wavelengthNm,
  wavelength_sigma_nm: f.wavelengthSigmaNm,
  equivalent_width_nm: f.equivalentWidthNm,
  equivalent_width_sigma_nm: f.equivalentWidthSigmaNm,
  fwhm_nm: f.fwhmNm,
  depth: f.depth,
  snr: f.snr,
  flags: [...flags],
  line_list_id: f.lineListId,
});

const readingColumns = (r: Reading) => ({
  line_id: r.lineId,
  species: r.species,
  rest_nm: r.restNm,
  line_source: r.lineSource,
  family: r.family,
  system_id: r.systemId,
  velocity_km_s: r.velocityKmPerS,
  velocity_sigma_km_s: r.velocitySigmaKmPerS,
  probability: r.probability,
});

export interface Decided {
  readonly userId: string;
  readonly state: ReviewState;
  readonly feature: DecidedFeature;
  readonly reading: Reading;
}

export async function insertIdentification(
  trx: Trx,
  { programmeId }: Scope,
  { userId, state, feature, reading }: Decided,
): Promise<string> {
  const place = { programme_id: programmeId, target_id: feature.targetId, spectrum_id: feature.spectrumId };
  const [row] = await trx('identifications')
    .insert({ ...place, ...featureColumns(feature), ...readingColumns(reading), state, decided_by: userId })
    .returning<{ id: string }[]>('id');
  return row!.id;
}

/** Writes a decision over the one before, with the feature as it is measured now. */
export async function updateIdentification(trx: Trx, id: string, { userId, state, feature, reading }: Decided): Promise<void> {
  const decided = { state, decided_by: userId, decided_at: trx.fn.now(), version: trx.raw('version + 1') };
  await trx('identifications')
    .where({ id })
    .update({ ...featureColumns(feature), ...readingColumns(reading), ...decided });
}

export interface EventRow {
  readonly identificationId: string;
  readonly userId: string;
  readonly action: ReviewAction;
  readonly from: ReviewState;
  readonly to: ReviewState;
  readonly reading: string;
  readonly remark: string;
}

export async function insertEvent(trx: Trx, event: EventRow): Promise<void> {
  await trx('identification_events').insert({
    identification_id: event.identificationId,
    user_id: event.userId,
    action: event.action,
    from_state: event.from,
    to_state: event.to,
    reading: event.reading,
    remark: event.remark,
  });
}
