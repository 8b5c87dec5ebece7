import { parentPort, workerData } from 'node:worker_threads';
import { parseLines, type ListStatements } from '@foreveil/shared';

/** Runs in a thread of its own, like the reader of spectra. */
const { text, statements } = workerData as { text: string; statements: ListStatements };
parentPort!.postMessage(parseLines(text, statements));
