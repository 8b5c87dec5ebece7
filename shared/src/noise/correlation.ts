import { crowdedValue, sigmaOfSquares, squaredDifferences, windowScatter, type Samples } from './windows.js';

/** Noise is taken to be independent over this many samples and more. */
const FAR_LAG = 12;
/** Lags at which what is left is the shape of lines: resampling seldom ties samples together so far. */
const LINE_LAGS = [3, 4, 5, 6];
/** Shares of lines in the scatter below this are not told from chance. */
const SMALLEST_SHARE = 0.1;
/** Correlations below this never matter; chance alone makes them about 2.1 over the root of the number of samples. */
const SMALLEST = 0.12;
const CHANCE = 2.8 * 2.1;
/** A smooth part larger than this is no remnant of lines: the noise itself was smoothed. */
const LARGEST_LINE_SHARE = 0.7;

export interface NoiseStructure {
  /** scatter of neighbouring samples in the windows with the fewest lines, in units of the presumed sigma */
  readonly near: number;
  /** 1 sigma of the noise, correlated or not, in units of the presumed sigma; NaN when there is too little to measure */
  readonly sigma: number;
  /** autocorrelation at lags 0, 1, 2, ...: [1] for white noise */
  readonly correlation: readonly number[];
}

/**
 * Scatter and autocorrelation of the noise from second differences at growing lags, in the windows with the fewest lines.
 * For noise of autocorrelation r the variance of 2 f(i) - f(i-k) - f(i+k) is (6 - 8 r(k) + 2 r(2k)) sigma^2.
 */
export function noiseStructure(samples: Samples, length: number, stride: number): NoiseStructure {
  const near = crowdedValue(windowScatter(samples, length, stride, 2)).mean;
  const farWindows = windowScatter(samples, length, stride, FAR_LAG);
  const far = crowdedValue(farWindows);
  if (!(far.mean > 0) || !(near > 0)) return { near, sigma: near, correlation: [1] };
  const quiet: number[] = [];
  farWindows.forEach((s, w) => {
    if (s >= far.low && s <= far.high) quiet.push(w * stride * length);
  });
  const scratch = new Float64Array(quiet.length * length);
  const varianceAt = (lag: number) => {
    let m = 0;
    for (const from of quiet) m = squaredDifferences(scratch, m, samples, from, from + length, lag);
    return sigmaOfSquares(scratch, m) ** 2;
  };
  const plateau = varianceAt(FAR_LAG);
  const seen = new Float64Array(2 * FAR_LAG);
  for (let lag = FAR_LAG - 1; lag > 0; lag--) seen[lag] = 0.75 * (1 + seen[2 * lag]! / 3 - varianceAt(lag) / plateau);
  const { correlation, lineShare } = withoutLines(seen, Math.max(SMALLEST, CHANCE / Math.sqrt(quiet.length * length)));
  return { near, sigma: Math.sqrt(plateau * (1 - lineShare)), correlation };
}

/**
 * Lines left in the windows look like a smooth part of the autocorrelation that declines slowly from less than 1: it is extrapolated
 * from the larger lags and taken away. What is left is the noise: 1 at lag 0 and soon nothing.
 */
function withoutLines(seen: Float64Array, smallest: number): { correlation: readonly number[]; lineShare: number } {
  const { intercept, slope } = straightLine(LINE_LAGS, seen);
  const share = slope < 0 ? intercept : Math.max(0, mean(LINE_LAGS.map((lag) => seen[lag]!)));
  const tied = (part: number) => {
    const out = [1];
    for (let lag = 1; lag < FAR_LAG; lag++) {
      const r = (seen[lag]! - Math.max(0, part + (part ? Math.min(0, slope) * lag : 0))) / (1 - part);
      if (r < smallest) break;
      out.push(r);
    }
    return out;
  };
  if (share < SMALLEST_SHARE || share > LARGEST_LINE_SHARE) return { correlation: tied(0), lineShare: 0 };
  const correlation = tied(share);
  return correlation.some((r) => r > 1) ? { correlation: tied(0), lineShare: 0 } : { correlation, lineShare: share };
}

const mean = (values: readonly number[]) => values.reduce((sum, v) => sum + v, 0) / values.length;

function straightLine(x: readonly number[], y: ArrayLike<number>): { intercept: number; slope: number } {
  const middleX = mean(x);
  const middleY = mean(x.map((at) => y[at]!));
  const slope = x.reduce((sum, at) => sum + (at - middleX) * y[at]!, 0) / x.reduce((sum, at) => sum + (at - middleX) ** 2, 0);
  return { intercept: middleY - slope * middleX, slope };
}
