import { randomBytes } from 'node:crypto';
import { Inject, Injectable } from '@nestjs/common';
import type { AccessToken, MadeAccessToken, NewAccessToken, TokenScope } from '@foreveil/shared';
import type { Knex } from 'knex';
import { TOKEN_PREFIX } from '../../common/auth/access-tokens.js';
import type { Actor } from '../../common/auth/actor.js';
import { hashSecret } from '../../common/auth/one-time.js';
import { DomainError, notFound } from '../../common/errors/domain-error.js';
import { KNEX } from '../../database/knex.js';
import { inTransaction } from '../../database/transaction.js';
import { tellSecurity } from '../accounts/tell-security.js';
import { addAudit } from '../audit/add-audit.js';

interface Row {
  readonly id: string;
  readonly name: string;
  readonly scope: TokenScope;
  readonly created_at: Date;
  readonly expires_at: Date;
  readonly last_used_at: Date | null;
}

const COLUMNS = ['id', 'name', 'scope', 'created_at', 'expires_at', 'last_used_at'] as const;
const MOST = 50;

@Injectable()
export class TokensService {
  constructor(@Inject(KNEX) private readonly db: Knex) {}

  async list({ userId }: Actor): Promise<AccessToken[]> {
    const rows = await this.db('access_tokens')
      .where({ user_id: userId })
      .orderBy('created_at', 'desc')
      .select<Row[]>(...COLUMNS);
    return rows.map(asToken);
  }

  make({ userId }: Actor, { name, scope, days }: NewAccessToken): Promise<MadeAccessToken> {
    const token = `${TOKEN_PREFIX}${randomBytes(32).toString('base64url')}`;
    return inTransaction(this.db, async (trx) => {
      await trx('access_tokens').where({ user_id: userId }).whereRaw(`expires_at < now() - interval '30 days'`).delete();
      const have = await trx('access_tokens').where({ user_id: userId }).count<{ count: string }[]>('* as count').first();
      if (Number(have?.count) >= MOST) throw new DomainError('invalid_request', `One may have ${MOST} access tokens. Revoke some first.`);
      const [row] = await trx('access_tokens')
        .insert({
          ...{ user_id: userId, name, scope, secret_hash: hashSecret(token) },
          expires_at: trx.raw(`now() + ? * interval '1 day'`, [days]),
        })
        .returning<Row[]>([...COLUMNS]);
      await addAudit(trx, { userId, programmeId: null, action: 'token_made', subject: row!.id, facts: { name, scope, days } });
      await tellSecurity(trx, userId, 'token_made', { detail: `Its name is “${name}”; it may ${scope}.` });
      return { ...asToken(row!), token };
    });
  }

  async revoke({ userId }: Actor, id: string): Promise<void> {
    await inTransaction(this.db, async (trx) => {
      const [row] = await trx('access_tokens').where({ id, user_id: userId }).delete().returning<{ name: string }[]>('name');
      if (!row) throw notFound();
      await addAudit(trx, { userId, programmeId: null, action: 'token_revoked', subject: id, facts: { name: row.name } });
    });
  }
}

const asToken = ({ id, name, scope, created_at: made, expires_at: ends, last_used_at: used }: Row): AccessToken => ({
  ...{ id, name, scope, createdAt: made.toISOString(), expiresAt: ends.toISOString() },
  lastUsedAt: used?.toISOString() ?? null,
});
