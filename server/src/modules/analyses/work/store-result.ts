import type { Analysis, Candidate, Feature, Spectrum } from '@foreveil/shared';
import type { Knex } from 'knex';
import { inTransaction, type Trx } from '../../../database/transaction.js';
import { sayEvent } from '../../events/say-event.js';
import { reattachIdentifications } from '../../identifications/reattach-identifications.js';
import { previewOf } from '../../spectra/preview.js';
import type { Claim } from './claim.js';

/**
 * Stores a result in one transaction, if the analysis is still ours: result, features, candidates, the spectrum's preview over the fitted
 * continuum, and the decisions that people made before, each moved to the feature of the new analysis that it belongs to.
 * @returns false when the analysis was cancelled or taken by another worker meanwhile; nothing is written then
 */
export function storeResult(db: Knex, claim: Claim, spectrum: Spectrum, analysis: Analysis): Promise<boolean> {
  return inTransaction(db, async (trx) => {
    // the spectrum first: decisions hold it while they read which analysis is current, so either they see this one whole or not at all
    await trx('spectra').where({ id: claim.spectrumId }).forNoKeyUpdate().first('id');
    if (!(await complete(trx, claim, analysis))) return false;
    await insertFeatures(trx, claim.id, analysis.features);
    const preview = JSON.stringify(previewOf(spectrum, analysis.continuum));
    await trx('spectra').where({ id: claim.spectrumId }).update({ current_analysis_id: claim.id, preview });
    await reattachIdentifications(trx, claim.spectrumId, analysis.features);
    await sayEvent(trx, { kind: 'analysis', programmeId: claim.programmeId, id: claim.id });
    return true;
  });
}

async function complete(trx: Trx, { id, token }: Claim, analysis: Analysis): Promise<boolean> {
  const { continuum, features } = analysis;
  const ended = await trx('analyses')
    .where({ id, attempt_token: token, phase: 'EXECUTING' })
    .update({
      phase: 'COMPLETED',
      progress: 1,
      attempt_token: null,
      ended_at: trx.fn.now(),
      program_version: analysis.programVersion,
      result: JSON.stringify(analysis),
      feature_count: features.length,
      temperature_k: continuum.temperatureK,
      temperature_sigma_k: continuum.temperatureSigmaK,
      temperature_constrained: continuum.constrained,
    });
  return ended === 1;
}

/** One statement for all rows of a table: they travel as one JSON text and are unpacked by the database. */
async function insertFeatures(trx: Trx, analysisId: string, features: readonly Feature[]): Promise<void> {
  await insertAll(trx, 'features', FEATURE_COLUMNS, analysisId, features.map(featureRow));
  const candidates = features.flatMap(({ index, candidates: ranked }) =>
    ranked.map((candidate, i) => candidateRow(index, i + 1, candidate)),
  );
  await insertAll(trx, 'candidates', CANDIDATE_COLUMNS, analysisId, candidates);
}

type Columns = Record<string, string>;

const FEATURE_COLUMNS: Columns = {
  ...{ feature_index: 'int', kind: 'text', wavelength_nm: 'float8', wavelength_sigma_nm: 'float8', equivalent_width_nm: 'float8' },
  ...{ equivalent_width_sigma_nm: 'float8', fwhm_nm: 'float8', depth: 'float8', significance: 'float8', snr: 'float8' },
  ...{ flags: 'text[]', unidentified_probability: 'float8' },
};

const featureRow = (f: Feature) => ({
  feature_index: f.index,
  kind: f.kind,
  wavelength_nm: f.wavelengthNm,
  wavelength_sigma_nm: f.wavelengthSigmaNm,
  equivalent_width_nm: f.equivalentWidthNm,
  equivalent_width_sigma_nm: f.equivalentWidthSigmaNm,
  fwhm_nm: f.fwhmNm,
  depth: f.depth,
  significance: f.significance,
  snr: f.snr,
  flags: f.flags,
  unidentified_probability: f.unidentifiedProbability,
});

const CANDIDATE_COLUMNS: Columns = {
  ...{ feature_index: 'int', rank: 'int', line_id: 'text', species: 'text', rest_nm: 'float8', family: 'text', system_id: 'text' },
  ...{ velocity_km_s: 'float8', velocity_sigma_km_s: 'float8', probability: 'float8', share: 'float8', evidence: 'jsonb' },
};

const candidateRow = (featureIndex: number, rank: number, c: Candidate) => ({
  feature_index: featureIndex,
  rank,
  line_id: c.lineId,
  species: c.species,
  rest_nm: c.restNm,
  family: c.family,
  system_id: c.systemId,
  velocity_km_s: c.velocityKmPerS,
  velocity_sigma_km_s: c.velocitySigmaKmPerS,
  probability: c.probability,
  share: c.share,
  evidence: {
    parts: c.evidence,
    companions: c.companions,
    expectedNm: c.expectedNm,
    expectedSigmaNm: c.expectedSigmaNm,
    sentence: c.sentence,
  },
});

async function insertAll(trx: Trx, table: string, columns: Columns, analysisId: string, rows: readonly object[]): Promise<void> {
  const names = Object.keys(columns).join(', ');
  const shape = Object.entries(columns)
    .map(([name, type]) => `${name} ${type}`)
    .join(', ');
  await trx.raw(`insert into ${table} (analysis_id, ${names}) select :analysisId, ${names} from json_to_recordset(:rows) as r(${shape})`, {
    analysisId,
    rows: JSON.stringify(rows),
  });
}
