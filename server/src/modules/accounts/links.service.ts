import { setTimeout as pause } from 'node:timers/promises';
import { Inject, Injectable } from '@nestjs/common';
import type { Knex } from 'knex';
import { hashPassword } from '../../common/auth/password.js';
import { readStopMailToken } from '../../common/auth/one-time.js';
import { DomainError } from '../../common/errors/domain-error.js';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { KNEX } from '../../database/knex.js';
import { inTransaction } from '../../database/transaction.js';
import { addAudit } from '../audit/add-audit.js';
import { isChoosable, queueMail } from '../mail/queue-mail.js';
import { linkNotValid, makeAccountLink, useAccountLink } from './account-links.js';
import { findActiveUser, findUserById } from './accounts.repository.js';
import type { NewPasswordDto } from './dto/accounts.dto.js';
import { endSessions } from './end-sessions.js';
import { checkPassword } from './new-account.js';
import { tellSecurity } from './tell-security.js';

const UNIQUE_VIOLATION = '23505';

function takenOrWorse(error: unknown): never {
  if ((error as { code?: string }).code !== UNIQUE_VIOLATION) throw error;
  throw new DomainError('email_taken', 'An account with this address exists already.');
}

/** Longer than the work for an address that has an account, so that the answer takes the same time for one that has none. */
const EVEN_MS = 250;

/** What the links in mails do. */
@Injectable()
export class LinksService {
  constructor(
    @Inject(KNEX) private readonly db: Knex,
    @Inject(CONFIG) private readonly config: Config,
  ) {}

  /** Answers alike whether there is such an account or not. */
  async askPasswordReset(email: string): Promise<void> {
    await Promise.all([this.sendReset(email), pause(EVEN_MS)]);
  }

  private async sendReset(email: string): Promise<void> {
    const user = await findActiveUser(this.db, email);
    await inTransaction(this.db, async (trx) => {
      await addAudit(trx, { userId: user?.id ?? null, programmeId: null, action: 'password_reset_asked', subject: 'account', facts: {} });
      if (!user) return;
      const facts = await makeAccountLink(trx, this.config, { purpose: 'password_reset', userId: user.id });
      await queueMail(trx, { kind: 'password_reset', userId: user.id, facts, dedupeKey: facts.linkId });
    });
  }

  /** Every session ends: whoever reads the mail is believed, whoever is signed in is not. */
  async resetPassword({ secret, password }: NewPasswordDto): Promise<void> {
    const hash = await hashPassword(password, this.config);
    await inTransaction(this.db, async (trx) => {
      const { userId } = await useAccountLink(trx, 'password_reset', secret);
      const user = await findUserById(trx, userId);
      checkPassword(password, [user!.email, user!.name]); // a refusal takes the use of the link back
      await trx('users').where({ id: userId }).update({ password_hash: hash });
      await trx('account_links').where({ user_id: userId }).whereNull('used_at').delete();
      await endSessions(trx, userId);
      await addAudit(trx, { userId, programmeId: null, action: 'password_reset', subject: userId, facts: {} });
      await tellSecurity(trx, userId, 'password_reset');
    });
  }

  async confirmEmail(secret: string): Promise<void> {
    await inTransaction(this.db, async (trx) => {
      const { userId, newEmail } = await useAccountLink(trx, 'email_change', secret);
      const { email: from } = (await findUserById(trx, userId))!;
      await trx('users').where({ id: userId }).update({ email: newEmail }).catch(takenOrWorse);
      await trx('account_links').where({ user_id: userId, purpose: 'password_reset' }).whereNull('used_at').delete();
      await addAudit(trx, { userId, programmeId: null, action: 'email_changed', subject: userId, facts: { from, to: newEmail } });
      const detail = `It was ${from} and is ${newEmail} now.`;
      for (const address of [from, newEmail!]) await tellSecurity(trx, userId, 'email_changed', { address, detail });
    });
  }

  /** From the foot of a mail: good for turning off one kind of mail of one person. */
  async stopMail(secret: string): Promise<void> {
    const meant = readStopMailToken(this.config, secret);
    if (!meant) throw linkNotValid();
    const kinds = isChoosable(meant.kind) ? [meant.kind] : await this.dailyKinds(meant.userId);
    const rows = kinds.map((kind) => ({ user_id: meant.userId, kind, choice: 'never' }));
    if (rows.length) await this.db('mail_choices').insert(rows).onConflict(['user_id', 'kind']).merge();
  }

  /** A digest has many kinds; its link turns off those that come daily. */
  private async dailyKinds(userId: string): Promise<string[]> {
    const rows = await this.db('mail_outbox').where({ user_id: userId, digest: true }).distinct<{ kind: string }[]>('kind');
    return rows.map(({ kind }) => kind);
  }
}
