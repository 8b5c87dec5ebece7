import type { AnalysisStep } from '@foreveil/shared';
import type { Knex } from 'knex';
import { inTransaction } from '../../../database/transaction.js';
import { sayEvent } from '../../events/say-event.js';
import type { Claim } from './claim.js';

const mine = (db: Knex, { id, token }: Claim) => db('analyses').where({ id, attempt_token: token, phase: 'EXECUTING' });

/** A sign of life. @returns whether the analysis is still ours; when not, it was cancelled or another worker has it */
export async function beat(db: Knex, claim: Claim): Promise<boolean> {
  return (await mine(db, claim).update({ heartbeat_at: db.fn.now() })) === 1;
}

/** @returns whether the analysis is still ours */
export function writeProgress(db: Knex, claim: Claim, step: AnalysisStep, progress: number): Promise<boolean> {
  return inTransaction(db, async (trx) => {
    if ((await mine(trx, claim).update({ step, progress, heartbeat_at: trx.fn.now() })) !== 1) return false;
    await sayEvent(trx, { kind: 'analysis', programmeId: claim.programmeId, id: claim.id });
    return true;
  });
}

/** Ends the analysis with a reason, if it is still ours. */
export function writeError(db: Knex, claim: Claim, error: string): Promise<void> {
  return inTransaction(db, async (trx) => {
    const ended = await mine(trx, claim).update({ phase: 'ERROR', error, attempt_token: null, ended_at: trx.fn.now() });
    if (ended) await sayEvent(trx, { kind: 'analysis', programmeId: claim.programmeId, id: claim.id });
  });
}

/** Gives an analysis back unharmed, as when its worker is asked to stop: the attempt does not count. */
export function release(db: Knex, claim: Claim): Promise<void> {
  return inTransaction(db, async (trx) => {
    const back = { phase: 'QUEUED', attempt_token: null, attempts: trx.raw('attempts - 1'), progress: 0, step: null };
    if (await mine(trx, claim).update(back)) await sayEvent(trx, { kind: 'analysis', programmeId: claim.programmeId, id: claim.id });
  });
}
