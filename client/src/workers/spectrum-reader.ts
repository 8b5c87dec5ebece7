import type { ReadingCorrections } from '@foreveil/shared';
import type { FileRead, ReadReply, ReadRequest } from './protocol.js';

/** Reads files one after the other, away from the page. */
export interface SpectrumReader {
  read(file: File, corrections: ReadingCorrections): Promise<FileRead>;
  close(): void;
}

/** The server takes no more; reading it here first would only cost time. */
export const MOST_BYTES = 200 * 1024 * 1024;
const LONGEST_MS = 60_000;

const refused = (code: string, sentence: string): FileRead => ({ ok: false, problem: { code, sentence }, lines: [] });
const TOO_LARGE = refused('too_large', 'The file is larger than 200 MB. Cut the spectrum to the stretch you need, or pack it with gzip.');
const TOO_SLOW = refused('too_slow', 'Reading the file took more than a minute and was stopped. Cut the spectrum to the stretch you need.');
const DIED = refused('reader_died', 'The browser ran out of memory or stopped while reading the file. Close other pages, then try again.');

type Job = ReadRequest & { readonly resolve: (read: FileRead) => void };

export function startReader(makeWorker: () => Worker = defaultWorker): SpectrumReader {
  const waiting: Job[] = [];
  let worker: Worker | null = null;
  let job: Job | null = null;
  let timer: ReturnType<typeof setTimeout> | undefined;
  let ids = 0;

  const end = (read: FileRead) => {
    clearTimeout(timer);
    job?.resolve(read);
    job = null;
    next();
  };
  const restart = (read: FileRead) => {
    worker?.terminate();
    worker = null;
    end(read);
  };
  const next = () => {
    if (job) return;
    job = waiting.shift() ?? null;
    if (!job) return;
    if (!worker) {
      worker = makeWorker();
      worker.onmessage = ({ data }: MessageEvent<ReadReply>) => data.id === job?.id && end(data.read);
      worker.onerror = () => restart(DIED);
    }
    timer = setTimeout(() => restart(TOO_SLOW), LONGEST_MS);
    const { id, file, corrections } = job;
    worker.postMessage({ id, file, corrections } satisfies ReadRequest);
  };
  return {
    read(file, corrections) {
      if (file.size > MOST_BYTES) return Promise.resolve(TOO_LARGE);
      return new Promise((resolve) => {
        waiting.push({ id: ++ids, file, corrections, resolve });
        next();
      });
    },
    close() {
      clearTimeout(timer);
      worker?.terminate();
      worker = null;
    },
  };
}

const defaultWorker = () => new Worker(new URL('./read-spectrum.worker.ts', import.meta.url), { type: 'module', name: 'reader' });
