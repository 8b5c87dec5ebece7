import type { Reading, ReadingCorrections, ReadProblem } from '@foreveil/shared';
import type { Face } from './face.js';
import type { KnownLineHint } from './known-line.js';
import type { OffendingLine } from './offending-lines.js';

export interface ReadRequest {
  readonly id: number;
  readonly file: File;
  readonly corrections: ReadingCorrections;
}

/** What a page shows of a file; the columns themselves stay in the worker. */
export type FileRead = (
  | { readonly ok: true; readonly reading: Reading; readonly face: Face; readonly hint: KnownLineHint | null }
  | { readonly ok: false; readonly problem: ReadProblem; readonly lines: readonly OffendingLine[] }
) & {
  /** SHA-256 of the bytes in hexadecimal; null or absent where it is not known */
  readonly sha256?: string | null;
};

export interface ReadReply {
  readonly id: number;
  readonly read: FileRead;
}
