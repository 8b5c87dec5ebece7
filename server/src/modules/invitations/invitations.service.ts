import { randomUUID } from 'node:crypto';
import { Inject, Injectable } from '@nestjs/common';
import type { Invitation, NewInvitation } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { asLead } from '../../common/auth/membership.js';
import { hashSecret, linkSecret } from '../../common/auth/one-time.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { KNEX } from '../../database/knex.js';
import { inTransaction, type Trx } from '../../database/transaction.js';
import { addAudit } from '../audit/add-audit.js';
import { sayEvent } from '../events/say-event.js';
import { queueMail } from '../mail/queue-mail.js';
import { findOpenInvitations } from './invitations.repository.js';

/** Whom an invitation is for; without a programme it is to the site alone. */
interface Wanted {
  readonly programmeId: string | null;
  readonly email: string;
  readonly role: NewInvitation['role'] | null;
}

@Injectable()
export class InvitationsService {
  constructor(
    @Inject(KNEX) private readonly db: Knex,
    @Inject(CONFIG) private readonly config: Config,
  ) {}

  list(programmeId: string | null): Promise<Invitation[]> {
    return findOpenInvitations(this.db, programmeId);
  }

  /** Inviting an address again takes the earlier invitation back: its link stops working, a new one is sent. */
  invite(actor: Actor, programmeId: string, { email, role }: NewInvitation): Promise<Invitation> {
    return asLead(this.db, actor, programmeId, async (trx) => {
      const member = await trx('memberships as m')
        .join('users as u', 'u.id', 'm.user_id')
        .where({ 'm.programme_id': programmeId, 'u.email': email })
        .first('u.name');
      if (member) throw new DomainError('already_member', `${(member as { name: string }).name} is a member already.`);
      const { name } = (await trx('programmes').where({ id: programmeId }).first<{ name: string }>('name'))!;
      return this.send(trx, actor, { programmeId, email, role }, name);
    });
  }

  /** An administrator opens the site to a person; which programmes they see is for others to say. */
  inviteToSite(actor: Actor, email: string): Promise<Invitation> {
    return inTransaction(this.db, async (trx) => {
      if (await trx('users').where({ email }).first('id'))
        throw new DomainError('email_taken', 'An account with this address exists already.');
      return this.send(trx, actor, { programmeId: null, email, role: null }, null);
    });
  }

  revoke(actor: Actor, programmeId: string, id: string): Promise<void> {
    return asLead(this.db, actor, programmeId, async (trx) => {
      const [row] = await trx('invitations')
        .where({ id, programme_id: programmeId })
        .whereNull('accepted_at')
        .whereNull('revoked_at')
        .update({ revoked_at: trx.fn.now() })
        .returning<{ email: string }[]>('email');
      if (!row) throw notFound();
      await addAudit(trx, { userId: actor.userId, programmeId, action: 'invitation_revoked', subject: id, facts: { email: row.email } });
      await sayEvent(trx, { kind: 'programme', programmeId });
    });
  }

  private async send(trx: Trx, actor: Actor, wanted: Wanted, programmeName: string | null): Promise<Invitation> {
    await this.checkRate(trx, actor);
    const { programmeId, email, role } = wanted;
    await trx('invitations')
      .where({ programme_id: programmeId, email })
      .whereNull('accepted_at')
      .whereNull('revoked_at')
      .update({ revoked_at: trx.fn.now() });
    const id = randomUUID();
    const [row] = await trx('invitations')
      .insert({
        ...{ id, programme_id: programmeId, email, role, invited_by: actor.userId },
        secret_hash: hashSecret(linkSecret(this.config, 'invitation', id)),
        expires_at: trx.raw(`now() + ? * interval '1 day'`, [this.config.invitationDays]),
      })
      .returning<{ expires_at: Date }[]>('expires_at');
    const facts = { linkId: id, by: actor.name, programmeName, role, expiresAt: row!.expires_at.toISOString() };
    await queueMail(trx, { kind: 'invitation', address: email, facts, dedupeKey: id });
    await addAudit(trx, { userId: actor.userId, programmeId, action: 'invited', subject: id, facts: { email, role } });
    if (programmeId) await sayEvent(trx, { kind: 'programme', programmeId });
    return (await findOpenInvitations(trx, programmeId, id))[0]!;
  }

  /** Invitations are mail to strangers, so there is a limit to them. */
  private async checkRate(trx: Trx, { userId }: Actor): Promise<void> {
    const sent = await trx('invitations')
      .where({ invited_by: userId })
      .whereRaw(`created_at > now() - interval '1 hour'`)
      .count<{ count: string }[]>('* as count')
      .first();
    if (Number(sent?.count) < this.config.invitationsPerHour) return;
    throw new DomainError('too_many_requests', `${this.config.invitationsPerHour} invitations in an hour are the most. Try again later.`, {
      retryAfter: 3600,
    });
  }
}
