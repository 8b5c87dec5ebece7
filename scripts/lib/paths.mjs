import { mkdirSync } from 'node:fs';
import { dirname, join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';

/** The checkout. */
export const root = resolve(dirname(fileURLToPath(import.meta.url)), '..', '..');

/** Everything a running copy keeps that is not source: database, stamps, locks, logs. Ignored by git; may be deleted while nothing runs. */
export const dataDir = join(root, '.data');

/** A file below .data, its folder made. */
export function dataFile(...names) {
  const file = join(dataDir, ...names);
  mkdirSync(dirname(file), { recursive: true });
  return file;
}
