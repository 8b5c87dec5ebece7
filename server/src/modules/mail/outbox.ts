import { randomUUID } from 'node:crypto';
import type { Knex } from 'knex';
import { inTransaction } from '../../database/transaction.js';
import type { MailFacts, MailKind } from './facts.js';

export interface OutboxRow {
  readonly id: string;
  readonly user_id: string | null;
  readonly programme_id: string | null;
  readonly to_address: string;
  readonly kind: MailKind;
  readonly facts: MailFacts[MailKind];
  readonly digest: boolean;
  readonly attempts: number;
  readonly created_at: Date;
}

/** Rows of one message, held by one sender until its time is up. */
export interface Parcel {
  readonly token: string;
  /** one row, or those of one person's digest */
  readonly rows: readonly OutboxRow[];
}

/** A sender that is not done after this long has lost its rows. Longer than all time limits of one SMTP dialogue together. */
const HOLD_SECONDS = 120;
const GIVE_UP_HOURS = 48;
const LONGEST_WAIT_SECONDS = 3600;
const DIGEST_MOST = 500;

/** Takes the message that is due longest; null when none is. Two senders never take the same. */
export function takeDue(db: Knex): Promise<Parcel | null> {
  return inTransaction(db, async (trx) => {
    const due = () => trx('mail_outbox').where({ status: 'waiting' }).whereRaw('due_at <= now()').forUpdate().skipLocked();
    const first = await due().orderBy('due_at').first<OutboxRow>();
    if (!first) return null;
    const others = first.digest
      ? await due()
          .where({ digest: true, to_address: first.to_address })
          .whereNot({ id: first.id })
          .orderBy('created_at')
          .limit(DIGEST_MOST)
          .select<OutboxRow[]>()
      : [];
    const rows = [first, ...others];
    const token = randomUUID();
    await trx('mail_outbox')
      .whereIn('id', ids(rows))
      .update({
        ...{ status: 'sending', claim_token: token, handed_at: null, attempts: trx.raw('attempts + 1') },
        claimed_until: trx.raw(`now() + ? * interval '1 second'`, [HOLD_SECONDS]),
      });
    return { token, rows: rows.map((row) => ({ ...row, attempts: row.attempts + 1 })) };
  });
}

const ids = (rows: readonly OutboxRow[]): string[] => rows.map(({ id }) => id);
const held = (db: Knex, { rows, token }: Parcel) =>
  db('mail_outbox').whereIn('id', ids(rows)).where({ status: 'sending', claim_token: token });
const ENDED = (db: Knex) => ({ claim_token: null, claimed_until: null, ended_at: db.fn.now() });

/** From here on the message may arrive. @returns false when the rows are no longer held: nothing may be sent then */
export async function markHanded(db: Knex, parcel: Parcel): Promise<boolean> {
  return (await held(db, parcel).update({ handed_at: db.fn.now() })) === parcel.rows.length;
}

export const markSent = (db: Knex, parcel: Parcel) => held(db, parcel).update({ status: 'sent', ...ENDED(db) });
export const markUnconfirmed = (db: Knex, parcel: Parcel, error: string) =>
  held(db, parcel).update({ status: 'unconfirmed', last_error: error, ...ENDED(db) });
export const markFailed = (db: Knex, parcel: Parcel, error: string) =>
  held(db, parcel).update({ status: 'failed', last_error: error, ...ENDED(db) });

/** Tries again later, each time twice as late; gives up after two days. */
export async function putBack(db: Knex, parcel: Parcel, error: string, firstWaitSeconds: number): Promise<void> {
  const oldest = Math.min(...parcel.rows.map(({ created_at: at }) => at.getTime()));
  if (!parcel.rows[0]!.digest && Date.now() - oldest > GIVE_UP_HOURS * 3_600_000) return void (await markFailed(db, parcel, error));
  const attempts = Math.max(...parcel.rows.map((row) => row.attempts));
  const seconds = Math.min(firstWaitSeconds * 2 ** (attempts - 1), LONGEST_WAIT_SECONDS);
  await held(db, parcel).update({
    ...{ status: 'waiting', claim_token: null, claimed_until: null, handed_at: null, last_error: error },
    due_at: db.raw(`now() + ? * interval '1 second'`, [seconds]),
  });
}

/** Takes back what senders left that died: what had not been handed over waits again, of the rest nobody knows whether it arrived. */
export async function takeBackLost(db: Knex): Promise<void> {
  const lost = () => db('mail_outbox').where({ status: 'sending' }).whereRaw('claimed_until < now()');
  await lost().whereNull('handed_at').update({ status: 'waiting', claim_token: null, claimed_until: null });
  await lost()
    .whereNotNull('handed_at')
    .update({ status: 'unconfirmed', last_error: 'the sender ended before the mail server answered', ...ENDED(db) });
}

/** Leaves out what its reader may not see any more: of closed accounts, and of programmes that they are not in. @returns the rest */
export async function dropForbidden(db: Knex, parcel: Parcel): Promise<Parcel> {
  const forbidden = await held(db, parcel)
    .whereNotNull('programme_id')
    .whereNotNull('user_id')
    .whereNotExists(
      db('memberships as m')
        .join('users as u', 'u.id', 'm.user_id')
        .whereRaw('m.programme_id = mail_outbox.programme_id and m.user_id = mail_outbox.user_id and u.active'),
    )
    .pluck('id');
  if (!forbidden.length) return parcel;
  const gone = new Set(forbidden);
  const [out, rest] = [parcel.rows.filter(({ id }) => gone.has(id)), parcel.rows.filter(({ id }) => !gone.has(id))];
  await held(db, { ...parcel, rows: out }).update({ status: 'dropped', last_error: 'not a member any more', ...ENDED(db) });
  return { ...parcel, rows: rest };
}
