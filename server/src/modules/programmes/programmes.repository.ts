import {
  PURGE_AFTER_DAYS,
  type Member,
  type MemberRole,
  type NewProgramme,
  type ProgrammeSummary,
  type StagedProgramme,
} from '@foreveil/shared';
import type { Knex } from 'knex';
import { openFeatures } from '../analyses/open-features.js';

/** Programmes of a person with their role, and how far the work is. @param id only this one */
export async function findProgrammes(db: Knex, userId: string, id?: string): Promise<ProgrammeSummary[]> {
  return db('memberships as m')
    .join('programmes as p', 'p.id', 'm.programme_id')
    .where('m.user_id', userId)
    .whereNull('p.deleted_at')
    .modify((query) => void (id && query.where('p.id', id)))
    .orderBy('p.name')
    .select<ProgrammeSummary[]>(
      { id: 'p.id', name: 'p.name', description: 'p.description', simulated: 'p.simulated', role: 'm.role', version: 'p.version' },
      db.raw('(select count(*)::int from targets where programme_id = p.id) as targets'),
      db.raw('(select count(*)::int from spectra where programme_id = p.id and removed_at is null) as spectra'),
      db.raw(
        `(select count(*)::int from identifications i join spectra s on s.id = i.spectrum_id
          where i.programme_id = p.id and i.state = 'accepted' and s.removed_at is null) as accepted`,
      ),
      db.raw(`${openFeatures('s.programme_id = p.id')} as open`),
    );
}

export const findMembers = (db: Knex, programmeId: string): Promise<Member[]> =>
  db('memberships as m')
    .join('users as u', 'u.id', 'm.user_id')
    .where('m.programme_id', programmeId)
    .orderBy('u.name')
    .select<Member[]>({ userId: 'u.id', name: 'u.name', role: 'm.role' });

interface StagedRow {
  readonly id: string;
  readonly name: string;
  readonly version: number;
  readonly deleted_at: Date;
  readonly deleted_by: string;
  readonly gone_at: Date;
}

/** Deleted programmes that the person led and may have back. */
export async function findStaged(db: Knex, userId: string): Promise<StagedProgramme[]> {
  const rows = await db('memberships as m')
    .join('programmes as p', 'p.id', 'm.programme_id')
    .join('users as u', 'u.id', 'p.deleted_by')
    .where({ 'm.user_id': userId, 'm.role': 'lead' })
    .whereNotNull('p.deleted_at')
    .orderBy('p.deleted_at', 'desc')
    .select<StagedRow[]>(
      { id: 'p.id', name: 'p.name', version: 'p.version', deleted_at: 'p.deleted_at', deleted_by: 'u.name' },
      db.raw(`p.deleted_at + ? * interval '1 day' as gone_at`, [PURGE_AFTER_DAYS]),
    );
  return rows.map(({ deleted_at: at, deleted_by: by, gone_at: gone, ...row }) => ({
    ...row,
    ...{ deletedAt: at.toISOString(), deletedBy: by, goneAt: gone.toISOString() },
  }));
}

export async function insertProgramme(
  db: Knex,
  userId: string,
  { name, description = '' }: NewProgramme,
  simulated = false,
): Promise<string> {
  const [row] = await db('programmes').insert({ name, description, simulated, created_by: userId }).returning<{ id: string }[]>('id');
  return row!.id;
}

export const insertMember = (db: Knex, programmeId: string, userId: string, role: MemberRole) =>
  db('memberships').insert({ programme_id: programmeId, user_id: userId, role });
