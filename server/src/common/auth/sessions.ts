import { isUUID } from 'class-validator';
import type { Knex } from 'knex';
import type { Actor } from './actor.js';
import type { Claims } from './session-token.js';

/** The person of a session that still holds, or null. A session in use is marked as seen, once a minute at most. */
export async function liveSession(db: Knex, { sub, sid }: Claims, idleMinutes: number): Promise<Actor | null> {
  if (!isUUID(sid) || !isUUID(sub)) return null;
  const row = await db('sessions as s')
    .join('users as u', 'u.id', 's.user_id')
    .where({ 's.id': sid, 's.user_id': sub, 'u.active': true })
    .whereRaw('s.expires_at > now()')
    .whereRaw(`s.last_seen_at > now() - ? * interval '1 minute'`, [idleMinutes])
    .first<{ name: string; email: string; stale: boolean }>(
      'u.name',
      'u.email',
      db.raw(`s.last_seen_at < now() - interval '1 minute' as stale`),
    );
  if (!row) return null;
  if (row.stale) await db('sessions').where({ id: sid }).update({ last_seen_at: db.fn.now() });
  return { userId: sub, sessionId: sid, name: row.name, email: row.email };
}

/** Whether the session of `actor` still holds, without counting as use: an open event stream does not keep a session alive. */
export async function sessionHolds(db: Knex, actor: Actor, idleMinutes: number): Promise<boolean> {
  const row = await db('sessions as s')
    .join('users as u', 'u.id', 's.user_id')
    .where({ 's.id': actor.sessionId, 'u.active': true })
    .whereRaw('s.expires_at > now()')
    .whereRaw(`s.last_seen_at > now() - ? * interval '1 minute'`, [idleMinutes])
    .first('s.id');
  return row !== undefined;
}
