import { C_KM_PER_S, dopplerVelocity, type Decision, type Family, type VacuumNm } from '@foreveil/shared';
import { DomainError } from '../../common/errors/domain-error.js';
import type { Trx } from '../../database/transaction.js';
import { findLine } from '../linelists/line-list-store.js';
import type { DecidedFeature, Reading } from './facts.js';

const UNIDENTIFIED = {
  ...{ lineId: null, species: null, restNm: null, lineSource: null, family: null },
  ...{ systemId: null, velocityKmPerS: null, velocitySigmaKmPerS: null },
};

/**
 * The reading that a decision names: a candidate of the feature, with what the analysis found for it, or any other line of the list, which
 * then has the velocity that its place gives and the probability 0, because the analysis did not find it worth listing.
 * @throws invalid_request when the list has no such line
 */
export async function readingOf(trx: Trx, feature: DecidedFeature, { lineId, systemId }: Decision): Promise<Reading> {
  if (lineId === null) return { ...UNIDENTIFIED, probability: feature.unidentifiedProbability };
  const line = await findLine(trx, feature.lineListId, lineId);
  if (!line) throw noSuchLine(lineId);
  const facts = { lineId, species: line.species, restNm: line.wavelengthNm, lineSource: line.source };
  const candidate = await findCandidate(trx, feature, lineId, systemId);
  if (candidate) return { ...facts, ...candidate };
  const system = await findSystem(trx, feature.analysisId, systemId);
  return {
    ...facts,
    family: system?.family ?? line.settings[0] ?? 'stellar',
    systemId: system?.id ?? null,
    velocityKmPerS: dopplerVelocity(feature.wavelengthNm as VacuumNm, line.wavelengthNm as VacuumNm),
    velocitySigmaKmPerS: (C_KM_PER_S * feature.wavelengthSigmaNm) / feature.wavelengthNm,
    probability: 0,
  };
}

type Found = Pick<Reading, 'family' | 'systemId' | 'velocityKmPerS' | 'velocitySigmaKmPerS' | 'probability'>;

/** The best candidate of this line, in this system when one is named. */
async function findCandidate(trx: Trx, feature: DecidedFeature, lineId: string, systemId: string | null): Promise<Found | undefined> {
  return trx('candidates')
    .where({ analysis_id: feature.analysisId, feature_index: feature.index, line_id: lineId })
    .modify((query) => void (systemId !== null && query.where('system_id', systemId)))
    .orderBy('rank')
    .first<Found | undefined>({
      family: 'family',
      systemId: 'system_id',
      velocityKmPerS: 'velocity_km_s',
      velocitySigmaKmPerS: 'velocity_sigma_km_s',
      probability: 'probability',
    });
}

async function findSystem(trx: Trx, analysisId: string, systemId: string | null): Promise<{ id: string; family: Family } | undefined> {
  if (systemId === null) return undefined;
  const { rows } = await trx.raw<{ rows: { id: string; family: Family }[] }>(
    `select s->>'id' as id, s->>'family' as family from analyses a, json_array_elements(a.result->'systems') s where a.id = ? and s->>'id' = ?`,
    [analysisId, systemId],
  );
  if (!rows[0]) {
    throw new DomainError('invalid_request', 'The analysis has no such velocity system.', {
      errors: [{ pointer: '/systemId', detail: 'is no velocity system of this analysis' }],
    });
  }
  return rows[0];
}

const noSuchLine = (lineId: string) =>
  new DomainError('invalid_request', `The line list has no line "${lineId}".`, {
    errors: [{ pointer: '/lineId', detail: 'is no line of the list that the analysis used' }],
  });
