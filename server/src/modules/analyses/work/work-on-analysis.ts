import type { AnalysisStep } from '@foreveil/shared';
import type { Knex } from 'knex';
import { loadLineList } from '../../linelists/line-list-store.js';
import { loadSpectrum } from '../../spectra/spectrum-bytes.js';
import type { AnalysisThread, Outcome } from './analysis-thread.js';
import { claim, type Claim } from './claim.js';
import { beat, release, writeError, writeProgress } from './hold.js';
import { storeResult } from './store-result.js';

export interface Circumstances {
  readonly db: Knex;
  readonly thread: AnalysisThread;
  readonly analysisSeconds: number;
  readonly beatMs: number;
  /** the worker is asked to stop */
  readonly stopping: AbortSignal;
  /** calls `stop` when the analysis of this id is cancelled; @returns how to forget about that */
  onCancelled(id: string, stop: () => void): () => void;
}

/** The thread died in the middle: the queue is to hand the job out again. */
export class AttemptFailed extends Error {}

/** Progress is written three times a second at most: each time every open page hears of it. */
const PROGRESS_MS = 333;

/** Works on one analysis from taking it to storing its result. @throws AttemptFailed, or whatever kept it from being stored */
export async function workOnAnalysis(analysisId: string, { db, thread, ...more }: Circumstances): Promise<void> {
  const claimed = await claim(db, analysisId);
  if (!claimed) return;
  const spectrum = await loadSpectrum(db, claimed, claimed.spectrumId);
  if (!spectrum) return;
  if (!thread.knowsList(claimed.lineListId)) thread.keepList(claimed.lineListId, await loadLineList(db, claimed.lineListId));
  const watch = watching(db, claimed, more);
  let outcome: Outcome;
  try {
    outcome = await thread.run({ listId: claimed.lineListId, spectrum, settings: claimed.settings }, watch.progress, watch.signal);
  } finally {
    await watch.end();
  }
  await conclude(db, claimed, outcome, watch.signal.reason, {
    store: (analysis) => storeResult(db, claimed, spectrum, analysis),
    seconds: more.analysisSeconds,
  });
}

type Reason = 'too_long' | 'worker_stops' | 'not_ours';
type Done = Extract<Outcome, { end: 'done' }>['analysis'];

async function conclude(
  db: Knex,
  claimed: Claim,
  outcome: Outcome,
  reason: Reason | undefined,
  { store, seconds }: { store: (analysis: Done) => Promise<boolean>; seconds: number },
): Promise<void> {
  if (outcome.end === 'done') {
    await store(outcome.analysis).catch((error: unknown) => writeError(db, claimed, notStorable(error)));
  } else if (outcome.end === 'failed') {
    await writeError(db, claimed, `The analysis stopped with an error: ${outcome.reason}`);
  } else if (outcome.end === 'died') {
    throw new AttemptFailed(outcome.reason);
  } else if (reason === 'too_long') {
    await writeError(db, claimed, `The analysis took more than ${seconds} s and was stopped.`);
  } else if (reason === 'worker_stops') {
    await release(db, claimed);
    throw new AttemptFailed('its worker was asked to stop');
  }
}

/** A result that breaks a rule of the tables will break it again; anything else (a lost connection) is worth another attempt. */
function notStorable(error: unknown): string {
  const { code, constraint } = error as { code?: string; constraint?: string };
  if (!code?.startsWith('23')) throw error;
  return `The result breaks a rule of the database (${constraint ?? code}) and was not stored.`;
}

/** Everything that goes on beside a run: signs of life, progress, and the three reasons to end it early. */
function watching(db: Knex, claimed: Claim, { analysisSeconds, beatMs, stopping, onCancelled }: Omit<Circumstances, 'db' | 'thread'>) {
  const controller = new AbortController();
  const stop = (reason: Reason) => controller.abort(reason);
  const stopsWorker = () => stop('worker_stops');
  const keep = (ours: boolean) => (ours ? undefined : stop('not_ours'));
  const unheard = () => undefined; // a beat that could not be written: the next one says whether the analysis is still ours
  let writing: Promise<unknown> = Promise.resolve();
  let last = { step: '', at: 0 };

  const timer = setTimeout(() => stop('too_long'), analysisSeconds * 1000);
  const pulse = setInterval(() => void beat(db, claimed).then(keep, unheard), beatMs);
  const forget = onCancelled(claimed.id, () => stop('not_ours'));
  stopping.addEventListener('abort', stopsWorker);
  if (stopping.aborted) stopsWorker();

  return {
    signal: controller.signal,
    progress(step: AnalysisStep, done: number): void {
      if (step === last.step && Date.now() - last.at < PROGRESS_MS) return;
      last = { step, at: Date.now() };
      writing = writing.then(() => writeProgress(db, claimed, step, done)).then(keep, unheard);
    },
    async end(): Promise<void> {
      clearTimeout(timer);
      clearInterval(pulse);
      forget();
      stopping.removeEventListener('abort', stopsWorker);
      await writing;
    },
  };
}
