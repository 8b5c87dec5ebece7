/**
 * Order statistics on typed arrays: selection in linear time, without sorting.
 * The `InPlace` functions reorder the first `n` values they are given and allocate nothing; the others copy and skip NaN.
 */

/** Gaussian sigma over median absolute deviation: 1 / quantile of the standard normal at 3/4. */
export const MAD_TO_SIGMA = 1.482602218505602;

/** The `k`-th smallest (from 0) of `values[from..to)`; reorders that range so that smaller ones lie left of `k`. No NaN allowed. */
export function selectInPlace(values: Float64Array, k: number, from = 0, to = values.length): number {
  let left = from;
  let right = to - 1;
  while (right - left > 12) {
    const pivot = medianOfThree(values, left, right);
    let i = left;
    let j = right;
    while (i <= j) {
      while (values[i]! < pivot) i++;
      while (values[j]! > pivot) j--;
      if (i <= j) {
        const held = values[i]!;
        values[i++] = values[j]!;
        values[j--] = held;
      }
    }
    if (k <= j) right = j;
    else if (k >= i) left = i;
    else return values[k]!;
  }
  insertionSort(values, left, right);
  return values[k]!;
}

function medianOfThree(values: Float64Array, left: number, right: number): number {
  const a = values[left]!;
  const b = values[(left + right) >> 1]!;
  const c = values[right]!;
  if (a < b) return b < c ? b : a < c ? c : a;
  return a < c ? a : b < c ? c : b;
}

function insertionSort(values: Float64Array, left: number, right: number) {
  for (let i = left + 1; i <= right; i++) {
    const held = values[i]!;
    let j = i - 1;
    while (j >= left && values[j]! > held) {
      values[j + 1] = values[j]!;
      j--;
    }
    values[j + 1] = held;
  }
}

/** Quantile `p` (0 to 1) of the first `n` values, linear between order statistics; NaN when `n` is 0. */
export function quantileInPlace(values: Float64Array, n: number, p: number): number {
  if (n <= 0) return NaN;
  const rank = Math.min(1, Math.max(0, p)) * (n - 1);
  const k = Math.floor(rank);
  const low = selectInPlace(values, k, 0, n);
  if (rank === k) return low;
  let high = values[k + 1]!; // after the selection the next order statistic is the least of those to the right
  for (let i = k + 2; i < n; i++) if (values[i]! < high) high = values[i]!;
  return low + (rank - k) * (high - low);
}

/** Median of the first `n` values; NaN when `n` is 0. */
export const medianInPlace = (values: Float64Array, n: number): number => quantileInPlace(values, n, 0.5);

/** Copies what is not NaN to the front of `out` and returns how many that were. */
export function packNumbers(values: ArrayLike<number>, out: Float64Array): number {
  let n = 0;
  for (let i = 0; i < values.length; i++) {
    const value = values[i]!;
    if (value === value) out[n++] = value;
  }
  return n;
}

/** Quantile `p` (0 to 1) of the values that are not NaN; NaN when there are none. */
export function quantile(values: ArrayLike<number>, p: number): number {
  const copy = new Float64Array(values.length);
  return quantileInPlace(copy, packNumbers(values, copy), p);
}

/** Median of the values that are not NaN; NaN when there are none. */
export const median = (values: ArrayLike<number>): number => quantile(values, 0.5);

/** Robust sigma about the median (scaled median absolute deviation) of the values that are not NaN; NaN when there are none. */
export function madSigma(values: ArrayLike<number>): number {
  const copy = new Float64Array(values.length);
  const n = packNumbers(values, copy);
  const centre = medianInPlace(copy, n);
  for (let i = 0; i < n; i++) copy[i] = Math.abs(copy[i]! - centre);
  return MAD_TO_SIGMA * medianInPlace(copy, n);
}
