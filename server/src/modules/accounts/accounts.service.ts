import { Inject, Injectable } from '@nestjs/common';
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
import { findActiveUser, openSession, setPasswordHash, type UserRow } from './accounts.repository.js';
import { endSessions } from './end-sessions.js';
import { SecondFactorService } from './second-factor/second-factor.service.js';

@Injectable()
export class AccountsService {
  /** compared against when there is no such account, so that both cases take the same time */
  private readonly nobody: Promise<string>;

  constructor(
    @Inject(KNEX) private readonly db: Knex,
    @Inject(CONFIG) private readonly config: Config,
    private readonly secondFactor: SecondFactorService,
  ) {
    this.nobody = unmatchable(config);
  }

  /** @param device what the browser says of itself @returns what the cookie has to carry, always of a new session */
  async signIn({ email, password, code }: SignIn, device: string): Promise<{ claims: Claims; me: Me }> {
    const user = await findActiveUser(this.db, email);
    const right = await matchesPassword(password, user?.password_hash ?? (await this.nobody), this.config);
    if (!user || !right) {
      await addAudit(this.db, { userId: user?.id ?? null, programmeId: null, action: 'sign_in_refused', subject: 'account', facts: {} });
      throw new DomainError('wrong_credentials', 'The e-mail address or the password is not right.');
    }
    await this.secondFactor.pass(user.id, code);
    if (isOutdated(user.password_hash, this.config)) await setPasswordHash(this.db, user.id, await hashPassword(password, this.config));
    return { claims: await this.open(user.id, device), me: meOf(user) };
  }

  /** A session for a person who has shown who they are. */
  open(userId: string, device: string): Promise<Claims> {
    return inTransaction(this.db, async (trx) => {
      await addAudit(trx, { userId, programmeId: null, action: 'sign_in', subject: userId, facts: {} });
      return { sub: userId, sid: await openSession(trx, userId, device, this.config.sessionHours), gen: 1 };
    });
  }

  /** Ends the session everywhere, open event streams included. */
  async signOut({ userId, sessionId }: Actor): Promise<void> {
    await inTransaction(this.db, async (trx) => {
      await endSessions(trx, userId, { only: sessionId });
      await addAudit(trx, { userId, programmeId: null, action: 'sign_out', subject: userId, facts: {} });
    });
  }
}

const meOf = ({ id, email, name, administrator }: UserRow): Me => ({ id, email, name, administrator });
