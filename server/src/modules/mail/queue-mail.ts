import { CHOOSABLE_MAIL, type ChoosableMail, type MailChoice } from '@foreveil/shared';
import type { Knex } from 'knex';
import { tidy } from '../../common/http/tidy.js';
import type { Trx } from '../../database/transaction.js';
import type { MailFacts, MailKind } from './facts.js';

export interface Mail<K extends MailKind> {
  readonly kind: K;
  readonly facts: MailFacts[K];
  /** names the event: telling the same person of it again changes nothing */
  readonly dedupeKey: string;
  /** a person, at the address of their account; `address` overrules it, and is enough where there is no account yet */
  readonly userId?: string;
  readonly address?: string;
  /** what a member is told as a member: it is not sent any more once they are none */
  readonly programmeId?: string;
}

/**
 * Puts a message into the outbox, in the transaction of the event it tells of: both are there or neither. What the person chose for this
 * kind decides whether and when; closed accounts are told nothing.
 */
export async function queueMail<K extends MailKind>(trx: Trx, mail: Mail<K>): Promise<void> {
  const { kind, facts, dedupeKey, userId, programmeId } = mail;
  const person = userId ? await recipient(trx, userId, kind) : null;
  if (userId && !person) return;
  const address = mail.address ?? person?.email;
  if (!address) throw new Error('a mail needs a person or an address');
  if (person?.choice === 'never') return;
  const digest = person?.choice === 'daily';
  await trx('mail_outbox')
    .insert({
      ...{ user_id: userId ?? null, programme_id: programmeId ?? null, to_address: address, kind, facts: asJson(facts), digest },
      dedupe_key: `${kind}:${dedupeKey}:${address}`,
      ...(digest ? { due_at: trx.raw(NEXT_DIGEST) } : {}),
    })
    .onConflict('dedupe_key')
    .ignore();
}

/** Digests go out once a day, at seven in the morning UTC. */
const NEXT_DIGEST = `(date_trunc('day', now() at time zone 'utc' + interval '17 hours') + interval '7 hours') at time zone 'utc'`;

/** What cannot be stored or would only hide something is taken out of people's words here, once for all letters. */
const asJson = (facts: object): string => JSON.stringify(facts, (_, value: unknown) => (typeof value === 'string' ? tidy(value) : value));

async function recipient(db: Knex, userId: string, kind: MailKind): Promise<{ email: string; choice: MailChoice } | null> {
  const row = await db('users as u')
    .leftJoin('mail_choices as c', (join) => void join.on('c.user_id', 'u.id').andOnVal('c.kind', kind))
    .where({ 'u.id': userId, 'u.active': true })
    .first<{ email: string; choice: MailChoice | null }>('u.email', 'c.choice');
  if (!row) return null;
  return { email: row.email, choice: isChoosable(kind) ? (row.choice ?? CHOOSABLE_MAIL[kind]) : 'at_once' };
}

export const isChoosable = (kind: string): kind is ChoosableMail => Object.hasOwn(CHOOSABLE_MAIL, kind);
