import PgBoss from 'pg-boss';
import type { Trx } from '../../database/transaction.js';

export const JOBS_SCHEMA = 'jobs';
export const ANALYSE_QUEUE = 'analyse';

export interface AnalyseJob {
  readonly analysisId: string;
}

/**
 * An analysis is tried three times; the count is kept in its own row (see worker/claim.ts), because only there it survives whatever happens to
 * the job. The queue's own limit is only wide enough never to be the one that decides.
 */
const QUEUE_RETRIES = 20;

/** Time beyond the limit of an analysis after which the queue takes a job away from a worker that no longer answers. */
const EXPIRY_MARGIN_SECONDS = 60;

const nowhere: PgBoss.Db = { executeSql: () => Promise.reject(new Error('jobs are sent within a transaction')) };
const sender = new PgBoss({ db: nowhere, schema: JOBS_SCHEMA, supervise: false, schedule: false, migrate: false });

/** Queues a job in the transaction that makes what it works on, so that there is never one without the other. @returns the job's id */
export async function sendAnalyseJob(trx: Trx, job: AnalyseJob, analysisSeconds: number): Promise<string> {
  const id = await sender.send(ANALYSE_QUEUE, job, {
    db: { executeSql: (text, values) => onConnectionOf(trx, text, values) },
    expireInSeconds: analysisSeconds + EXPIRY_MARGIN_SECONDS,
    retryLimit: QUEUE_RETRIES,
    retryDelay: 0,
  });
  if (!id) throw new Error('the job queue did not take the job');
  return id;
}

export const COMPARE_QUEUE = 'compare';

export interface CompareJob {
  readonly comparisonId: string;
}

/** A comparison takes about a second; whoever holds one longer than this is gone. */
export const COMPARE_SECONDS = 120;

/** Queues a comparison; tries are counted in its own row, as those of an analysis are. */
export async function sendCompareJob(trx: Trx, job: CompareJob): Promise<void> {
  const id = await sender.send(COMPARE_QUEUE, job, {
    db: { executeSql: (text, values) => onConnectionOf(trx, text, values) },
    expireInSeconds: COMPARE_SECONDS + EXPIRY_MARGIN_SECONDS,
    retryLimit: QUEUE_RETRIES,
    retryDelay: 0,
  });
  if (!id) throw new Error('the job queue did not take the job');
}

interface Connection {
  query(text: string, values: unknown[]): Promise<{ rows: unknown[] }>;
}

/** pg-boss writes $1, knex writes ?: so its statements go past knex, on the connection of the transaction. */
async function onConnectionOf(trx: Trx, text: string, values: unknown[]): Promise<{ rows: unknown[] }> {
  const connection = (await (trx.client as { acquireConnection(): Promise<Connection> }).acquireConnection()) as Connection;
  return connection.query(text, values);
}
