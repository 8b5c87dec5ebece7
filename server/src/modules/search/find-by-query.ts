import type { FoundIdentification, IdentificationQuery, Page, SearchOrder } from '@foreveil/shared';
import type { Knex } from 'knex';
import { readKey, writeKey } from './page-key.js';

const ORDERS: Record<SearchOrder, string> = { wavelength: 'wavelength_nm', velocity: 'velocity_km_s', width: 'equivalent_width_nm' };
const COMPANION_KM_PER_S = 5;

export interface PageOf extends IdentificationQuery {
  readonly after?: string;
  readonly limit: number;
}

type Row = Omit<FoundIdentification, 'decidedAt'> & { decidedAt: Date; key: number };

/**
 * One page of what a person may read, by key. Each programme gives its own first rows from an index, and those are merged: the cost
 * depends on the page and the number of programmes, not on how many identifications there are.
 */
export async function findByQuery(db: Knex, userId: string, query: PageOf): Promise<Page<FoundIdentification>> {
  const { limit, order = 'wavelength' } = query;
  const programmes = db('memberships')
    .where({ user_id: userId })
    .whereExists(db('programmes').whereRaw('id = memberships.programme_id and deleted_at is null'))
    .modify((q) => void (query.programmeId && q.where({ programme_id: query.programmeId })))
    .select('programme_id');
  const found = db
    .select<Row[]>(COLUMNS, db.raw('i.key'))
    .from(db.raw('(?) as m cross join lateral (?) as i', [programmes, firstOf(db, query, ORDERS[order])]))
    .join('programmes as p', 'p.id', 'i.programme_id')
    .join('targets as t', 't.id', 'i.target_id')
    .join('spectra as s', 's.id', 'i.spectrum_id')
    .join('users as u', 'u.id', 'i.decided_by')
    .orderBy('i.key')
    .orderBy('i.id')
    .limit(limit + 1);
  const rows = (await found) as Row[];
  const page = rows.slice(0, limit);
  const last = page.at(-1);
  return {
    rows: page.map(({ key: _, decidedAt, ...row }) => ({ ...row, decidedAt: decidedAt.toISOString() })),
    next: rows.length > limit && last ? writeKey({ value: last.key, id: last.id }) : null,
  };
}

/** The first rows of one programme (m.programme_id) that answer the query. */
function firstOf(db: Knex, query: PageOf, column: string): Knex.QueryBuilder {
  const rows = db('identifications as n')
    .select('n.*', db.raw('n.?? as key', [column]))
    .where('n.programme_id', db.ref('m.programme_id'))
    .where('n.state', query.state ?? 'accepted')
    .whereNotExists(removedSpectrum(db, 'n.spectrum_id'))
    .orderBy(`n.${column}`)
    .orderBy('n.id')
    .limit(query.limit + 1);
  if (query.species === 'unidentified') rows.whereNull('n.species');
  else if (query.species !== undefined) rows.where('n.species', query.species);
  if (column === ORDERS.velocity) rows.whereNotNull('n.velocity_km_s');
  if (query.family !== undefined) rows.where('n.family', query.family);
  between(rows, 'n.wavelength_nm', query.fromNm, query.toNm);
  between(rows, 'n.velocity_km_s', query.fromKmPerS, query.toKmPerS);
  between(rows, 'n.equivalent_width_nm', query.fromWidthNm, query.toWidthNm);
  const near = query.companionKmPerS ?? COMPANION_KM_PER_S;
  if (query.withSpecies !== undefined) rows.whereExists(companion(db, query.withSpecies, near));
  if (query.withoutSpecies !== undefined) rows.whereNotExists(companion(db, query.withoutSpecies, near));
  if (query.after !== undefined) {
    const { value, id } = readKey(query.after);
    rows.whereRaw('(n.??, n.id) > (?, ?)', [column, value, id]);
  }
  return rows;
}

function between(rows: Knex.QueryBuilder, column: string, from: number | undefined, to: number | undefined): void {
  if (from !== undefined) rows.where(column, '>=', from);
  if (to !== undefined) rows.where(column, '<=', to);
}

const removedSpectrum = (db: Knex, id: string): Knex.QueryBuilder =>
  db('spectra as r').select(db.raw('1')).where('r.id', db.ref(id)).whereNotNull('r.removed_at');

const companion = (db: Knex, species: string, nearKmPerS: number): Knex.QueryBuilder =>
  db('identifications as c')
    .select(db.raw('1'))
    .where('c.target_id', db.ref('n.target_id'))
    .where('c.species', species)
    .where('c.state', 'accepted')
    .whereNotExists(removedSpectrum(db, 'c.spectrum_id'))
    .whereRaw('c.id <> n.id and c.velocity_km_s between n.velocity_km_s - ? and n.velocity_km_s + ?', [nearKmPerS, nearKmPerS]);

const COLUMNS: Record<keyof FoundIdentification, string> = {
  id: 'i.id',
  programmeId: 'i.programme_id',
  programmeName: 'p.name',
  simulated: 'p.simulated',
  targetId: 'i.target_id',
  targetName: 't.name',
  spectrumId: 'i.spectrum_id',
  spectrumLabel: 's.label',
  featureIndex: 'i.feature_index',
  kind: 'i.kind',
  wavelengthNm: 'i.wavelength_nm',
  wavelengthSigmaNm: 'i.wavelength_sigma_nm',
  equivalentWidthNm: 'i.equivalent_width_nm',
  equivalentWidthSigmaNm: 'i.equivalent_width_sigma_nm',
  species: 'i.species',
  restNm: 'i.rest_nm',
  family: 'i.family',
  velocityKmPerS: 'i.velocity_km_s',
  velocitySigmaKmPerS: 'i.velocity_sigma_km_s',
  probability: 'i.probability',
  state: 'i.state',
  lineSource: 'i.line_source',
  decidedBy: 'u.name',
  decidedAt: 'i.decided_at',
};
