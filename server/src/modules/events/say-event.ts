import type { Knex } from 'knex';

/** What happened, by id only: a notification holds 8000 bytes, and whoever hears it reads the row as it is then. */
export type Said =
  | { readonly kind: 'analysis'; readonly programmeId: string; readonly id: string }
  | { readonly kind: 'identification'; readonly programmeId: string; readonly id: string }
  | { readonly kind: 'spectrum'; readonly programmeId: string; readonly id: string }
  | { readonly kind: 'analysis_recipes'; readonly programmeId: string }
  | { readonly kind: 'comparison'; readonly programmeId: string; readonly id: string }
  | { readonly kind: 'cloud'; readonly programmeId: string; readonly id: string }
  /** the name, the members or their roles changed, or the programme was deleted */
  | { readonly kind: 'programme'; readonly programmeId: string }
  | { readonly kind: 'session_ended'; readonly sessionId: string }
  | { readonly kind: 'analysis_cancelled'; readonly id: string };

export const EVENTS_CHANNEL = 'foreveil_events';

/** Tells every process; within a transaction, when and only when it commits. */
export async function sayEvent(db: Knex, said: Said): Promise<void> {
  await db.raw('select pg_notify(?, ?)', [EVENTS_CHANNEL, JSON.stringify(said)]);
}

export const parseSaid = (payload: string): Said => JSON.parse(payload) as Said;
