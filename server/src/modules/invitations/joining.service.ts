import { Inject, Injectable } from '@nestjs/common';
import type { InvitationLook } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { lockProgramme } from '../../common/auth/membership.js';
import { hashSecret } from '../../common/auth/one-time.js';
import { hashPassword } from '../../common/auth/password.js';
import { DomainError } from '../../common/errors/domain-error.js';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { KNEX } from '../../database/knex.js';
import { inTransaction, type Trx } from '../../database/transaction.js';
import { linkNotValid } from '../accounts/account-links.js';
import type { SignUpDto } from '../accounts/dto/accounts.dto.js';
import { checkPassword, createAccount } from '../accounts/new-account.js';
import { addAudit } from '../audit/add-audit.js';
import { sayEvent } from '../events/say-event.js';
import { queueMail } from '../mail/queue-mail.js';
import { findByHash, type FoundInvitation } from './invitations.repository.js';

/** What the invited do with their link. It works once: two who use it at the same time are told apart by the lock on its row. */
@Injectable()
export class JoiningService {
  constructor(
    @Inject(KNEX) private readonly db: Knex,
    @Inject(CONFIG) private readonly config: Config,
  ) {}

  async look(secret: string): Promise<InvitationLook> {
    const found = await findByHash(this.db, hashSecret(secret));
    if (!found) throw linkNotValid();
    const { email, programme_id: programmeId, programme_name: programmeName, role, inviter: invitedBy, expires_at: ends } = found;
    const hasAccount = (await this.db('users').where({ email }).first('id')) !== undefined;
    return { email, programmeId, programmeName, role, invitedBy, expiresAt: ends.toISOString(), hasAccount };
  }

  /** Opens an account with the invited address, which the link has proved, and joins. @returns its id */
  async signUp({ secret, name, password }: SignUpDto): Promise<string> {
    const passwordHash = await hashPassword(password, this.config);
    return this.using(secret, async (trx, invitation) => {
      checkPassword(password, [invitation.email, name]);
      const userId = await createAccount(trx, { email: invitation.email, name, passwordHash });
      await this.join(trx, invitation, userId, name);
      return userId;
    });
  }

  /** Joins with the account one is signed in to; whoever holds the link was given it. @returns the programme */
  async accept(actor: Actor, secret: string): Promise<{ programmeId: string | null }> {
    return this.using(secret, async (trx, invitation) => {
      await this.join(trx, invitation, actor.userId, actor.name);
      return { programmeId: invitation.programme_id };
    });
  }

  private using<T>(secret: string, work: (trx: Trx, invitation: FoundInvitation) => Promise<T>): Promise<T> {
    return inTransaction(this.db, async (trx) => {
      const hash = hashSecret(secret);
      const seen = await findByHash(trx, hash);
      // in the order in which leads lock too: the programme, then what belongs to it
      if (seen?.programme_id) await lockProgramme(trx, seen.programme_id);
      const invitation = await findByHash(trx, hash, true);
      if (!invitation) throw linkNotValid();
      return work(trx, invitation);
    });
  }

  private async join(trx: Trx, invitation: FoundInvitation, userId: string, name: string): Promise<void> {
    const { id, programme_id: programmeId, programme_name: programmeName, role, invited_by: invitedBy } = invitation;
    await trx('invitations').where({ id }).update({ accepted_at: trx.fn.now(), accepted_by: userId });
    if (!programmeId || !role) return;
    const joined = await trx('memberships')
      .insert({ programme_id: programmeId, user_id: userId, role })
      .onConflict(['programme_id', 'user_id'])
      .ignore()
      .returning('role');
    if (!joined.length)
      throw new DomainError('already_member', 'You are a member of this programme already.', { current: { programmeId } });
    await addAudit(trx, { userId, programmeId, action: 'joined', subject: userId, facts: { invitation: id, role, as: invitation.email } });
    await sayEvent(trx, { kind: 'programme', programmeId });
    const facts = {
      programmeName: programmeName!,
      about: `${name} joined`,
      sentence: `${name} accepted your invitation and is ${role} now.`,
      path: `/programmes/${programmeId}/members`,
    };
    await queueMail(trx, { kind: 'membership', userId: invitedBy, programmeId, facts, dedupeKey: `joined ${id}` });
  }
}
