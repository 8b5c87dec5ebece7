import { readSpectrum, type ReadingCorrections } from '@foreveil/shared';
import { faceOf } from './face.js';
import { knownLineHint } from './known-line.js';
import { offendingLines } from './offending-lines.js';
import type { FileRead } from './protocol.js';

/** Reads a file as the server will, and reduces it to what a page shows. */
export function readFile(bytes: Uint8Array, fileName: string, corrections: ReadingCorrections): FileRead {
  const result = readSpectrum(bytes, fileName, corrections);
  if (!result.ok) return { ...result, lines: offendingLines(bytes, result.problem.row) };
  const face = faceOf(result.spectrum);
  if (!face) {
    const sentence = 'The file holds no stretch of good samples: all are masked or at one wavelength.';
    return { ok: false, problem: { code: 'nothing_to_draw', sentence }, lines: [] };
  }
  const hint = result.reading.medium.how === 'not_stated' ? knownLineHint(result.spectrum) : null;
  return { ok: true, reading: result.reading, face, hint };
}
