import type { Spectrum } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Scope } from '../../common/scope.js';
import type { Trx } from '../../database/transaction.js';
import { sayEvent } from '../events/say-event.js';
import { carried, wavelengthMap, type Placed } from './carry-decisions.js';

type Row = Placed & { readonly id: string };

const PLACED = {
  ...{ id: 'id', wavelengthNm: 'wavelength_nm', wavelengthSigmaNm: 'wavelength_sigma_nm', fwhmNm: 'fwhm_nm' },
  ...{ equivalentWidthNm: 'equivalent_width_nm', equivalentWidthSigmaNm: 'equivalent_width_sigma_nm', velocityKmPerS: 'velocity_km_s' },
};

/**
 * Takes the decisions on a spectrum to a new reading of its file, so that the analysis that follows finds their features again. Who decided
 * what stays as it is; the version counts up, because what is shown has changed.
 * @returns how many found their place, of how many
 */
export async function carryDecisions(
  trx: Trx,
  { programmeId }: Scope,
  spectrumId: string,
  before: Spectrum,
  after: Spectrum,
): Promise<{ of: number; carried: number }> {
  const rows = await trx('identifications').where({ programme_id: programmeId, spectrum_id: spectrumId }).forUpdate().select<Row[]>(PLACED);
  const map = wavelengthMap(before, after);
  let found = 0;
  for (const row of rows) {
    const place = carried(row, map);
    await trx('identifications')
      .where({ id: row.id })
      .update({ feature_index: null, version: trx.raw('version + 1'), ...(place ? columnsOf(place) : {}) });
    await sayEvent(trx, { kind: 'identification', programmeId, id: row.id });
    if (place) found++;
  }
  return { of: rows.length, carried: found };
}

const columnsOf = (place: Placed) => ({
  wavelength_nm: place.wavelengthNm,
  wavelength_sigma_nm: place.wavelengthSigmaNm,
  fwhm_nm: place.fwhmNm,
  equivalent_width_nm: place.equivalentWidthNm,
  equivalent_width_sigma_nm: place.equivalentWidthSigmaNm,
  velocity_km_s: place.velocityKmPerS,
});

/** Analyses at work on the reading before: what they find would belong to other wavelengths. */
export async function findActiveAnalyses(db: Knex, { programmeId }: Scope, spectrumId: string): Promise<string[]> {
  return db('analyses')
    .where({ programme_id: programmeId, spectrum_id: spectrumId })
    .whereIn('phase', ['QUEUED', 'EXECUTING'])
    .pluck<string[]>('id');
}
