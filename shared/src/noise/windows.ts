import { normalQuantile } from '../numeric/normal.js';
import { MAD_TO_SIGMA, medianInPlace } from '../numeric/select.js';

/** Relative scatter of a noise estimate from differences of `n` samples of white noise is about this over the root of n. */
export const DIFFERENCE_SCATTER = 1.4;

/** Where the samples and their presumed errors are; sigma null: errors unknown, taken as 1. */
export interface Samples {
  readonly value: Float64Array;
  readonly sigma: Float64Array | null;
  readonly bad: Uint8Array;
}

/**
 * Writes squares of differences of neighbouring samples i in [a, b), each over what the errors make of it, to `out` from `from` on and
 * returns where it stopped. Samples that are bad, or exact zeros (padding), give none.
 */
export type SquaredDifferences = (out: Float64Array, from: number, samples: Samples, a: number, b: number) => number;

/** 2 f(i) - f(i-lag) - f(i+lag): blind to slopes; for independent noise its variance is 6 sigma^2 at any lag. */
export const secondDifferences =
  (lag: number): SquaredDifferences =>
  (out, from, { value, sigma, bad }, a, b) => {
    let m = from;
    for (let i = Math.max(a, lag), end = Math.min(b, value.length - lag); i < end; i++) {
      if (bad[i]! + bad[i - lag]! + bad[i + lag]! > 0) continue;
      const middle = value[i]!;
      if (middle === 0) continue;
      const d = 2 * middle - value[i - lag]! - value[i + lag]!;
      const variance = sigma ? 4 * sigma[i]! * sigma[i]! + sigma[i - lag]! * sigma[i - lag]! + sigma[i + lag]! * sigma[i + lag]! : 6;
      out[m++] = (d * d) / variance;
    }
    return m;
  };

/** 6 f(i) - 4 f(i-1) - 4 f(i+1) + f(i-2) + f(i+2): blind to whatever is resolved, lines too; for white noise its variance is 70 sigma^2. */
export const fourthDifferences: SquaredDifferences = (out, from, { value, sigma, bad }, a, b) => {
  let m = from;
  for (let i = Math.max(a, 2), end = Math.min(b, value.length - 2); i < end; i++) {
    if (bad[i]! + bad[i - 1]! + bad[i + 1]! + bad[i - 2]! + bad[i + 2]! > 0) continue;
    const middle = value[i]!;
    if (middle === 0) continue;
    const d = 6 * middle - 4 * (value[i - 1]! + value[i + 1]!) + value[i - 2]! + value[i + 2]!;
    // the error changes little over five samples where it means anything
    out[m++] = (d * d) / (70 * (sigma ? sigma[i]! * sigma[i]! : 1));
  }
  return m;
};

/** Robust sigma from `n` squares of deviates of mean 0: of all, NaN when there are too few to tell. */
export function sigmaOfSquares(squares: Float64Array, n: number): number {
  return n < 6 ? NaN : MAD_TO_SIGMA * Math.sqrt(medianInPlace(squares, n));
}

/** Scatter in units of sigma for windows of `length` samples, every `stride`-th window; NaN where a window has too few samples. */
export function windowScatter(samples: Samples, length: number, stride: number, differences: SquaredDifferences): Float64Array {
  const windows = Math.max(1, Math.ceil(samples.value.length / length));
  const out = new Float64Array(Math.ceil(windows / stride));
  const squares = new Float64Array(length);
  for (let w = 0; w < out.length; w++) {
    const from = w * stride * length;
    out[w] = sigmaOfSquares(squares, differences(squares, 0, samples, from, from + length));
  }
  return out;
}

/** What many windows agree on. */
export interface Crowd {
  readonly mean: number;
  readonly low: number;
  readonly high: number;
  /** length of the interval in ln, over what chance alone makes it for white noise in windows of one sample: divide by root length */
  readonly spread: number;
}

/** Part of the windows that the crowd is made of: a third of many, more of few. */
const SHARE = 0.35;
const SHARE_OF_FEW = 0.6;
const FEW = 40;

/**
 * The value about which the windows crowd closest: the mean of the shortest interval that holds a share of them. Windows full of lines
 * only make the upper tail longer. NaN without values.
 */
export function crowdedValue(values: Float64Array): Crowd {
  const sorted = values.filter((v) => v === v).sort();
  const n = sorted.length;
  if (n === 0) return { mean: NaN, low: NaN, high: NaN, spread: NaN };
  const share = n < FEW ? SHARE_OF_FEW : SHARE;
  const span = Math.min(n - 1, Math.max(1, Math.round(share * n)));
  let at = 0;
  for (let i = 0; i + span < n; i++) {
    // relative lengths: the scatter of a window's sigma is proportional to the sigma
    if (sorted[i + span]! / sorted[i]! < sorted[at + span]! / sorted[at]!) at = i;
  }
  let sum = 0;
  for (let i = at; i <= at + span; i++) sum += sorted[i]!;
  const low = sorted[at]!;
  const high = sorted[at + span]!;
  const byChance = 2 * normalQuantile(0.5 + share / 2) * DIFFERENCE_SCATTER;
  return { mean: sum / (span + 1), low, high, spread: Math.log(high / low) / byChance };
}
