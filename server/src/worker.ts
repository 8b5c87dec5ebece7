import { setInterval as every } from 'node:timers/promises';
import PgBoss from 'pg-boss';
import { pino } from 'pino';
import { configOrExit } from './config/config-or-exit.js';
import { createKnex } from './database/knex.js';
import { Listener } from './database/listener.js';
import {
  ANALYSE_QUEUE,
  COMPARE_QUEUE,
  COMPARE_SECONDS,
  JOBS_SCHEMA,
  type AnalyseJob,
  type CompareJob,
} from './modules/analyses/job-queue.js';
import { AnalysisThread } from './modules/analyses/work/analysis-thread.js';
import { Cancellations } from './modules/analyses/work/cancellations.js';
import { sweep } from './modules/analyses/work/sweep.js';
import { workOnAnalysis } from './modules/analyses/work/work-on-analysis.js';
import { workOnComparison } from './modules/comparisons/work/work-on-comparison.js';
import { defaultLineListId, loadLineList } from './modules/linelists/line-list-store.js';
import { keepSending } from './modules/mail/keep-sending.js';
import { keepPurging } from './modules/programmes/keep-purging.js';
import { stopOnSignal } from './stop.js';

/** An analysis worker: takes jobs from the queue, and takes back those of workers that died. Any number may run, on any machine. */
const config = configOrExit();
const log = pino({ level: config.logLevel, name: 'worker' });
const db = createKnex(config.databaseUrl, { pool: 4, statementSeconds: 120, applicationName: 'foreveil worker' });
const listener = new Listener(config.databaseUrl);
const boss = new PgBoss({
  connectionString: config.databaseUrl,
  schema: JOBS_SCHEMA,
  max: 3,
  migrate: false,
  schedule: false,
  maintenanceIntervalSeconds: 10,
});
const stopping = new AbortController();
const threads: AnalysisThread[] = [];

boss.on('error', (error) => log.error(error, 'job queue'));
const cancellations = new Cancellations(listener);
await cancellations.listen();
await boss.start();
const listId = await defaultLineListId(db);
const list = listId && (await loadLineList(db, listId));
for (let i = 0; i < config.analysisThreads; i++) {
  const thread = new AnalysisThread(config.analysisMemoryMb);
  if (listId && list) thread.keepList(listId, list);
  threads.push(thread);
  await boss.work<AnalyseJob>(ANALYSE_QUEUE, { pollingIntervalSeconds: 0.5 }, async ([job]) => {
    if (job) await work(job.data.analysisId, thread);
  });
}
// a thread of their own: someone waits for a comparison, and it must not stand behind a long analysis
const comparing = new AnalysisThread(config.analysisMemoryMb);
threads.push(comparing);
await boss.work<CompareJob>(COMPARE_QUEUE, { pollingIntervalSeconds: 0.5 }, async ([job]) => {
  if (job) await compare(job.data.comparisonId);
});
void sweepForever();
const mail = keepSending(db, config, log, stopping.signal);
void keepPurging(db, log, stopping.signal);
stopOnSignal(stop, 15_000);
log.info('ready');

async function work(analysisId: string, thread: AnalysisThread): Promise<void> {
  const { analysisSeconds, leaseSeconds } = config;
  const from = Date.now();
  try {
    const beatMs = (leaseSeconds * 1000) / 5;
    const onCancelled = cancellations.on.bind(cancellations);
    await workOnAnalysis(analysisId, { db, thread, analysisSeconds, beatMs, stopping: stopping.signal, onCancelled });
    log.info({ analysisId, ms: Date.now() - from }, 'worked on an analysis');
  } catch (error) {
    log.warn({ analysisId, err: error }, 'an attempt at an analysis failed');
    throw error;
  }
}

async function compare(comparisonId: string): Promise<void> {
  const controller = new AbortController();
  const timer = setTimeout(() => controller.abort('too_long'), COMPARE_SECONDS * 1000);
  try {
    await workOnComparison(db, comparing, comparisonId, AbortSignal.any([controller.signal, stopping.signal]));
    log.info({ comparisonId }, 'worked on a comparison');
  } catch (error) {
    log.warn({ comparisonId, err: error }, 'an attempt at a comparison failed');
    throw error;
  } finally {
    clearTimeout(timer);
  }
}

/** Strays are looked for twice within a lease, by every worker. */
async function sweepForever(): Promise<void> {
  for await (const _ of every(config.leaseSeconds * 500, undefined, { ref: false })) {
    if (stopping.signal.aborted) return;
    await sweep(db, boss, config.leaseSeconds, config.analysisSeconds).then(
      (found) => found && log.warn({ found }, 'took back analyses that nobody worked on'),
      (error: unknown) => log.error(error, 'strays could not be looked for'),
    );
  }
}

/** Hands unfinished analyses back at once, so that another worker can have them, and leaves. */
async function stop(): Promise<void> {
  log.info('stopping');
  stopping.abort();
  await boss.stop({ graceful: true, timeout: 8_000 });
  await Promise.all(threads.map((thread) => thread.end()));
  await mail;
  await listener.close();
  await db.destroy();
}
