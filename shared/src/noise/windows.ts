import { normalQuantile } from '../numeric/normal.js';
import { MAD_TO_SIGMA, medianInPlace } from '../numeric/select.js';

/** Relative scatter of a noise estimate from second differences of `n` samples of white noise is this over the root of n. */
export const DIFFERENCE_SCATTER = 1.39;

/** Where the samples and their presumed errors are; sigma null: errors unknown, taken as 1. */
export interface Samples {
  readonly value: Float64Array;
  readonly sigma: Float64Array | null;
  readonly bad: Uint8Array;
}

/**
 * Writes the squares of (2 f(i) - f(i-lag) - f(i+lag)), each over what its three errors make of it, for i in [from, to) to `out` and
 * returns how many. Samples that are bad, or exact zeros (padding), give none.
 */
export function squaredDifferences(
  out: Float64Array,
  from: number,
  { value, sigma, bad }: Samples,
  a: number,
  b: number,
  lag: number,
): number {
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
}

/** Robust sigma from `n` squares of deviates of mean 0: of all, NaN when there are too few to tell. */
export function sigmaOfSquares(squares: Float64Array, n: number): number {
  return n < 6 ? NaN : MAD_TO_SIGMA * Math.sqrt(medianInPlace(squares, n));
}

/** Scatter in units of sigma for windows of `length` samples, every `stride`-th window; NaN where a window has too few samples. */
export function windowScatter(samples: Samples, length: number, stride: number, lag: number): Float64Array {
  const windows = Math.max(1, Math.ceil(samples.value.length / length));
  const out = new Float64Array(Math.ceil(windows / stride));
  const squares = new Float64Array(length);
  for (let w = 0; w < out.length; w++) {
    const from = w * stride * length;
    out[w] = sigmaOfSquares(squares, squaredDifferences(squares, 0, samples, from, from + length, lag));
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
