import { createHmac } from 'node:crypto';
import { Inject, Injectable } from '@nestjs/common';
import type { Account, RecoveryCodes, SecondFactorOffer } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../../common/auth/actor.js';
import { DomainError } from '../../../common/errors/domain-error.js';
import type { Config } from '../../../config/config.js';
import { CONFIG } from '../../../config/config.module.js';
import { KNEX } from '../../../database/knex.js';
import { inTransaction, type Trx } from '../../../database/transaction.js';
import { addAudit } from '../../audit/add-audit.js';
import type { SecurityChange } from '../../mail/facts.js';
import { tellSecurity } from '../tell-security.js';
import { newRecoveryCodes, newSecret, plainRecoveryCode, stepOf, uriOf } from './codes.js';
import { seal, unseal } from './sealed.js';

interface Row {
  readonly sealed_secret: string;
  readonly failures: number;
  readonly blocked: boolean;
}

/** Wrong codes in a row, from wherever they come, before the account's second door stays shut for a while. */
const MOST_FAILURES = 10;
const BLOCK_MINUTES = 15;

@Injectable()
export class SecondFactorService {
  constructor(
    @Inject(KNEX) private readonly db: Knex,
    @Inject(CONFIG) private readonly config: Config,
  ) {}

  async state(db: Knex, userId: string): Promise<Account['secondFactor']> {
    const on = (await db('second_factors').where({ user_id: userId }).whereNotNull('confirmed_at').first('user_id')) !== undefined;
    const left = await db('recovery_codes')
      .where({ user_id: userId })
      .whereNull('used_at')
      .count<{ count: string }[]>('* as count')
      .first();
    return { on, recoveryCodesLeft: on ? Number(left?.count ?? 0) : 0 };
  }

  /** The second door of signing in. @throws second_factor_needed, wrong_code, too_many_requests; passes where there is no second factor */
  async pass(userId: string, code: string | undefined): Promise<void> {
    const passed = await inTransaction(this.db, async (trx) => {
      const row = await this.lock(trx, userId, true);
      if (!row) return true;
      if (code === undefined) throw new DomainError('second_factor_needed', 'This account asks for a code.');
      if (row.blocked)
        throw new DomainError('too_many_requests', `Too many wrong codes. Try again in ${BLOCK_MINUTES} minutes.`, {
          retryAfter: BLOCK_MINUTES * 60,
        });
      const right = (await this.useCode(trx, userId, row, code)) || (await this.useRecoveryCode(trx, userId, code));
      await trx('second_factors')
        .where({ user_id: userId })
        .update(right ? { failures: 0, blocked_until: null } : { failures: row.failures + 1 });
      if (!right && row.failures + 1 >= MOST_FAILURES) await this.block(trx, userId);
      if (!right) await addAudit(trx, { userId, programmeId: null, action: 'second_factor_refused', subject: userId, facts: {} });
      return right; // a refusal is thrown outside, so that what was counted stays
    });
    if (!passed) throw wrongCode();
  }

  /** Begins: the secret counts once a code made with it was shown. */
  async offer(actor: Actor): Promise<SecondFactorOffer> {
    const secret = newSecret();
    const made = await this.db('second_factors')
      .insert({ user_id: actor.userId, sealed_secret: seal(this.config, secret) })
      .onConflict('user_id')
      .merge(['sealed_secret'])
      .whereNull('second_factors.confirmed_at')
      .returning('user_id');
    if (!made.length) throw new DomainError('bad_transition', 'The second factor is on already. Turn it off first.');
    return { secret, uri: uriOf(secret, actor.email) };
  }

  confirm(actor: Actor, code: string): Promise<RecoveryCodes> {
    return inTransaction(this.db, async (trx) => {
      const row = await this.lock(trx, actor.userId, false);
      if (!row) throw new DomainError('bad_transition', 'Begin with a new code for your app.');
      if (!(await this.useCode(trx, actor.userId, row, code))) throw wrongCode();
      await trx('second_factors').where({ user_id: actor.userId }).update({ confirmed_at: trx.fn.now(), failures: 0 });
      return this.renew(trx, actor, 'second_factor_on');
    });
  }

  renewCodes(actor: Actor): Promise<RecoveryCodes> {
    return inTransaction(this.db, async (trx) => {
      if (!(await this.lock(trx, actor.userId, true))) throw new DomainError('bad_transition', 'The second factor is not on.');
      return this.renew(trx, actor, 'recovery_codes_renewed');
    });
  }

  async end({ userId }: Actor): Promise<void> {
    await inTransaction(this.db, async (trx) => {
      if (!(await trx('second_factors').where({ user_id: userId }).delete())) return;
      await trx('recovery_codes').where({ user_id: userId }).delete();
      await this.told(trx, userId, 'second_factor_off');
    });
  }

  private async renew(trx: Trx, { userId }: Actor, what: SecurityChange): Promise<RecoveryCodes> {
    const codes = newRecoveryCodes();
    await trx('recovery_codes').where({ user_id: userId }).delete();
    await trx('recovery_codes').insert(codes.map((code) => ({ user_id: userId, code_hash: this.hash(code) })));
    await this.told(trx, userId, what);
    return { codes };
  }

  private async told(trx: Trx, userId: string, what: SecurityChange): Promise<void> {
    await addAudit(trx, { userId, programmeId: null, action: what, subject: userId, facts: {} });
    await tellSecurity(trx, userId, what);
  }

  private lock(trx: Trx, userId: string, confirmed: boolean): Promise<Row | undefined> {
    return trx('second_factors')
      .where({ user_id: userId })
      .whereRaw(`(confirmed_at is not null) = ?`, [confirmed])
      .forUpdate()
      .first<Row>('sealed_secret', 'failures', trx.raw('coalesce(blocked_until > now(), false) as blocked'));
  }

  /** Each step of time opens once: its code, seen over a shoulder, is worth nothing any more. */
  private async useCode(trx: Trx, userId: string, row: Row, code: string): Promise<boolean> {
    const step = stepOf(code, unseal(this.config, row.sealed_secret), Date.now());
    if (step === null) return false;
    return (await trx('second_factors').where({ user_id: userId }).where('last_step', '<', step).update({ last_step: step })) === 1;
  }

  private async useRecoveryCode(trx: Trx, userId: string, code: string): Promise<boolean> {
    const used = await trx('recovery_codes')
      .where({ user_id: userId, code_hash: this.hash(code) })
      .whereNull('used_at')
      .update({ used_at: trx.fn.now() });
    if (used) await this.told(trx, userId, 'recovery_code_used');
    return used === 1;
  }

  private block(trx: Trx, userId: string) {
    return trx('second_factors')
      .where({ user_id: userId })
      .update({ failures: 0, blocked_until: trx.raw(`now() + ? * interval '1 minute'`, [BLOCK_MINUTES]) });
  }

  /** Keyed: fifty bit alone could be tried out on a copy of the database. */
  private hash(code: string): string {
    return createHmac('sha256', this.config.passwordKey)
      .update(`recovery\n${plainRecoveryCode(code)}`)
      .digest('hex');
  }
}

const wrongCode = () => new DomainError('wrong_code', 'The code is not right. Codes change every half minute and work once.');
