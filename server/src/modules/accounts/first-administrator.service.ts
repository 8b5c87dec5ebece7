import { randomBytes } from 'node:crypto';
import { Inject, Injectable } from '@nestjs/common';
import type { Knex } from 'knex';
import { hashSecret } from '../../common/auth/one-time.js';
import { hashPassword } from '../../common/auth/password.js';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { KNEX } from '../../database/knex.js';
import { inTransaction, type Trx } from '../../database/transaction.js';
import { linkNotValid } from './account-links.js';
import type { ClaimDto } from './dto/accounts.dto.js';
import { checkPassword, createAccount } from './new-account.js';

const GOOD_FOR_HOURS = 24;

/** A new installation has no account. Whoever sees the console of the server is believed, once. */
@Injectable()
export class FirstAdministratorService {
  constructor(
    @Inject(KNEX) private readonly db: Knex,
    @Inject(CONFIG) private readonly config: Config,
  ) {}

  /** @returns the address to print, with a secret that works once within a day; null when the site has an administrator */
  invite(): Promise<string | null> {
    return inTransaction(this.db, async (trx) => {
      if (await hasAdministrator(trx)) return null;
      const secret = randomBytes(24).toString('base64url');
      await trx('first_administrator_secrets').whereRaw('expires_at < now()').delete();
      await trx('first_administrator_secrets').insert({
        secret_hash: hashSecret(secret),
        expires_at: trx.raw(`now() + ? * interval '1 hour'`, [GOOD_FOR_HOURS]),
      });
      return `${this.config.linkOrigin}/first-administrator#${secret}`;
    });
  }

  /** @throws link_not_valid when the secret is unknown, too old, or the site has an administrator by now */
  async claim({ secret, email, name, password }: ClaimDto): Promise<void> {
    checkPassword(password, [email, name]);
    const passwordHash = await hashPassword(password, this.config);
    await inTransaction(this.db, async (trx) => {
      await trx.raw('lock table first_administrator_secrets in exclusive mode'); // two claims at once: the second sees the first
      const known = await trx('first_administrator_secrets')
        .where({ secret_hash: hashSecret(secret) })
        .whereRaw('expires_at > now()')
        .first('secret_hash');
      if (!known || (await hasAdministrator(trx))) throw linkNotValid();
      await createAccount(trx, { email, name, passwordHash, administrator: true });
      await trx('first_administrator_secrets').delete();
    });
  }
}

const hasAdministrator = async (trx: Trx): Promise<boolean> =>
  (await trx('users').where({ administrator: true, active: true }).first('id')) !== undefined;
