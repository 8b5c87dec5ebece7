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

interface Edges {
  readonly fromNm: number;
  readonly toNm: number;
  /** first sample of each column, and after the last */
  readonly starts: Uint32Array;
}

/** The newest edges of each wavelength array: within one frame light, curve and residual ask for the same. */
const newestEdges = new WeakMap<Float64Array, Edges>();

function edgesOf(wavelength: Float64Array, fromNm: number, toNm: number, n: number): Uint32Array {
  const newest = newestEdges.get(wavelength);
  if (newest && newest.fromNm === fromNm && newest.toNm === toNm && newest.starts.length === n + 1) return newest.starts;
  const starts = new Uint32Array(n + 1);
  starts[0] = lowerBound(wavelength, fromNm);
  const end = upperBound(wavelength, toNm, starts[0]);
  for (let c = 1; c < n; c++) {
    const edge = fromNm + (c / n) * (toNm - fromNm);
    starts[c] = lowerBoundNear(wavelength, edge, starts[c - 1]!, end);
  }
  starts[n] = end;
  newestEdges.set(wavelength, { fromNm, toNm, starts });
  return starts;
}

/** `lowerBound` for a place not far from `from`: strides that double, then bisection. */
export function lowerBoundNear(ascending: Float64Array, x: number, from: number, end: number): number {
  let stride = 16;
  let low = from;
  while (low + stride < end && ascending[low + stride]! < x) {
    low += stride;
    stride *= 2;
  }
  return lowerBound(ascending, x, low, Math.min(low + stride + 1, end));
}

/** The newest columns of each pyramid, for the same reason. */
const newestColumns = new WeakMap<Pyramid, { readonly starts: Uint32Array; readonly columns: Columns }>();

/** The samples between two wavelengths in `n` columns of equal width. A sample belongs to the column its wavelength falls in. */
export function columnsOf(wavelength: Float64Array, pyramid: Pyramid, fromNm: number, toNm: number, n: number): Columns {
  const starts = edgesOf(wavelength, fromNm, toNm, n);
  const newest = newestColumns.get(pyramid);
  if (newest?.starts === starts) return newest.columns;
  const low = new Float32Array(n).fill(NaN);
  const high = new Float32Array(n).fill(NaN);
  const pair = new Float64Array(2);
  for (let column = 0; column < n; column++) {
    extremes(pyramid, starts[column]!, starts[column + 1]!, pair);
    if (pair[0]! <= pair[1]!) {
      low[column] = pair[0]!;
      high[column] = pair[1]!;
    }
  }
  newestColumns.set(pyramid, { starts, columns: { low, high } });
  return { low, high };
}

/** First index whose value is above `x`. */
function upperBound(ascending: ArrayLike<number>, x: number, from: number): number {
  let i = lowerBound(ascending, x, from);
  while (i < ascending.length && ascending[i]! <= x) i++;
  return i;
}
