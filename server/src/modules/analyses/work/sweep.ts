import type { Knex } from 'knex';
import type PgBoss from 'pg-boss';
import { inTransaction } from '../../../database/transaction.js';
import { ANALYSE_QUEUE, sendAnalyseJob } from '../job-queue.js';

interface Stray {
  readonly id: string;
  readonly jobId: string | null;
  readonly jobState: string | null;
}

/**
 * Finds analyses that nobody works on though they have not ended: the worker at it gives no sign of life, or died between taking the job and
 * the analysis, or the job is gone. Their job is handed back, or a new one is sent, so that another worker takes them.
 * @returns how many were found
 */
export function sweep(db: Knex, boss: PgBoss, leaseSeconds: number, analysisSeconds: number): Promise<number> {
  return inTransaction(db, async (trx) => {
    const { rows } = await trx.raw<{ rows: Stray[] }>(STRAYS, { lease: leaseSeconds });
    for (const { id, jobId, jobState } of rows) {
      if (jobState === 'active') await boss.fail(ANALYSE_QUEUE, jobId!, { message: 'its worker gives no sign of life' });
      else {
        const sent = await sendAnalyseJob(trx, { analysisId: id }, analysisSeconds);
        await trx('analyses').where({ id }).update({ job_id: sent });
      }
    }
    return rows.length;
  });
}

const STRAYS = `
  select a.id, a.job_id as "jobId", j.state as "jobState"
  from analyses a left join jobs.job j on j.name = '${ANALYSE_QUEUE}' and j.id = a.job_id
  where a.phase in ('QUEUED', 'EXECUTING')
    and coalesce(a.heartbeat_at, a.requested_at) < now() - :lease * interval '1 second'
    and (
      j.state is null or j.state not in ('created', 'retry', 'active')
      or (j.state = 'active' and j.started_on < now() - :lease * interval '1 second'))
  for update of a skip locked`;
