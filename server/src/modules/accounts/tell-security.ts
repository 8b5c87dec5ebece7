import { randomUUID } from 'node:crypto';
import type { Trx } from '../../database/transaction.js';
import type { SecurityChange } from '../mail/facts.js';
import { queueMail } from '../mail/queue-mail.js';

/** Tells a person of a change to their account. @param address where else than at the account's own address */
export const tellSecurity = (
  trx: Trx,
  userId: string,
  what: SecurityChange,
  more: { detail?: string; address?: string } = {},
): Promise<void> =>
  queueMail(trx, {
    kind: 'security',
    userId,
    ...(more.address ? { address: more.address } : {}),
    facts: { what, at: new Date().toISOString(), ...(more.detail ? { detail: more.detail } : {}) },
    dedupeKey: `${what} ${randomUUID()}`,
  });
