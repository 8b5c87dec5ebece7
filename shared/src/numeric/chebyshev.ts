/** Fills `out[0..order]` with the Chebyshev polynomials T_0..T_order at `x` in [-1, 1], by the three-term recurrence. */
export function chebyshevInto(out: Float64Array, x: number, order: number, offset = 0) {
  out[offset] = 1;
  if (order < 1) return;
  out[offset + 1] = x;
  for (let k = 2; k <= order; k++) out[offset + k] = 2 * x * out[offset + k - 1]! - out[offset + k - 2]!;
}

/** Sum of `coefficients[k] T_k(x)` for x in [-1, 1], by Clenshaw's recurrence; 0 without coefficients. */
export function chebyshevSum(coefficients: ArrayLike<number>, x: number): number {
  let later = 0;
  let last = 0;
  for (let k = coefficients.length - 1; k >= 1; k--) {
    const next = 2 * x * last - later + coefficients[k]!;
    later = last;
    last = next;
  }
  return coefficients.length ? x * last - later + coefficients[0]! : 0;
}
