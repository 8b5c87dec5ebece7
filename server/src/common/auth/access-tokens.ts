import type { TokenScope } from '@foreveil/shared';
import type { IncomingHttpHeaders } from 'node:http';
import type { Knex } from 'knex';
import type { Actor } from './actor.js';
import { hashSecret } from './one-time.js';

/** Begins every token, so that one that lies around is recognised for what it is. */
export const TOKEN_PREFIX = 'fvt_';

/** The token of a script, from `Authorization: Bearer …`; null when the request carries no such header. */
export function bearerOf({ authorization }: IncomingHttpHeaders): string | null {
  return authorization === undefined ? null : (/^Bearer ([\w-]{1,200})$/i.exec(authorization)?.[1] ?? '');
}

interface Row {
  readonly id: string;
  readonly scope: TokenScope;
  readonly user_id: string;
  readonly name: string;
  readonly email: string;
  readonly stale: boolean;
}

/** The person of a token that still holds, or null. Marked as used, once a minute at most. */
export async function tokenActor(db: Knex, token: string): Promise<Actor | null> {
  if (!token.startsWith(TOKEN_PREFIX)) return null;
  const row = await db('access_tokens as t')
    .join('users as u', 'u.id', 't.user_id')
    .where({ 't.secret_hash': hashSecret(token), 'u.active': true })
    .whereRaw('t.expires_at > now()')
    .first<Row>(
      { id: 't.id', scope: 't.scope', user_id: 'u.id', name: 'u.name', email: 'u.email' },
      db.raw(`coalesce(t.last_used_at < now() - interval '1 minute', true) as stale`),
    );
  if (!row) return null;
  if (row.stale) await db('access_tokens').where({ id: row.id }).update({ last_used_at: db.fn.now() });
  const { id, scope, user_id: userId, name, email } = row;
  return { userId, name, email, administrator: false, sessionId: '', token: { id, scope } };
}

/** Whether the token of an open event stream still holds. */
export async function tokenHolds(db: Knex, id: string): Promise<boolean> {
  const row = await db('access_tokens as t')
    .join('users as u', 'u.id', 't.user_id')
    .where({ 't.id': id, 'u.active': true })
    .whereRaw('t.expires_at > now()')
    .first('t.id');
  return row !== undefined;
}
