import type { MemberDetail, MemberRole } from '@foreveil/shared';
import type { Knex } from 'knex';

interface Row {
  readonly user_id: string;
  readonly name: string;
  readonly email: string;
  readonly active: boolean;
  readonly role: MemberRole;
  readonly version: number;
  readonly created_at: Date;
}

/** @param withAddress whether the reader may see e-mail addresses */
export async function findMemberDetails(db: Knex, programmeId: string, withAddress: boolean, userId?: string): Promise<MemberDetail[]> {
  const rows = await db('memberships as m')
    .join('users as u', 'u.id', 'm.user_id')
    .where({ 'm.programme_id': programmeId })
    .modify((query) => void (userId && query.where({ 'm.user_id': userId })))
    .orderBy('u.name')
    .select<Row[]>('m.user_id', 'u.name', 'u.email', 'u.active', 'm.role', 'm.version', 'm.created_at');
  return rows.map(({ user_id: id, name, email, active, role, version, created_at: since }) => ({
    ...{ userId: id, name, role, version, since: since.toISOString(), closed: !active },
    email: withAddress ? email : null,
  }));
}

/** Leads who can sign in, other than this person. */
export async function otherLeads(db: Knex, programmeId: string, userId: string): Promise<number> {
  const row = await db('memberships as m')
    .join('users as u', 'u.id', 'm.user_id')
    .where({ 'm.programme_id': programmeId, 'm.role': 'lead', 'u.active': true })
    .whereNot({ 'm.user_id': userId })
    .count<{ count: string }[]>('* as count')
    .first();
  return Number(row?.count ?? 0);
}
