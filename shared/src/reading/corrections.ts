import type { ReadingCorrections, Stated } from './types.js';

/** What a person said in place of what the file said, which is kept beside it; the fact as found when nobody corrected it. */
export function corrected<T>(correction: T | undefined, found: Stated<T>): Stated<T> {
  if (correction === undefined) return found;
  const { value, how, where } = found;
  return { value: correction, how: 'corrected', where: 'correction', said: { value, how, where } };
}

/** The same where the file's own word may be of no use. */
export function correctedOr<T>(correction: T | undefined, found: () => Stated<T> | null): Stated<T> | null {
  const said = found();
  if (correction === undefined) return said;
  return said ? corrected(correction, said) : { value: correction, how: 'corrected', where: 'correction' };
}

/** The corrections that name parts of a file; another file, or another way to look at this one, has other parts. */
export type PartCorrections = Pick<ReadingCorrections, 'place' | 'wavelengthColumn' | 'fluxColumn' | 'uncertaintyColumn' | 'maskColumn'>;
