import { quantile } from '../numeric/select.js';
import { crowdedValue, fourthDifferences, secondDifferences, sigmaOfSquares, windowScatter, type Samples } from './windows.js';

/** Noise is taken to be independent over this many samples and more. */
const FAR_LAG = 12;
/** Lags at which what is left is the shape of lines: resampling seldom ties samples together so far. */
const LINE_LAGS = [3, 4, 5, 6];
/** Correlations below this never matter; chance alone makes them about 2.1 over the root of the number of samples. */
const SMALLEST = 0.12;
const CHANCE = 2.8 * 2.1;
/** Tails that differ by more than this part of their distance are not those of noise. */
const LOPSIDED = 0.12;
/** Ties weaker than this come from interpolation between neighbours. */
const WEAK = 0.3;
/** A smooth part larger than this is no remnant of lines: the noise itself was smoothed. */
const LARGEST_LINE_SHARE = 0.7;
/** The crowd of windows is this much wider than chance alone makes it, at most, where there are windows free of lines. */
const FREE_OF_LINES = 2;

export interface NoiseStructure {
  /** scatter of direct neighbours, in units of the presumed sigma: lines hardly raise it, correlation lowers it; NaN: too few samples */
  readonly neighbours: number;
  /** 1 sigma of the noise, correlated or not, in units of the presumed sigma */
  readonly sigma: number;
  /** autocorrelation at lags 0, 1, 2, ...: [1] for white noise */
  readonly correlation: readonly number[];
  /** there are windows without lines, so that sigma and correlation are those of the noise alone */
  readonly lineFree: boolean;
  /** the scatter is smooth through and through: smoothed noise or, where windows free of lines are lacking, nothing but lines */
  readonly smooth: boolean;
}

/**
 * Scatter and autocorrelation of the noise from second differences at growing lags, in the windows with the fewest lines.
 * For noise of autocorrelation r the variance of 2 f(i) - f(i-k) - f(i+k) is (6 - 8 r(k) + 2 r(2k)) sigma^2.
 */
export function noiseStructure(samples: Samples, length: number, stride: number): NoiseStructure {
  const neighbours = crowdedValue(windowScatter(samples, length, stride, fourthDifferences)).mean;
  const farWindows = windowScatter(samples, length, stride, secondDifferences(FAR_LAG));
  const far = crowdedValue(farWindows);
  if (!(far.mean > 0) || !(neighbours > 0)) return { neighbours, sigma: neighbours, correlation: [1], lineFree: false, smooth: false };
  const quiet: number[] = [];
  farWindows.forEach((s, w) => {
    if (s >= far.low && s <= far.high) quiet.push(w * stride * length);
  });
  const scratch = new Float64Array(quiet.length * length);
  const varianceAt = (lag: number) => {
    const differences = secondDifferences(lag);
    let m = 0;
    for (const from of quiet) m = differences(scratch, m, samples, from, from + length);
    return sigmaOfSquares(scratch, m) ** 2;
  };
  const plateau = varianceAt(FAR_LAG);
  const seen = new Float64Array(2 * FAR_LAG);
  for (let lag = FAR_LAG - 1; lag > 0; lag--) seen[lag] = 0.75 * (1 + seen[2 * lag]! / 3 - varianceAt(lag) / plateau);
  const { correlation, lineShare, smooth } = withoutLines(seen, Math.max(SMALLEST, CHANCE / Math.sqrt(quiet.length * length)));
  // correlated samples count for fewer
  const independent = length / correlation.reduce((sum, r, lag) => sum + (lag ? 2 * r * r : 1), 0);
  const lineFree = far.spread * Math.sqrt(independent) < FREE_OF_LINES && !(smooth && lopsided(samples, quiet, length));
  return { neighbours, sigma: Math.sqrt(plateau * (1 - lineShare)), correlation, lineFree, smooth };
}

/** Whether differences at the far lag have one tail longer than the other, as lines make them and noise does not. */
function lopsided({ value, bad }: Samples, quiet: readonly number[], length: number): boolean {
  const differences: number[] = [];
  for (const from of quiet) {
    for (let i = Math.max(FAR_LAG, from), end = Math.min(from + length, value.length - FAR_LAG); i < end; i++) {
      if (!bad[i] && !bad[i - FAR_LAG] && !bad[i + FAR_LAG]) differences.push(2 * value[i]! - value[i - FAR_LAG]! - value[i + FAR_LAG]!);
    }
  }
  const low = quantile(differences, 0.05);
  const high = quantile(differences, 0.95);
  return Math.abs(low + high) > LOPSIDED * (high - low);
}

/**
 * Lines left in the windows look like a smooth part of the autocorrelation that declines slowly from less than 1: it is extrapolated
 * from the larger lags and taken away. What is left is the noise: 1 at lag 0 and soon nothing.
 */
function withoutLines(seen: Float64Array, smallest: number): { correlation: readonly number[]; lineShare: number; smooth: boolean } {
  const { intercept, slope } = straightLine(LINE_LAGS, seen);
  const share = Math.max(0, slope < 0 ? intercept : mean(LINE_LAGS.map((lag) => seen[lag]!)));
  const tied = (part: number) => {
    const out = [1];
    for (let lag = 1; lag < FAR_LAG; lag++) {
      const r = (seen[lag]! - Math.max(0, part + (part ? Math.min(0, slope) * lag : 0))) / (1 - part);
      if (r < smallest) break;
      out.push(Math.min(1, r));
    }
    return out;
  };
  if (share > LARGEST_LINE_SHARE) return { correlation: tied(0), lineShare: 0, smooth: true };
  const all = tied(share);
  // weak ties that reach to the second neighbour almost undiminished are lines; resampling makes weak ones between direct neighbours only
  const correlation = all.length > 2 && all[1]! < WEAK && all[2]! > 0.5 * all[1]! ? [1] : all;
  // samples tied more closely than the rest allows: the smooth part was the noise's own
  return correlation[1]! > 0.97 ? { correlation: tied(0), lineShare: 0, smooth: true } : { correlation, lineShare: share, smooth: false };
}

const mean = (values: readonly number[]) => values.reduce((sum, v) => sum + v, 0) / values.length;

function straightLine(x: readonly number[], y: ArrayLike<number>): { intercept: number; slope: number } {
  const middleX = mean(x);
  const middleY = mean(x.map((at) => y[at]!));
  const slope = x.reduce((sum, at) => sum + (at - middleX) * y[at]!, 0) / x.reduce((sum, at) => sum + (at - middleX) ** 2, 0);
  return { intercept: middleY - slope * middleX, slope };
}
