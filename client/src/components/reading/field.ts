import type { Reading, ReadingCorrections } from '@foreveil/shared';

/** Sets one correction, or takes it back with undefined. */
export type Correct = <K extends keyof ReadingCorrections>(field: K, value: ReadingCorrections[K] | undefined) => void;

export interface FieldProps {
  reading: Reading;
  correct: Correct;
}
