import { roleAllows, type MemberRole } from '@foreveil/shared';
import { isUUID } from 'class-validator';
import type { Knex } from 'knex';
import { inTransaction, type Trx } from '../../database/transaction.js';
import { DomainError, notFound } from '../errors/domain-error.js';
import type { Actor } from './actor.js';

const memberships = (db: Knex, userId: string, programmeId: string, staged = false) =>
  db('memberships as m')
    .join('programmes as p', 'p.id', 'm.programme_id')
    .where({ 'm.user_id': userId, 'm.programme_id': programmeId })
    .modify((query) => void (staged || query.whereNull('p.deleted_at')));

/** @param staged also while the programme is deleted and can be had back @returns the role of a person in a programme, null for outsiders */
export async function roleIn(db: Knex, userId: string, programmeId: string, staged = false): Promise<MemberRole | null> {
  if (!isUUID(programmeId)) return null;
  const row = await memberships(db, userId, programmeId, staged).first<{ role: MemberRole }>('m.role');
  return row?.role ?? null;
}

/** @throws not_found to an outsider, forbidden_role to a member whose role is too weak */
export async function checkRole(db: Knex, userId: string, programmeId: string, least: MemberRole, staged = false): Promise<MemberRole> {
  return allow(await roleIn(db, userId, programmeId, staged), least);
}

/**
 * One transaction of a member: the role is read again inside it and held (`for share`), so that taking a person's role away either comes
 * before and refuses the work, or waits until the work is done.
 */
export function asMember<T>(db: Knex, actor: Actor, programmeId: string, least: MemberRole, work: (trx: Trx) => Promise<T>): Promise<T> {
  return inTransaction(db, async (trx) => {
    const row = await memberships(trx, actor.userId, programmeId).forShare('m').first<{ role: MemberRole }>('m.role');
    allow(row?.role ?? null, least);
    return work(trx);
  });
}

function allow(role: MemberRole | null, least: MemberRole): MemberRole {
  if (role === null) throw notFound();
  if (!roleAllows(role, least)) throw new DomainError('forbidden_role', `This needs the role ${least}; yours is ${role}.`);
  return role;
}

/**
 * One transaction of a lead that changes who belongs to a programme, or the programme itself: such changes come one after the other, so two
 * leads who demote each other at the same moment cannot both succeed. @param staged also while the programme is deleted and can be had back
 */
export function asLead<T>(db: Knex, actor: Actor, programmeId: string, work: (trx: Trx) => Promise<T>, staged = false): Promise<T> {
  return inTransaction(db, async (trx) => {
    await lockProgramme(trx, programmeId);
    await checkRole(trx, actor.userId, programmeId, 'lead', staged);
    return work(trx);
  });
}

/** Waits for all others who change this programme's members, and makes them wait. */
export const lockProgramme = (trx: Trx, programmeId: string) => trx('programmes').where({ id: programmeId }).forUpdate().first('id');
