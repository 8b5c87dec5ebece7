import { isUUID } from 'class-validator';
import type { Knex } from 'knex';
import { tokenHolds } from './access-tokens.js';
import type { Actor } from './actor.js';
import type { Claims } from './session-token.js';

/** What a cookie opens. `next`: the generation to put into a new cookie. */
export type Opened =
  { readonly end: 'open'; readonly actor: Actor; readonly next: number | null } | { readonly end: 'closed' } | { readonly end: 'replayed' };

interface Row {
  readonly name: string;
  readonly email: string;
  readonly administrator: boolean;
  readonly generation: number;
  readonly stale: boolean;
  readonly old: boolean;
  readonly unconfirmed: boolean;
  readonly just_confirmed: boolean;
}

/** Requests that were on their way with the former cookie while the new one came into use. */
const CROSSING_SECONDS = 60;

/**
 * Opens the session of a cookie. Its generation counts up every few minutes of use, with a new cookie; the former one is taken until the new
 * one was seen in use, as an answer may be lost, and a minute after, as requests may cross. An older one can only be a copy, so the browser
 * that was robbed and the robber both lose the session.
 */
export async function openSession(
  db: Knex,
  { sub, sid, gen }: Claims,
  limits: { idleMinutes: number; rotateMinutes: number },
): Promise<Opened> {
  if (!isUUID(sid) || !isUUID(sub) || !Number.isInteger(gen)) return { end: 'closed' };
  const row = await live(db, limits.idleMinutes)
    .where({ 's.id': sid, 's.user_id': sub })
    .first<Row>(
      { name: 'u.name', email: 'u.email', administrator: 'u.administrator', generation: 's.generation' },
      db.raw(`s.last_seen_at < now() - interval '1 minute' as stale`),
      db.raw(`s.rotated_at < now() - ? * interval '1 minute' as old`, [limits.rotateMinutes]),
      db.raw('s.confirmed_at is null as unconfirmed'),
      db.raw(`s.confirmed_at > now() - ? * interval '1 second' as just_confirmed`, [CROSSING_SECONDS]),
    );
  if (!row) return { end: 'closed' };
  const present = gen === row.generation;
  const former = gen === row.generation - 1 && (row.unconfirmed || row.just_confirmed);
  if (!present && !former) return { end: gen < row.generation ? 'replayed' : 'closed' };
  if (present && row.unconfirmed) await db('sessions').where({ id: sid, generation: gen }).update({ confirmed_at: db.fn.now() });
  if (row.stale) await db('sessions').where({ id: sid }).update({ last_seen_at: db.fn.now() });
  const { name, email, administrator } = row;
  const actor: Actor = { userId: sub, sessionId: sid, name, email, administrator, token: null };
  const next = present && row.old ? await rotate(db, sid, gen) : former && row.unconfirmed ? row.generation : null;
  return { end: 'open', actor, next };
}

/** @returns the new generation; null when another request was quicker */
async function rotate(db: Knex, id: string, generation: number): Promise<number | null> {
  const changed = await db('sessions')
    .where({ id, generation })
    .update({ generation: generation + 1, rotated_at: db.fn.now(), confirmed_at: null });
  return changed ? generation + 1 : null;
}

/** Whether the actor of an open event stream still holds what it was opened with, without counting as use. */
export async function actorHolds(db: Knex, { sessionId, token }: Actor, idleMinutes: number): Promise<boolean> {
  if (token) return tokenHolds(db, token.id);
  return (await live(db, idleMinutes).where({ 's.id': sessionId }).first('s.id')) !== undefined;
}

const live = (db: Knex, idleMinutes: number) =>
  db('sessions as s')
    .join('users as u', 'u.id', 's.user_id')
    .where({ 'u.active': true })
    .whereRaw('s.expires_at > now()')
    .whereRaw(`s.last_seen_at > now() - ? * interval '1 minute'`, [idleMinutes]);
