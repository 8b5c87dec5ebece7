import type { Member, MemberRole, NewProgramme, ProgrammeSummary } from '@foreveil/shared';
import type { Knex } from 'knex';
import { openFeatures } from '../analyses/open-features.js';

/** Programmes of a person with their role, and how far the work is. @param id only this one */
export async function findProgrammes(db: Knex, userId: string, id?: string): Promise<ProgrammeSummary[]> {
  return db('memberships as m')
    .join('programmes as p', 'p.id', 'm.programme_id')
    .where('m.user_id', userId)
    .modify((query) => void (id && query.where('p.id', id)))
    .orderBy('p.name')
    .select<ProgrammeSummary[]>(
      { id: 'p.id', name: 'p.name', description: 'p.description', simulated: 'p.simulated', role: 'm.role' },
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
