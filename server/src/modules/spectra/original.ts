import { createReadStream } from 'node:fs';
import { asBytea, type CopyField } from '../../database/copy-row.js';

/** The bytes of a file as delivered: in memory, or in a file that is read piece by piece. */
export type Original = Uint8Array | { readonly path: string; readonly sizeBytes: number };

export const sizeOf = (original: Original): number => (original instanceof Uint8Array ? original.length : original.sizeBytes);

export function asOriginal(original: Original): CopyField {
  if (original instanceof Uint8Array) return asBytea(original);
  const { path, sizeBytes } = original;
  return { length: sizeBytes, chunks: () => createReadStream(path, { highWaterMark: 1024 * 1024 }) as AsyncIterable<Buffer> };
}
