import { existsSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { Worker } from 'node:worker_threads';
import type { Analysis, AnalysisSettings, AnalysisStep, LineList, SightlineComparison, Spectrum } from '@foreveil/shared';
import type { CompareInThread, FromThread, ToThread } from './protocol.js';

export interface ThreadJob {
  readonly listId: string;
  readonly spectrum: Spectrum;
  readonly settings: AnalysisSettings;
}

/** How a run in the thread ended without a result. `died` is the thread's fault or fate, `failed` the program's own word, `stopped` ours. */
type Unfinished =
  { readonly end: 'failed'; readonly reason: string } | { readonly end: 'died'; readonly reason: string } | { readonly end: 'stopped' };
export type Outcome = { readonly end: 'done'; readonly analysis: Analysis } | Unfinished;
export type CompareOutcome = { readonly end: 'compared'; readonly comparison: SightlineComparison } | Unfinished;

const beside = fileURLToPath(new URL('./analysis.thread.js', import.meta.url));
const built = fileURLToPath(new URL('../../../../dist/modules/analyses/work/analysis.thread.js', import.meta.url));

/** Keeps one thread for analyses, warm; a thread that was stopped or died is replaced when the next job comes. */
export class AnalysisThread {
  private thread: Worker | null = null;
  private readonly lists = new Map<string, LineList>();

  constructor(
    private readonly memoryMb: number,
    private readonly script: string | URL = existsSync(beside) ? beside : built,
  ) {}

  /** Gives the thread, now and after every replacement, a list to keep. */
  keepList(listId: string, list: LineList): void {
    if (this.lists.has(listId)) return;
    this.lists.set(listId, list);
    this.running().postMessage({ say: 'keep_list', listId, list } satisfies ToThread);
  }

  knowsList(listId: string): boolean {
    return this.lists.has(listId);
  }

  /** @param signal ends the run, with the thread, whatever it is doing */
  run(job: ThreadJob, onProgress: (step: AnalysisStep, done: number) => void, signal: AbortSignal): Promise<Outcome> {
    return this.ask({ say: 'run', ...job }, signal, (message): Outcome | null => {
      if (message.say === 'progress') onProgress(message.step, message.done);
      return message.say === 'done' ? { end: 'done', analysis: message.analysis } : null;
    });
  }

  /** Compares two sightlines; ends as a run does. */
  compare(job: CompareInThread, signal: AbortSignal): Promise<CompareOutcome> {
    return this.ask({ say: 'compare', ...job }, signal, (message): CompareOutcome | null =>
      message.say === 'compared' ? { end: 'compared', comparison: message.comparison } : null,
    );
  }

  /** Sends the thread a job and waits for its end. @param hear what an answer means; null while it is not the last one */
  private async ask<T extends { readonly end: string }>(
    job: ToThread,
    signal: AbortSignal,
    hear: (message: FromThread) => T | null,
  ): Promise<T | Unfinished> {
    if (signal.aborted) return { end: 'stopped' };
    const thread = this.running();
    let forget = (): void => undefined;
    const outcome = await new Promise<T | Unfinished>((resolve) => {
      const told = (message: FromThread) => {
        const heard = message.say === 'failed' ? ({ end: 'failed', reason: message.reason } as const) : hear(message);
        if (heard) resolve(heard);
      };
      const broke = (error: Error) => resolve({ end: 'died', reason: error.message });
      const ended = (code: number) => resolve({ end: 'died', reason: `the thread ended with ${code}` });
      const stopped = () => resolve({ end: 'stopped' });
      thread.on('message', told).once('error', broke).once('exit', ended);
      signal.addEventListener('abort', stopped, { once: true });
      // the thread outlives the run: what listened for this one must not stay
      forget = () => {
        thread.off('message', told).off('error', broke).off('exit', ended);
        signal.removeEventListener('abort', stopped);
      };
      thread.postMessage(job);
    });
    forget();
    if (outcome.end === 'stopped' || outcome.end === 'died') await this.end();
    return outcome;
  }

  async end(): Promise<void> {
    const thread = this.thread;
    this.thread = null;
    await thread?.terminate();
  }

  private running(): Worker {
    if (this.thread) return this.thread;
    const thread = new Worker(this.script, { resourceLimits: { maxOldGenerationSizeMb: this.memoryMb }, execArgv: [] });
    thread.on('error', () => undefined); // told by the run that it ends; without one there is nobody to tell
    thread.once('exit', () => {
      if (this.thread === thread) this.thread = null;
    });
    for (const [listId, list] of this.lists) thread.postMessage({ say: 'keep_list', listId, list } satisfies ToThread);
    this.thread = thread;
    return thread;
  }
}
