import { roleAllows, type MemberRole } from '@foreveil/shared';
import { isUUID } from 'class-validator';
import type { Knex } from 'knex';
import { inTransaction, type Trx } from '../../database/transaction.js';
import { DomainError, notFound } from '../errors/domain-error.js';
import type { Actor } from './actor.js';

/** @returns the role of a person in a programme, null for outsiders */
export async function roleIn(db: Knex, userId: string, programmeId: string): Promise<MemberRole | null> {
  if (!isUUID(programmeId)) return null;
  const row = await db('memberships').where({ user_id: userId, programme_id: programmeId }).first<{ role: MemberRole }>('role');
  return row?.role ?? null;
}

/** @throws not_found to an outsider, forbidden_role to a member whose role is too weak */
export async function checkRole(db: Knex, userId: string, programmeId: string, least: MemberRole): Promise<MemberRole> {
  return allow(await roleIn(db, userId, programmeId), least);
}

/**
 * One transaction of a member: the role is read again inside it and held (`for share`), so that taking a person's role away either comes
 * before and refuses the work, or waits until the work is done.
 */
export function asMember<T>(db: Knex, actor: Actor, programmeId: string, least: MemberRole, work: (trx: Trx) => Promise<T>): Promise<T> {
  return inTransaction(db, async (trx) => {
    const row = await trx('memberships')
      .where({ user_id: actor.userId, programme_id: programmeId })
      .forShare()
      .first<{ role: MemberRole }>('role');
    allow(row?.role ?? null, least);
    return work(trx);
  });
}

function allow(role: MemberRole | null, least: MemberRole): MemberRole {
  if (role === null) throw notFound();
  if (!roleAllows(role, least)) throw new DomainError('forbidden_role', `This needs the role ${least}; yours is ${role}.`);
  return role;
}
