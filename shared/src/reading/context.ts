import type { ReadLimits } from './limits.js';
import type { ReadingCorrections, ReadWarning } from './types.js';

/** What goes along while one file is read. Warnings are added where they arise. */
export interface ReadContext {
  /** the whole file, unpacked */
  readonly bytes: Uint8Array;
  readonly corrections: ReadingCorrections;
  readonly limits: ReadLimits;
  readonly warnings: ReadWarning[];
}
