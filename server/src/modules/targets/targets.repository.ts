import type { NewTarget, TargetSummary } from '@foreveil/shared';
import type { Knex } from 'knex';
import { DomainError } from '../../common/errors/domain-error.js';
import type { Scope } from '../../common/scope.js';
import { openFeatures } from '../analyses/open-features.js';

const decided = (state: 'accepted' | 'rejected') =>
  `(select count(*)::int from identifications i join spectra s on s.id = i.spectrum_id
    where i.target_id = t.id and i.state = '${state}' and s.removed_at is null)`;

/** Targets of a programme by name. @param id only this one */
export async function findTargets(db: Knex, { programmeId }: Scope, id?: string): Promise<Omit<TargetSummary, 'spectra'>[]> {
  return db('targets as t')
    .where('t.programme_id', programmeId)
    .modify((query) => void (id && query.where('t.id', id)))
    .orderByRaw('lower(t.name)')
    .select<Omit<TargetSummary, 'spectra'>[]>(
      { id: 't.id', name: 't.name', kind: 't.kind', simulated: 't.simulated', notes: 't.notes', version: 't.version' },
      { raDeg: 't.ra_deg', decDeg: 't.dec_deg' },
      db.raw(`${decided('accepted')} as accepted`),
      db.raw(`${decided('rejected')} as rejected`),
      db.raw(`${openFeatures('s.target_id = t.id')} as open`),
    );
}

export async function findTargetIdByName(db: Knex, { programmeId }: Scope, name: string): Promise<string | null> {
  const row = await db('targets')
    .where({ programme_id: programmeId })
    .whereRaw('lower(name) = lower(?)', [name])
    .first<{ id: string }>('id');
  return row?.id ?? null;
}

/** The version of a target, its row held against other changes; null when the programme has no such target. */
export async function lockTarget(db: Knex, { programmeId }: Scope, id: string): Promise<number | null> {
  const row = await db('targets').where({ programme_id: programmeId, id }).forUpdate().first<{ version: number }>('version');
  return row?.version ?? null;
}

interface TargetMaking extends NewTarget {
  readonly userId: string;
  readonly simulated?: boolean;
}

/** @throws name_taken */
export async function insertTarget(db: Knex, { programmeId }: Scope, target: TargetMaking): Promise<string> {
  const { name, kind, raDeg = null, decDeg = null, notes = '', userId, simulated = false } = target;
  const values = { programme_id: programmeId, name, kind, ra_deg: raDeg, dec_deg: decDeg, notes, simulated, created_by: userId };
  const [row] = await unlessNameTaken(name, () => db('targets').insert(values).returning<{ id: string }[]>('id'));
  return row!.id;
}

/** Changes what is named and counts the version up. @throws name_taken */
export async function updateTarget(db: Knex, { programmeId }: Scope, id: string, change: Partial<NewTarget>): Promise<void> {
  const { name, kind, raDeg, decDeg, notes } = change;
  const values = { name, kind, ra_deg: raDeg, dec_deg: decDeg, notes, version: db.raw('version + 1') };
  await unlessNameTaken(name ?? '', () => db('targets').where({ programme_id: programmeId, id }).update(values));
}

async function unlessNameTaken<T>(name: string, write: () => PromiseLike<T>): Promise<T> {
  try {
    return await write();
  } catch (error) {
    if ((error as { constraint?: string }).constraint !== 'targets_name_once') throw error;
    throw new DomainError('name_taken', `The programme already has a target called "${name}".`, {
      errors: [{ pointer: '/name', detail: 'is already used in this programme' }],
    });
  }
}

export async function targetExists(db: Knex, { programmeId }: Scope, id: string): Promise<boolean> {
  return (await db('targets').where({ programme_id: programmeId, id }).first('id')) !== undefined;
}
