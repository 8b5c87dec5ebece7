import { Inject, Injectable } from '@nestjs/common';
import { JwtService } from '@nestjs/jwt';
import type { Me, SignIn } from '@foreveil/shared';
import type { Knex } from 'knex';
import type { Actor } from '../../common/auth/actor.js';
import { hashPassword, isOutdated, matchesPassword, unmatchable } from '../../common/auth/password.js';
import type { Claims } from '../../common/auth/session-token.js';
import { DomainError } from '../../common/errors/domain-error.js';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { KNEX } from '../../database/knex.js';
import { inTransaction } from '../../database/transaction.js';
import { addAudit } from '../audit/add-audit.js';
import { sayEvent } from '../events/say-event.js';
import { closeSession, findActiveUser, openSession, setPasswordHash } from './accounts.repository.js';

@Injectable()
export class AccountsService {
  /** compared against when there is no such account, so that both cases take the same time */
  private readonly nobody: Promise<string>;

  constructor(
    @Inject(KNEX) private readonly db: Knex,
    @Inject(CONFIG) private readonly config: Config,
    private readonly jwt: JwtService,
  ) {
    this.nobody = unmatchable(config);
  }

  /** @returns the signed token for the cookie, always of a new session */
  async signIn({ email, password }: SignIn): Promise<{ token: string; me: Me }> {
    const user = await findActiveUser(this.db, email);
    const right = await matchesPassword(password, user?.password_hash ?? (await this.nobody), this.config);
    if (!user || !right) {
      await addAudit(this.db, { userId: user?.id ?? null, programmeId: null, action: 'sign_in_refused', subject: 'account', facts: {} });
      throw new DomainError('wrong_credentials', 'The e-mail address or the password is not right.');
    }
    if (isOutdated(user.password_hash, this.config)) await setPasswordHash(this.db, user.id, await hashPassword(password, this.config));
    const sid = await inTransaction(this.db, async (trx) => {
      await addAudit(trx, { userId: user.id, programmeId: null, action: 'sign_in', subject: user.id, facts: {} });
      return openSession(trx, user.id, this.config.sessionHours);
    });
    const claims: Claims = { sub: user.id, sid };
    return { token: await this.jwt.signAsync(claims), me: { id: user.id, email: user.email, name: user.name } };
  }

  /** Ends the session everywhere, open event streams included. */
  async signOut(actor: Actor): Promise<void> {
    await inTransaction(this.db, async (trx) => {
      await closeSession(trx, actor.sessionId);
      await addAudit(trx, { userId: actor.userId, programmeId: null, action: 'sign_out', subject: actor.userId, facts: {} });
      await sayEvent(trx, { kind: 'session_ended', sessionId: actor.sessionId });
    });
  }
}
