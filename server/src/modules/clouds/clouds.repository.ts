import type { CloudChange, CloudSummary, NewCloud } from '@foreveil/shared';
import type { Knex } from 'knex';
import { DomainError } from '../../common/errors/domain-error.js';
import type { Scope } from '../../common/scope.js';
import type { Trx } from '../../database/transaction.js';

type Row = Omit<CloudSummary, 'changedAt'> & { changedAt: Date };

const COLUMNS = {
  id: 'c.id',
  programmeId: 'c.programme_id',
  name: 'c.name',
  fromKmPerS: 'c.from_km_per_s',
  toKmPerS: 'c.to_km_per_s',
  frame: 'c.frame',
  notes: 'c.notes',
  version: 'c.version',
  changedBy: 'u.name',
  changedAt: 'c.changed_at',
};

/** Clouds of a programme by name. @param id only this one */
export async function findClouds(db: Knex, { programmeId }: Scope, id?: string): Promise<CloudSummary[]> {
  const sightlines = db('cloud_sightlines as m')
    .join('spectra as s', 's.id', 'm.spectrum_id')
    .whereRaw('m.cloud_id = c.id')
    .where({ 'm.programme_id': programmeId, 's.removed_at': null })
    .select(db.raw('count(*)::int'));
  const rows = await db('clouds as c')
    .join('users as u', 'u.id', 'c.changed_by')
    .where('c.programme_id', programmeId)
    .modify((query) => void (id && query.where('c.id', id)))
    .orderByRaw('lower(c.name)')
    .select<Row[]>(COLUMNS, sightlines.as('sightlineCount'));
  return rows.map((row) => ({ ...row, changedAt: row.changedAt.toISOString() }));
}

/** Holds the row until the transaction ends. @returns its version; null when the programme has no such cloud */
export async function lockCloud(trx: Trx, { programmeId }: Scope, id: string): Promise<number | null> {
  const row = await trx('clouds').where({ programme_id: programmeId, id }).forUpdate().first<{ version: number } | undefined>('version');
  return row?.version ?? null;
}

const valuesOf = ({ name, fromKmPerS, toKmPerS, frame, notes }: CloudChange, userId: string) => ({
  name,
  from_km_per_s: fromKmPerS,
  to_km_per_s: toKmPerS,
  frame,
  notes,
  changed_by: userId,
});

/** @returns its id @throws name_taken */
export async function insertCloud(trx: Trx, { programmeId }: Scope, made: NewCloud, userId: string): Promise<string> {
  const values = { ...valuesOf({ ...made, notes: made.notes ?? '' }, userId), programme_id: programmeId };
  const [row] = await unlessNameTaken(made.name, () => trx('clouds').insert(values).returning<{ id: string }[]>('id'));
  return row!.id;
}

/** Changes what is named and counts the version up. @throws name_taken */
export async function updateCloud(trx: Trx, { programmeId }: Scope, id: string, change: CloudChange, userId: string): Promise<void> {
  const values = { ...valuesOf(change, userId), version: trx.raw('version + 1'), changed_at: trx.fn.now() };
  await unlessNameTaken(change.name ?? '', () => trx('clouds').where({ programme_id: programmeId, id }).update(values));
}

export async function deleteCloud(trx: Trx, { programmeId }: Scope, id: string): Promise<void> {
  await trx('clouds').where({ programme_id: programmeId, id }).delete();
}

/** Whether the programme holds the spectrum and it was not removed. */
export async function hasSpectrum(trx: Trx, { programmeId }: Scope, id: string): Promise<boolean> {
  return (await trx('spectra').where({ programme_id: programmeId, id, removed_at: null }).first('id')) !== undefined;
}

/** @returns whether it was not there before */
export async function insertSightline(trx: Trx, { programmeId }: Scope, cloudId: string, spectrumId: string): Promise<boolean> {
  const row = { programme_id: programmeId, cloud_id: cloudId, spectrum_id: spectrumId };
  const made = await trx('cloud_sightlines').insert(row).onConflict().ignore().returning<object[]>('spectrum_id');
  return made.length > 0;
}

/** @returns whether it was there */
export async function deleteSightline(trx: Trx, { programmeId }: Scope, cloudId: string, spectrumId: string): Promise<boolean> {
  return (await trx('cloud_sightlines').where({ programme_id: programmeId, cloud_id: cloudId, spectrum_id: spectrumId }).delete()) > 0;
}

async function unlessNameTaken<T>(name: string, write: () => PromiseLike<T>): Promise<T> {
  try {
    return await write();
  } catch (error) {
    if ((error as { constraint?: string }).constraint !== 'clouds_name_once') throw error;
    throw new DomainError('name_taken', `The programme already has a cloud called "${name}".`, {
      errors: [{ pointer: '/name', detail: 'is already used in this programme' }],
    });
  }
}
