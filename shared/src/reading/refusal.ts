import type { ReadProblem } from './types.js';

/** Carries a problem from where it is found up to `readSpectrum`, which returns it; never leaves this folder. */
export class Refusal extends Error {
  constructor(readonly problem: ReadProblem) {
    super(problem.sentence);
  }
}

/** Stop reading. `sentence` says what is wrong, where, and what to do. */
export function refuse(code: string, sentence: string, where: Omit<ReadProblem, 'code' | 'sentence'> = {}): never {
  throw new Refusal({ code, sentence, ...where });
}

/** Text of a file as it may be shown in a sentence: one line, no control characters, not longer than `length`. */
export function quoted(text: string, length = 40): string {
  // eslint-disable-next-line no-control-regex -- control and direction marks are what is taken out
  const plain = text.replace(/[\u0000-\u001f\u007f-\u009f\u200e\u200f\u202a-\u202e\u2066-\u2069]+/g, ' ').trim();
  return plain.length > length ? `${plain.slice(0, length)}…` : plain;
}
