/**
 * Least and greatest value of every block of 8, 64, 512 ... samples, so the extremes of any stretch cost a handful of look-ups and
 * a dip of a single sample is never lost, however far one zooms out.
 */
export interface Pyramid {
  readonly values: Float32Array;
  readonly bad: Uint8Array;
  readonly levels: readonly { readonly size: number; readonly low: Float32Array; readonly high: Float32Array }[];
}

const FACTOR = 8;

/** Samples with `bad` or NaN count for nothing; a block without good samples holds +Infinity and -Infinity. */
export function buildPyramid(values: Float32Array, bad: Uint8Array): Pyramid {
  const levels: { size: number; low: Float32Array; high: Float32Array }[] = [];
  let size = FACTOR;
  let below: { low: Float32Array; high: Float32Array } = { low: values, high: values };
  while (size <= values.length * FACTOR && below.low.length > 1) {
    const n = Math.ceil(below.low.length / FACTOR);
    const low = new Float32Array(n).fill(Infinity);
    const high = new Float32Array(n).fill(-Infinity);
    const isBase = levels.length === 0;
    for (let i = 0; i < below.low.length; i++) {
      const lo = below.low[i]!;
      const hi = below.high[i]!;
      if (isBase && (bad[i] || Number.isNaN(lo))) continue;
      const block = (i / FACTOR) | 0;
      if (lo < low[block]!) low[block] = lo;
      if (hi > high[block]!) high[block] = hi;
    }
    levels.push({ size, low, high });
    below = { low, high };
    size *= FACTOR;
  }
  return { values, bad, levels };
}

/** Extremes of samples [from, to), written into `out` as [low, high]; [Infinity, -Infinity] when none is good. */
export function extremes(pyramid: Pyramid, from: number, to: number, out: Float64Array): void {
  let low = Infinity;
  let high = -Infinity;
  for (let i = from; i < to;) {
    let step = 1;
    let level = -1;
    while (level + 1 < pyramid.levels.length && i % (step * FACTOR) === 0 && i + step * FACTOR <= to) {
      step *= FACTOR;
      level++;
    }
    if (level >= 0) {
      const block = i / step;
      const at = pyramid.levels[level]!;
      if (at.low[block]! < low) low = at.low[block]!;
      if (at.high[block]! > high) high = at.high[block]!;
    } else if (!pyramid.bad[i]) {
      const v = pyramid.values[i]!;
      if (v < low) low = v;
      if (v > high) high = v;
    }
    i += step;
  }
  out[0] = low;
  out[1] = high;
}

/** First index whose value is not below `x`; `ascending` must ascend. */
export function lowerBound(ascending: ArrayLike<number>, x: number, from = 0, to = ascending.length): number {
  let [lo, hi] = [from, to];
  while (lo < hi) {
    const mid = (lo + hi) >> 1;
    if (ascending[mid]! < x) lo = mid + 1;
    else hi = mid;
  }
  return lo;
}

/** Index of the value nearest to `x`; -1 when there is none. */
export function nearestIndex(ascending: ArrayLike<number>, x: number): number {
  const n = ascending.length;
  if (n === 0) return -1;
  const right = Math.min(n - 1, lowerBound(ascending, x));
  if (right === 0) return 0;
  return x - ascending[right - 1]! < ascending[right]! - x ? right - 1 : right;
}

/** Extremes per display column; NaN where a column holds no good sample. */
export interface Columns {
  readonly low: Float32Array;
  readonly high: Float32Array;
}

/** The samples between two wavelengths in `n` columns of equal width. A sample belongs to the column its wavelength falls in. */
export function columnsOf(wavelength: Float64Array, pyramid: Pyramid, fromNm: number, toNm: number, n: number): Columns {
  const low = new Float32Array(n).fill(NaN);
  const high = new Float32Array(n).fill(NaN);
  const pair = new Float64Array(2);
  let start = lowerBound(wavelength, fromNm);
  for (let column = 0; column < n; column++) {
    const end =
      column === n - 1 ? upperBound(wavelength, toNm, start) : lowerBound(wavelength, fromNm + ((column + 1) / n) * (toNm - fromNm), start);
    extremes(pyramid, start, end, pair);
    if (pair[0]! <= pair[1]!) {
      low[column] = pair[0]!;
      high[column] = pair[1]!;
    }
    start = end;
  }
  return { low, high };
}

/** First index whose value is above `x`. */
function upperBound(ascending: ArrayLike<number>, x: number, from: number): number {
  let i = lowerBound(ascending, x, from);
  while (i < ascending.length && ascending[i]! <= x) i++;
  return i;
}
