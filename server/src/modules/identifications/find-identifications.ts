import type { Identification, IdentificationEvent } from '@foreveil/shared';
import type { Knex } from 'knex';
import { groupBy } from '../../common/group-by.js';
import type { Scope } from '../../common/scope.js';

interface Filter {
  readonly id?: string;
  readonly targetId?: string;
  readonly spectrumId?: string;
  readonly featureIndex?: number;
}

type Row = Omit<Identification, 'decidedAt' | 'history'> & { decidedAt: Date };

/** Identifications of a programme by wavelength, each with its history. */
export async function findIdentifications(db: Knex, { programmeId }: Scope, filter: Filter): Promise<Identification[]> {
  const query = db('identifications as i')
    .join('spectra as s', 's.id', 'i.spectrum_id')
    .join('users as u', 'u.id', 'i.decided_by')
    .where({ 'i.programme_id': programmeId, 's.removed_at': null });
  if (filter.id) query.where('i.id', filter.id);
  if (filter.targetId) query.where('i.target_id', filter.targetId);
  if (filter.spectrumId) query.where('i.spectrum_id', filter.spectrumId);
  if (filter.featureIndex !== undefined) query.where('i.feature_index', filter.featureIndex);
  const rows = await query.orderBy('i.wavelength_nm').orderBy('i.id').select<Row[]>(COLUMNS);
  const history = await findHistory(
    db,
    rows.map(({ id }) => id),
  );
  return rows.map((row) => ({ ...row, decidedAt: row.decidedAt.toISOString(), history: history.get(row.id) ?? [] }));
}

const COLUMNS = {
  id: 'i.id',
  targetId: 'i.target_id',
  spectrumId: 'i.spectrum_id',
  spectrumLabel: 's.label',
  featureIndex: 'i.feature_index',
  kind: 'i.kind',
  wavelengthNm: 'i.wavelength_nm',
  wavelengthSigmaNm: 'i.wavelength_sigma_nm',
  equivalentWidthNm: 'i.equivalent_width_nm',
  equivalentWidthSigmaNm: 'i.equivalent_width_sigma_nm',
  fwhmNm: 'i.fwhm_nm',
  lineId: 'i.line_id',
  species: 'i.species',
  restNm: 'i.rest_nm',
  lineSource: 'i.line_source',
  family: 'i.family',
  systemId: 'i.system_id',
  velocityKmPerS: 'i.velocity_km_s',
  velocitySigmaKmPerS: 'i.velocity_sigma_km_s',
  probability: 'i.probability',
  state: 'i.state',
  version: 'i.version',
  decidedBy: 'u.name',
  decidedAt: 'i.decided_at',
};

async function findHistory(db: Knex, ids: readonly string[]): Promise<Map<string, IdentificationEvent[]>> {
  const rows = await db('identification_events as e')
    .join('users as u', 'u.id', 'e.user_id')
    .whereIn('e.identification_id', ids)
    .orderBy('e.id')
    .select<(Omit<IdentificationEvent, 'at'> & { at: Date; identificationId: string })[]>({
      identificationId: 'e.identification_id',
      at: 'e.at',
      by: 'u.name',
      action: 'e.action',
      from: 'e.from_state',
      to: 'e.to_state',
      reading: 'e.reading',
      remark: 'e.remark',
    });
  const events = groupBy(rows, ({ identificationId }) => identificationId);
  return new Map(
    [...events].map(([id, list]) => [
      id,
      list.map(({ at, by, action, from, to, reading, remark }) => ({ at: at.toISOString(), by, action, from, to, reading, remark })),
    ]),
  );
}
