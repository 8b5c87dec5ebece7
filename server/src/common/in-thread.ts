import { Worker } from 'node:worker_threads';

export interface ThreadLimits {
  readonly seconds: number;
  readonly memoryMb: number;
}

/** Why a thread gave no answer. */
export type ThreadDeath = 'too_slow' | 'too_much_memory' | 'died';

/**
 * Has one piece of work done in a thread of its own, within limits of time and memory: what strangers send cannot hold up or end the server.
 * @returns the thread's one message, or why there was none; `error` is what it died of
 */
export async function inThread<T>(
  script: string | URL,
  workerData: unknown,
  { seconds, memoryMb }: ThreadLimits,
): Promise<{ readonly answer: T } | { readonly death: ThreadDeath; readonly error?: unknown }> {
  const thread = new Worker(script, { workerData, resourceLimits: { maxOldGenerationSizeMb: memoryMb }, execArgv: [] });
  let timer: NodeJS.Timeout | undefined;
  try {
    return await new Promise((resolve) => {
      timer = setTimeout(() => resolve({ death: 'too_slow' }), seconds * 1000);
      thread.once('message', (answer: T) => resolve({ answer }));
      thread.once('error', (error: NodeJS.ErrnoException) =>
        resolve({ death: error.code === 'ERR_WORKER_OUT_OF_MEMORY' ? 'too_much_memory' : 'died', error }),
      );
      thread.once('exit', () => resolve({ death: 'died' }));
    });
  } finally {
    clearTimeout(timer);
    await thread.terminate();
  }
}
