import type { ReadingEvent, RemovedSpectrum } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Scope } from '../../common/scope.js';
import type { Trx } from '../../database/transaction.js';

export interface LockedSpectrum {
  readonly version: number;
  readonly revision: number;
  readonly targetId: string;
  readonly label: string;
  readonly fileName: string;
  readonly sha256: string;
  readonly removed: boolean;
}

/** A spectrum, its row held against other changes; null when the programme has none of this id. Removed ones are found too. */
export async function lockSpectrum(trx: Trx, { programmeId }: Scope, id: string): Promise<LockedSpectrum | null> {
  const row = await trx('spectra')
    .where({ programme_id: programmeId, id })
    .forUpdate()
    .first<LockedSpectrum | undefined>(
      { version: 'version', revision: 'reading_revision', targetId: 'target_id', label: 'label', fileName: 'file_name', sha256: 'sha256' },
      trx.raw('removed_at is not null as removed'),
    );
  return row ?? null;
}

interface Change {
  readonly label?: string;
  readonly targetId?: string;
}

/** Name and target; the decisions on the spectrum go with it to the target. */
export async function updateSpectrum(trx: Trx, { programmeId }: Scope, id: string, { label, targetId }: Change): Promise<void> {
  const values = { label, target_id: targetId, version: trx.raw('version + 1') };
  await trx('spectra').where({ programme_id: programmeId, id }).update(values);
  if (targetId) await trx('identifications').where({ programme_id: programmeId, spectrum_id: id }).update({ target_id: targetId });
}

/** @param by null puts it back */
export async function setRemoved(trx: Trx, { programmeId }: Scope, id: string, by: string | null): Promise<void> {
  const values = { removed_at: by && trx.fn.now(), removed_by: by, version: trx.raw('version + 1') };
  await trx('spectra').where({ programme_id: programmeId, id }).update(values);
}

export async function countDecisions(db: Knex, { programmeId }: Scope, spectrumId: string): Promise<number> {
  const [row] = await db('identifications')
    .where({ programme_id: programmeId, spectrum_id: spectrumId })
    .count<{ n: string }[]>({ n: '*' });
  return Number(row!.n);
}

type RemovedRow = Omit<RemovedSpectrum, 'removedAt'> & { removedAt: Date };

/** Removed spectra of a programme, the last one first. */
export async function findRemoved(db: Knex, { programmeId }: Scope): Promise<RemovedSpectrum[]> {
  const rows = await db('spectra as s')
    .join('targets as t', 't.id', 's.target_id')
    .join('users as u', 'u.id', 's.removed_by')
    .where('s.programme_id', programmeId)
    .whereNotNull('s.removed_at')
    .orderBy('s.removed_at', 'desc')
    .select<RemovedRow[]>(
      { id: 's.id', label: 's.label', fileName: 's.file_name', targetId: 't.id', targetName: 't.name', version: 's.version' },
      { removedBy: 'u.name', removedAt: 's.removed_at' },
      db.raw('(select count(*)::int from identifications where spectrum_id = s.id) as decisions'),
    );
  return rows.map(({ removedAt, ...row }) => ({ ...row, removedAt: removedAt.toISOString() }));
}

type EventRow = Omit<ReadingEvent, 'at'> & { at: Date };

/** All the ways in which the file of a spectrum was read, the first one first. */
export async function findReadings(db: Knex, { programmeId }: Scope, id: string): Promise<ReadingEvent[]> {
  const rows = await db('spectrum_readings as r')
    .join('users as u', 'u.id', 'r.user_id')
    .where({ 'r.programme_id': programmeId, 'r.spectrum_id': id })
    .orderBy('r.revision')
    .select<EventRow[]>({
      ...{ revision: 'r.revision', at: 'r.at', by: 'u.name', corrections: 'r.corrections', recipe: 'r.recipe_name' },
      ...{ points: 'r.points', fromNm: 'r.from_nm', toNm: 'r.to_nm' },
    });
  return rows.map(({ at, ...row }) => ({ ...row, at: at.toISOString() }));
}
