import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { join } from 'node:path';
import { repoRoot } from '../../../server/src/config/config.js';
import type { Api } from './api.js';

export interface WorkerProcess {
  readonly process: ChildProcess;
  /** what it wrote */
  readonly log: string[];
  /** ends it with a signal and waits until it is gone; @returns its exit status, null when the signal ended it */
  end(signal?: NodeJS.Signals): Promise<number | null>;
}

/** A real worker on the database of `api`; needs a built server. It counts as dead after a second without a sign of life. */
export async function startWorker(api: Api, env: Record<string, string> = {}): Promise<WorkerProcess> {
  const child = spawn(process.execPath, [join(repoRoot, 'server/dist/worker.js')], {
    cwd: repoRoot,
    env: {
      ...process.env,
      NODE_OPTIONS: '',
      FOREVEIL_MODE: 'test',
      DATABASE_URL: api.database.url,
      LOG_LEVEL: 'info',
      LEASE_SECONDS: '1',
      ...env,
    },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  const log: string[] = [];
  for (const stream of [child.stdout, child.stderr]) stream.on('data', (piece: Buffer) => log.push(piece.toString()));
  const gone = once(child, 'exit') as Promise<[number | null]>;
  await until(
    () => log.some((text) => text.includes('"ready"')) || child.exitCode !== null,
    20_000,
    () => log.join(''),
  );
  if (child.exitCode !== null) throw new Error(log.join(''));
  const end = async (signal: NodeJS.Signals = 'SIGTERM'): Promise<number | null> => {
    if (child.exitCode === null && child.signalCode === null) child.kill(signal);
    const [status] = await gone;
    return status;
  };
  return { process: child, log, end };
}

/** Waits until `holds` gives something. @throws with what `say` says when that takes too long */
export async function until<T>(holds: () => T | Promise<T>, milliseconds: number, say: () => string = () => ''): Promise<NonNullable<T>> {
  for (const end = Date.now() + milliseconds; Date.now() < end; await new Promise((resolve) => setTimeout(resolve, 20))) {
    const value = await holds();
    if (value) return value;
  }
  throw new Error(`not within ${milliseconds} ms ${say()}`);
}
