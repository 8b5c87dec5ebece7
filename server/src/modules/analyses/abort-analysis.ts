import type { Knex } from 'knex';
import type { Scope } from '../../common/scope.js';

/** Ends an analysis that has not ended yet, and takes its worker the right to write. @returns whether there was anything to end */
export async function abortAnalysis(db: Knex, { programmeId }: Scope, id: string): Promise<boolean> {
  const ended = await db('analyses')
    .where({ programme_id: programmeId, id })
    .whereIn('phase', ['QUEUED', 'EXECUTING'])
    .update({ phase: 'ABORTED', attempt_token: null, ended_at: db.fn.now() });
  return ended === 1;
}
