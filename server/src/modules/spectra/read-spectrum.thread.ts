import { readFileSync } from 'node:fs';
import { parentPort, workerData } from 'node:worker_threads';
import { readSpectrum, type Spectrum } from '@foreveil/shared';
import { previewOf } from './preview.js';
import type { ReadJob } from './read-in-thread.js';

/** Runs in a thread of its own: an uploaded file is the work of strangers, and whatever it does to the reader ends with the thread. */
const job = workerData as ReadJob;
const bytes = 'path' in job ? readFileSync(job.path) : job.bytes;
const result = readSpectrum(bytes, job.fileName, job.corrections);
// the columns change hands, they are not copied
if (result.ok) parentPort!.postMessage({ ...result, preview: previewOf(result.spectrum) }, buffersOf(result.spectrum));
else parentPort!.postMessage(result);

function buffersOf({ wavelength, flux, sigma, bad }: Spectrum): ArrayBuffer[] {
  const columns = [wavelength, flux, bad, ...(sigma ? [sigma] : [])];
  return [...new Set(columns.map(({ buffer }) => buffer as ArrayBuffer))];
}
