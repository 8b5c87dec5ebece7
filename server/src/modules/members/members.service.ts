import { randomUUID } from 'node:crypto';
import { Inject, Injectable } from '@nestjs/common';
import type { MemberDetail, MemberRole } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { asLead, checkRole, lockProgramme, roleIn } from '../../common/auth/membership.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import { KNEX } from '../../database/knex.js';
import { inTransaction, type Trx } from '../../database/transaction.js';
import { addAudit } from '../audit/add-audit.js';
import { sayEvent } from '../events/say-event.js';
import { revokeInvitationsOf } from '../invitations/revoke-invitations.js';
import { queueMail } from '../mail/queue-mail.js';
import { findMemberDetails, otherLeads } from './members.repository.js';

/**
 * Who is in a programme. What a member who goes has decided stays under their name, analyses they asked for run to their end, invitations
 * they sent are taken back, and mail to them about the programme that has not left yet does not leave.
 */
@Injectable()
export class MembersService {
  constructor(@Inject(KNEX) private readonly db: Knex) {}

  async list(actor: Actor, programmeId: string): Promise<MemberDetail[]> {
    return findMemberDetails(this.db, programmeId, (await roleIn(this.db, actor.userId, programmeId)) === 'lead');
  }

  changeRole(actor: Actor, programmeId: string, userId: string, role: MemberRole, version: number): Promise<MemberDetail> {
    return asLead(this.db, actor, programmeId, async (trx) => {
      const before = await this.seen(trx, programmeId, userId, version);
      if (before.role === role) return before;
      if (before.role === 'lead') await this.needAnotherLead(trx, programmeId, userId);
      await trx('memberships')
        .where({ programme_id: programmeId, user_id: userId })
        .update({ role, version: version + 1 });
      if (before.role === 'lead') await revokeInvitationsOf(trx, userId, programmeId);
      await addAudit(trx, {
        userId: actor.userId,
        programmeId,
        action: 'role_changed',
        subject: userId,
        facts: { from: before.role, to: role },
      });
      await this.tell(trx, actor, programmeId, userId, (name) => `${actor.name} made you ${role} in ${name}; you were ${before.role}.`);
      await sayEvent(trx, { kind: 'programme', programmeId });
      return (await findMemberDetails(trx, programmeId, true, userId))[0]!;
    });
  }

  remove(actor: Actor, programmeId: string, userId: string, version: number): Promise<void> {
    return asLead(this.db, actor, programmeId, async (trx) => {
      const before = await this.seen(trx, programmeId, userId, version);
      await this.tell(
        trx,
        actor,
        programmeId,
        userId,
        (name) => `${actor.name} removed you from ${name}. What you decided there stays under your name.`,
        '/programmes',
      );
      await this.take(trx, programmeId, before);
      await addAudit(trx, { userId: actor.userId, programmeId, action: 'member_removed', subject: userId, facts: { role: before.role } });
    });
  }

  leave(actor: Actor, programmeId: string): Promise<void> {
    return inTransaction(this.db, async (trx) => {
      await lockProgramme(trx, programmeId);
      await checkRole(trx, actor.userId, programmeId, 'reader');
      const [before] = await findMemberDetails(trx, programmeId, true, actor.userId);
      await this.take(trx, programmeId, before!);
      await addAudit(trx, { userId: actor.userId, programmeId, action: 'left', subject: actor.userId, facts: { role: before!.role } });
    });
  }

  private async take(trx: Trx, programmeId: string, { userId, role }: MemberDetail): Promise<void> {
    if (role === 'lead') await this.needAnotherLead(trx, programmeId, userId);
    await trx('memberships').where({ programme_id: programmeId, user_id: userId }).delete();
    await revokeInvitationsOf(trx, userId, programmeId);
    await sayEvent(trx, { kind: 'programme', programmeId });
  }

  private async seen(trx: Trx, programmeId: string, userId: string, version: number): Promise<MemberDetail> {
    const [member] = await findMemberDetails(trx, programmeId, true, userId);
    if (!member) throw notFound();
    if (member.version === version) return member;
    throw new DomainError('stale_version', `Somebody changed the role of ${member.name} in the meantime: it is ${member.role} now.`, {
      current: member,
    });
  }

  private async needAnotherLead(trx: Trx, programmeId: string, userId: string): Promise<void> {
    if (await otherLeads(trx, programmeId, userId)) return;
    throw new DomainError('last_lead', 'A programme needs a lead who can sign in. Make somebody else lead first.');
  }

  /** Not sent as a member's mail: who was removed must hear of it too. */
  private async tell(
    trx: Trx,
    actor: Actor,
    programmeId: string,
    userId: string,
    say: (name: string) => string,
    path?: string,
  ): Promise<void> {
    if (userId === actor.userId) return;
    const { name } = (await trx('programmes').where({ id: programmeId }).first<{ name: string }>('name'))!;
    const facts = { programmeName: name, about: 'Your role changed', sentence: say(name), path: path ?? `/programmes/${programmeId}` };
    await queueMail(trx, { kind: 'membership', userId, facts, dedupeKey: randomUUID() });
  }
}
