import {
  RELIABILITY_EDGES,
  type Analysis,
  type Candidate,
  type Feature,
  type Reliability,
  type ReliabilityBin,
  type ReliabilityFamily,
} from '@foreveil/shared';
import { isRight, matched, trueFeatures, type TrueFeature, type TrueLine } from '../support/scoring.js';

// Counting how often a stated probability was right. Every feature that was reported counts, also one that matches nothing true.

interface Tally {
  count: number;
  right: number;
  sum: number;
}
/** What was counted, to be added to what was counted elsewhere. */
export interface CalibrationCounts {
  readonly spectra: Readonly<Record<string, number>>;
  readonly tallies: readonly (readonly [string, readonly Tally[]])[];
}
const FAMILIES: readonly ReliabilityFamily[] = ['stellar', 'interstellar', 'nebular', 'telluric', 'unidentified'];
const BINS = RELIABILITY_EDGES.length - 1;
const binOf = (probability: number) =>
  Math.min(
    BINS - 1,
    RELIABILITY_EDGES.findLastIndex((edge) => probability >= edge),
  );

/** Gathers statements of many analyses. */
export class Calibration {
  readonly #tallies = new Map<string, Tally[]>();
  readonly spectra: Record<string, number> = {};

  add(kind: string, analysis: Analysis, lines: readonly TrueLine[]): void {
    this.spectra[kind] = (this.spectra[kind] ?? 0) + 1;
    const reported = analysis.features.filter(({ flags }) => !flags.includes('cosmic'));
    const pairs = matched(reported, trueFeatures(lines));
    for (const feature of reported) {
      const truth = pairs.get(feature) ?? madeOf(feature, lines);
      feature.candidates.forEach((candidate, rank) => {
        this.#count(`${candidate.family} ${rank === 0 ? 'first' : 'further'}`, candidate.probability, isRightFamily(candidate, truth));
      });
      this.#count('unidentified first', feature.unidentifiedProbability, !truth.main.some(({ listed }) => listed));
    }
  }

  #count(key: string, probability: number, right: boolean): void {
    const tallies = this.#tallies.get(key) ?? Array.from({ length: BINS }, () => ({ count: 0, right: 0, sum: 0 }));
    this.#tallies.set(key, tallies);
    const tally = tallies[binOf(probability)]!;
    tally.count++;
    tally.right += Number(right);
    tally.sum += probability;
  }

  counts(): CalibrationCounts {
    return { spectra: this.spectra, tallies: [...this.#tallies] };
  }

  merge(other: CalibrationCounts): void {
    for (const [kind, count] of Object.entries(other.spectra)) this.spectra[kind] = (this.spectra[kind] ?? 0) + count;
    for (const [key, tallies] of other.tallies) {
      const own = this.#tallies.get(key) ?? tallies.map(() => ({ count: 0, right: 0, sum: 0 }));
      this.#tallies.set(
        key,
        own.map((t, i) => ({ count: t.count + tallies[i]!.count, right: t.right + tallies[i]!.right, sum: t.sum + tallies[i]!.sum })),
      );
    }
  }

  #bins(key: string): ReliabilityBin[] {
    const tallies = this.#tallies.get(key) ?? Array.from({ length: BINS }, () => ({ count: 0, right: 0, sum: 0 }));
    return tallies.map(({ count, right, sum }, i) => ({
      from: RELIABILITY_EDGES[i]!,
      to: RELIABILITY_EDGES[i + 1]!,
      count,
      right,
      mean: count ? Number((sum / count).toFixed(4)) : 0,
    }));
  }

  result(versions: Pick<Reliability, 'programVersion' | 'lineListVersion' | 'sources' | 'seed'>): Reliability {
    return {
      ...versions,
      spectra: Object.fromEntries(Object.entries(this.spectra).sort(([a], [b]) => (a < b ? -1 : 1))),
      families: FAMILIES.map((family) => ({
        family,
        first: this.#bins(`${family} first`),
        further: family === 'unidentified' ? [] : this.#bins(`${family} further`),
      })),
    };
  }
}

/** A reading is right when its line is a main contributor and met where the reading says. */
const isRightFamily = (candidate: Candidate, truth: TrueFeature): boolean =>
  truth.main.some((line) => line.setting === candidate.family && isRight(candidate, { ...truth, main: [line] }));

/** What lies under a feature that matches no true one: true lines within half its width; main ones make 30 % of it. */
function madeOf(feature: Feature, lines: readonly TrueLine[]): TrueFeature {
  const under = lines.filter(
    (line) =>
      line.ew_nm > 0 === (feature.kind === 'dip') &&
      line.snr >= 1 &&
      Math.abs(line.obs_nm - feature.wavelengthNm) < 0.5 * Math.max(feature.fwhmNm, line.fwhm_nm),
  );
  const total = Math.abs(feature.equivalentWidthNm);
  return {
    nm: feature.wavelengthNm,
    fwhmNm: feature.fwhmNm,
    widthNm: feature.equivalentWidthNm,
    snr: feature.significance,
    covered: true,
    lines: under,
    main: under.filter((line) => Math.abs(line.ew_nm) >= 0.3 * total),
  };
}
