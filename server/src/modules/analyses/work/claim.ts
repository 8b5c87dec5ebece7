import { randomUUID } from 'node:crypto';
import type { AnalysisSettings } from '@foreveil/shared';
import type { Knex } from 'knex';
import { inTransaction } from '../../../database/transaction.js';
import { sayEvent } from '../../events/say-event.js';

/** What a worker needs to know about the analysis it took, and the token that lets it write. */
export interface Claim {
  readonly id: string;
  readonly programmeId: string;
  readonly spectrumId: string;
  readonly lineListId: string;
  readonly settings: AnalysisSettings;
  readonly token: string;
}

export const MOST_ATTEMPTS = 3;
const GIVEN_UP = `The analysis was tried ${MOST_ATTEMPTS} times, and each time its worker ended before it was done.`;

const CLAIM = { id: 'id', programmeId: 'programme_id', spectrumId: 'spectrum_id', lineListId: 'line_list_id', settings: 'settings' };

/**
 * Takes an analysis for a new attempt. Whoever held it before can no longer write: the token is a new one.
 * @returns null when there is nothing to do: it was cancelled, has ended, or was tried too often, which then is its end
 */
export function claim(db: Knex, id: string): Promise<Claim | null> {
  return inTransaction(db, async (trx) => {
    const row = await trx('analyses')
      .where({ id })
      .whereIn('phase', ['QUEUED', 'EXECUTING'])
      .forUpdate()
      .first<Row | undefined>(CLAIM, 'attempts');
    if (!row) return null;
    const { attempts, ...facts } = row;
    if (attempts >= MOST_ATTEMPTS) {
      await trx('analyses').where({ id }).update({ phase: 'ERROR', error: GIVEN_UP, attempt_token: null, ended_at: trx.fn.now() });
      await sayEvent(trx, { kind: 'analysis', programmeId: facts.programmeId, id });
      return null;
    }
    const token = randomUUID();
    const now = trx.fn.now();
    const begun = {
      phase: 'EXECUTING',
      attempts: attempts + 1,
      attempt_token: token,
      heartbeat_at: now,
      started_at: now,
      progress: 0,
      step: null,
    };
    await trx('analyses').where({ id }).update(begun);
    await sayEvent(trx, { kind: 'analysis', programmeId: facts.programmeId, id });
    return { ...facts, token };
  });
}

type Row = Omit<Claim, 'token'> & { attempts: number };
