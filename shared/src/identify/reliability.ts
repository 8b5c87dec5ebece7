import type { Family } from '../linelist/index.js';

/** A reading's kind for which probabilities are tested apart; 'unidentified' is the statement that no listed line makes the feature. */
export type ReliabilityFamily = Family | 'unidentified';

/** Statements whose probability fell into [from, to), and how many of them were right. The last bin includes 1. */
export interface ReliabilityBin {
  readonly from: number;
  readonly to: number;
  readonly count: number;
  readonly right: number;
  /** mean of the probabilities in the bin; 0 when it is empty */
  readonly mean: number;
}

/** How probabilities of one family held against simulated spectra. */
export interface FamilyReliability {
  readonly family: ReliabilityFamily;
  /** readings that came first (for 'unidentified': every feature) */
  readonly first: readonly ReliabilityBin[];
  /** readings that came second or later; empty for 'unidentified' */
  readonly further: readonly ReliabilityBin[];
}

/** What one run of the calibration found. Made by `npm run calibrate`, versioned with the program. */
export interface Reliability {
  readonly programVersion: string;
  readonly lineListVersion: string;
  /** of the method as it was then: the beginning of the SHA-256 of the sources of shared, tests and this result left out */
  readonly sources: string;
  readonly seed: number;
  /** simulated spectra of each kind */
  readonly spectra: Readonly<Record<string, number>>;
  readonly families: readonly FamilyReliability[];
}

/** Edges of the bins: closer where decisions are made. */
export const RELIABILITY_EDGES = [0, 0.1, 0.3, 0.5, 0.7, 0.8, 0.9, 0.95, 0.99, 1] as const;

/** The bin a probability falls into; undefined when there is none. */
export const binAt = (bins: readonly ReliabilityBin[], probability: number): ReliabilityBin | undefined =>
  bins.find((bin) => probability >= bin.from && (probability < bin.to || bin.to === 1));

/** What tests say of a reading: its family, where it ranks, its probability. */
export function reliabilityOf(
  { families }: Pick<Reliability, 'families'>,
  family: ReliabilityFamily,
  probability: number,
  isFirst: boolean,
): ReliabilityBin | undefined {
  const found = families.find((f) => f.family === family);
  return found && binAt(isFirst ? found.first : found.further, probability);
}

/**
 * 68.3 % interval of the true share when `right` of `count` were right, for independent cases.
 * Source: Wilson 1927, J. Am. Stat. Assoc. 22, 209; recommended by Brown, Cai & DasGupta 2001, Stat. Sci. 16, 101.
 */
export function shareInterval(right: number, count: number): { readonly low: number; readonly high: number } {
  if (count === 0) return { low: 0, high: 1 };
  const share = right / count;
  const middle = (share + 0.5 / count) / (1 + 1 / count);
  const half = Math.sqrt((share * (1 - share)) / count + 0.25 / count ** 2) / (1 + 1 / count);
  return { low: Math.max(0, middle - half), high: Math.min(1, middle + half) };
}

/** Expected calibration error: mean distance of stated and true share over the bins, weighted by their cases; null without cases. */
export function calibrationError(bins: readonly ReliabilityBin[]): number | null {
  const cases = bins.reduce((sum, { count }) => sum + count, 0);
  if (cases === 0) return null;
  return bins.reduce((sum, { count, right, mean }) => sum + Math.abs(mean * count - right), 0) / cases;
}
