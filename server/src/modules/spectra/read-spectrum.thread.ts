import { parentPort, workerData } from 'node:worker_threads';
import { readSpectrum, type ReadingCorrections } from '@foreveil/shared';
import { previewOf } from './preview.js';

/** Runs in a thread of its own: an uploaded file is the work of strangers, and whatever it does to the reader ends with the thread. */
const { bytes, fileName, corrections } = workerData as { bytes: Uint8Array; fileName: string; corrections: ReadingCorrections };
const result = readSpectrum(bytes, fileName, corrections);
parentPort!.postMessage(result.ok ? { ...result, preview: previewOf(result.spectrum) } : result);
