import { existsSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import type { Reading, ReadingCorrections, ReadResult, Spectrum, SpectrumSummary } from '@foreveil/shared';
import { inThread, type ThreadDeath } from '../../common/in-thread.js';

/** The bytes of a file, or where they lie: then the thread fetches them itself, and they never pass through this one. */
export type ReadJob = ({ readonly bytes: Uint8Array } | { readonly path: string }) & {
  readonly fileName: string;
  readonly corrections: ReadingCorrections;
};
interface Limits {
  readonly readSeconds: number;
  readonly readMemoryMb: number;
}
export type ThreadResult =
  | { readonly ok: true; readonly spectrum: Spectrum; readonly reading: Reading; readonly preview: SpectrumSummary['preview'] }
  | Extract<ReadResult, { ok: false }>;

/** Threads load plain JavaScript: beside this file in dist, or dist's copy when this file itself runs as TypeScript source (tests). */
const beside = fileURLToPath(new URL('./read-spectrum.thread.js', import.meta.url));
const built = fileURLToPath(new URL('../../../dist/modules/spectra/read-spectrum.thread.js', import.meta.url));
export const READER_THREAD = existsSync(beside) ? beside : built;

/**
 * Reads a file within limits of time and memory. A reader that breaks either, or dies, is a file that cannot be read, not a fault of ours;
 * `onFailure` hears of a death, because it may be a fault of the reader all the same.
 */
export async function readInThread(
  job: ReadJob,
  { readSeconds, readMemoryMb }: Limits,
  onFailure: (error: unknown) => void = () => undefined,
  script: string | URL = READER_THREAD,
): Promise<ThreadResult> {
  const result = await inThread<ThreadResult>(script, job, { seconds: readSeconds, memoryMb: readMemoryMb });
  if ('answer' in result) return result.answer;
  if (result.error !== undefined) onFailure(result.error);
  return { ok: false, problem: problemOf(result, { readSeconds, readMemoryMb }) };
}

function problemOf({ death, error }: { death: ThreadDeath; error?: unknown }, { readSeconds, readMemoryMb }: Limits) {
  if (death === 'too_slow') return { code: death, sentence: `Reading the file took more than ${readSeconds} s and was stopped.` };
  if (death === 'too_much_memory') {
    return { code: death, sentence: `Reading the file took more than ${readMemoryMb} MiB of memory and was stopped.` };
  }
  const sentence =
    error === undefined
      ? 'The reader stopped without an answer.'
      : 'The reader failed on this file. It may be damaged, or of a kind that is not supported.';
  return { code: 'reader_failed', sentence };
}
