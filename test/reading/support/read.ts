import { readSpectrum, type ReadingCorrections, type ReadProblem, type ReadResult } from '@foreveil/shared';

export type Read = Extract<ReadResult, { ok: true }>;

/** The spectrum, or a failed test that shows the refusal. */
export function read(bytes: Uint8Array, corrections: ReadingCorrections = {}): Read {
  const result = readSpectrum(bytes, 'spectrum', corrections);
  if (!result.ok) throw new Error(`refused: ${result.problem.code}: ${result.problem.sentence}`);
  return result;
}

/** The refusal, or a failed test. */
export function refusal(bytes: Uint8Array, corrections: ReadingCorrections = {}): ReadProblem {
  const result = readSpectrum(bytes, 'spectrum', corrections);
  if (result.ok) throw new Error(`read ${result.reading.points} points instead of refusing`);
  return result.problem;
}

export const codes = (result: Read): string[] => result.reading.warnings.map((warning) => warning.code);

export const range = <T>(n: number, value: (i: number) => T): T[] => Array.from({ length: n }, (_, i) => value(i));
