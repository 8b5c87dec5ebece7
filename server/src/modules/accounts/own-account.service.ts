import { Inject, Injectable } from '@nestjs/common';
import { CHOOSABLE_MAIL, type Account, type MailChoices, type Session } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { hashPassword, matchesPassword } from '../../common/auth/password.js';
import type { StolenSessions } from '../../common/auth/stolen-sessions.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { KNEX } from '../../database/knex.js';
import { inTransaction } from '../../database/transaction.js';
import { addAudit } from '../audit/add-audit.js';
import { queueMail } from '../mail/queue-mail.js';
import { makeAccountLink } from './account-links.js';
import { findUserById, type UserRow } from './accounts.repository.js';
import type { ChangePasswordDto, MailChoiceDto } from './dto/accounts.dto.js';
import { endSessions } from './end-sessions.js';
import { checkPassword } from './new-account.js';
import { SecondFactorService } from './second-factor/second-factor.service.js';
import { tellSecurity } from './tell-security.js';

/** What a person does with their own account. What could take it away from them needs the password once more. */
@Injectable()
export class OwnAccountService implements StolenSessions {
  constructor(
    @Inject(KNEX) private readonly db: Knex,
    @Inject(CONFIG) private readonly config: Config,
    private readonly secondFactor: SecondFactorService,
  ) {}

  async get({ userId }: Actor): Promise<Account> {
    const { id, email, name, administrator } = await this.user(userId);
    return { id, email, name, administrator, secondFactor: await this.secondFactor.state(this.db, userId) };
  }

  async rename(actor: Actor, name: string): Promise<Account> {
    await inTransaction(this.db, async (trx) => {
      await trx('users').where({ id: actor.userId }).update({ name });
      await addAudit(trx, { ...own(actor), action: 'account_renamed', facts: { from: actor.name, to: name } });
    });
    return this.get(actor);
  }

  /** Ends the other sessions and all access links on their way. */
  async changePassword(actor: Actor, { current, password }: ChangePasswordDto): Promise<void> {
    const { email, name } = await this.confirmed(actor, current);
    checkPassword(password, [email, name]);
    const hash = await hashPassword(password, this.config);
    await inTransaction(this.db, async (trx) => {
      await trx('users').where({ id: actor.userId }).update({ password_hash: hash });
      await trx('account_links').where({ user_id: actor.userId }).whereNull('used_at').delete();
      await endSessions(trx, actor.userId, { butNot: actor.sessionId });
      await addAudit(trx, { ...own(actor), action: 'password_changed', facts: {} });
      await tellSecurity(trx, actor.userId, 'password_changed');
    });
  }

  /** Sends a link to the new address and a notice to the old one. Whether the new one is taken is found out only by who reads its mail. */
  async askEmailChange(actor: Actor, newEmail: string, password: string): Promise<void> {
    const { email, name } = await this.confirmed(actor, password);
    if (newEmail === email) throw new DomainError('email_taken', 'This is your address already.');
    await inTransaction(this.db, async (trx) => {
      const link = await makeAccountLink(trx, this.config, { purpose: 'email_change', userId: actor.userId, newEmail });
      await queueMail(trx, {
        kind: 'email_confirm',
        userId: actor.userId,
        address: newEmail,
        facts: { ...link, name },
        dedupeKey: link.linkId,
      });
      await tellSecurity(trx, actor.userId, 'email_change_asked', { detail: `The new address would be ${newEmail}.` });
      await addAudit(trx, { ...own(actor), action: 'email_change_asked', facts: { to: newEmail } });
    });
  }

  async sessions({ userId, sessionId }: Actor): Promise<Session[]> {
    const rows = await this.db('sessions')
      .where({ user_id: userId })
      .whereRaw('expires_at > now()')
      .whereRaw(`last_seen_at > now() - ? * interval '1 minute'`, [this.config.sessionIdleMinutes])
      .orderBy('last_seen_at', 'desc')
      .select<{ id: string; device: string; created_at: Date; last_seen_at: Date }[]>('id', 'device', 'created_at', 'last_seen_at');
    return rows.map(({ id, device, created_at: made, last_seen_at: seen }) => ({
      ...{ id, device, createdAt: made.toISOString(), lastSeenAt: seen.toISOString() },
      current: id === sessionId,
    }));
  }

  async endSession(actor: Actor, sessionId: string): Promise<void> {
    await inTransaction(this.db, async (trx) => {
      if (!(await endSessions(trx, actor.userId, { only: sessionId }))) throw notFound();
      await addAudit(trx, { ...own(actor), action: 'session_ended', facts: { sessionId } });
    });
  }

  /** All but the one that asks. */
  async endOtherSessions(actor: Actor): Promise<void> {
    await inTransaction(this.db, async (trx) => {
      const ended = await endSessions(trx, actor.userId, { butNot: actor.sessionId });
      await addAudit(trx, { ...own(actor), action: 'other_sessions_ended', facts: { ended } });
    });
  }

  /** A cookie that is long out of use was shown again: it, or the one in use, is a copy. Neither is good any more. */
  async end(sessionId: string, userId: string): Promise<void> {
    await inTransaction(this.db, async (trx) => {
      if (!(await endSessions(trx, userId, { only: sessionId }))) return; // somebody else noticed first
      await addAudit(trx, { userId, programmeId: null, action: 'session_replayed', subject: userId, facts: { sessionId } });
      await tellSecurity(trx, userId, 'session_replayed');
    });
  }

  async mailChoices({ userId }: Actor): Promise<MailChoices> {
    const rows = await this.db('mail_choices').where({ user_id: userId }).select<{ kind: string; choice: string }[]>('kind', 'choice');
    const chosen = Object.fromEntries(rows.filter(({ kind }) => kind in CHOOSABLE_MAIL).map(({ kind, choice }) => [kind, choice]));
    return { ...CHOOSABLE_MAIL, ...chosen };
  }

  async chooseMail(actor: Actor, { kind, choice }: MailChoiceDto): Promise<MailChoices> {
    await this.db('mail_choices').insert({ user_id: actor.userId, kind, choice }).onConflict(['user_id', 'kind']).merge();
    return this.mailChoices(actor);
  }

  /** @throws wrong_credentials when the password is not that of the account */
  async confirmed({ userId }: Actor, password: string): Promise<UserRow> {
    const user = await this.user(userId);
    if (await matchesPassword(password, user.password_hash, this.config)) return user;
    throw new DomainError('wrong_password', 'The password is not right.', { errors: [{ pointer: '/current', detail: 'is not right' }] });
  }

  private async user(userId: string): Promise<UserRow> {
    const user = await findUserById(this.db, userId);
    if (!user) throw notFound();
    return user;
  }
}

const own = ({ userId }: Actor) => ({ userId, programmeId: null, subject: userId });
