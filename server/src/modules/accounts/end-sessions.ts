import type { Trx } from '../../database/transaction.js';
import { sayEvent } from '../events/say-event.js';

/** Ends sessions of a person at once, open event streams included. @param which ids; left out: all @returns how many there were */
export async function endSessions(trx: Trx, userId: string, which: { only?: string; butNot?: string } = {}): Promise<number> {
  const ended = await trx('sessions')
    .where({ user_id: userId })
    .modify((query) => void (which.only && query.where({ id: which.only })))
    .modify((query) => void (which.butNot && query.whereNot({ id: which.butNot })))
    .delete()
    .returning<{ id: string }[]>('id');
  for (const { id } of ended) await sayEvent(trx, { kind: 'session_ended', sessionId: id });
  return ended.length;
}
