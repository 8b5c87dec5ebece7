import type { Invitation, MemberRole } from '@foreveil/shared';
import type { Knex } from 'knex';

interface Row {
  readonly id: string;
  readonly email: string;
  readonly role: MemberRole | null;
  readonly invited_by: string;
  readonly created_at: Date;
  readonly expires_at: Date;
  readonly expired: boolean;
}

/** Invitations that nobody accepted and nobody took back. @param programmeId null: to the site */
export async function findOpenInvitations(db: Knex, programmeId: string | null, id?: string): Promise<Invitation[]> {
  const rows = await db('invitations as i')
    .join('users as u', 'u.id', 'i.invited_by')
    .where({ 'i.programme_id': programmeId })
    .whereNull('i.accepted_at')
    .whereNull('i.revoked_at')
    .modify((query) => void (id && query.where({ 'i.id': id })))
    .orderBy('i.created_at', 'desc')
    .select<Row[]>(
      { id: 'i.id', email: 'i.email', role: 'i.role', invited_by: 'u.name', created_at: 'i.created_at', expires_at: 'i.expires_at' },
      db.raw('i.expires_at <= now() as expired'),
    );
  return rows.map(({ id: key, email, role, invited_by: invitedBy, created_at: made, expires_at: ends, expired }) => ({
    ...{ id: key, email, role, invitedBy, expired },
    ...{ createdAt: made.toISOString(), expiresAt: ends.toISOString() },
  }));
}

export interface FoundInvitation {
  readonly id: string;
  readonly programme_id: string | null;
  readonly programme_name: string | null;
  readonly email: string;
  readonly role: MemberRole | null;
  readonly invited_by: string;
  readonly inviter: string;
  readonly expires_at: Date;
}

/** The invitation of a link that still holds; undefined for any other. @param lock keeps others from using it meanwhile */
export function findByHash(db: Knex, hash: string, lock = false): Promise<FoundInvitation | undefined> {
  return db('invitations as i')
    .join('users as u', 'u.id', 'i.invited_by')
    .leftJoin('programmes as p', 'p.id', 'i.programme_id')
    .where({ 'i.secret_hash': hash })
    .whereNull('i.accepted_at')
    .whereNull('i.revoked_at')
    .whereNull('p.deleted_at')
    .whereRaw('i.expires_at > now()')
    .modify((query) => void (lock && query.forUpdate('i')))
    .first<FoundInvitation>(...['i.id', 'i.programme_id', 'i.email', 'i.role', 'i.invited_by', 'i.expires_at'], {
      programme_name: 'p.name',
      inviter: 'u.name',
    });
}
