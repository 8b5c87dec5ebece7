import { chebyshevInto } from '../numeric/chebyshev.js';
import { choleskyInPlace, choleskySolve } from '../numeric/linear.js';

/**
 * Coefficients of the Chebyshev series of `order` that best describes `y` at `x` (in [-1, 1]) with the given weights (inverse
 * variances), each coefficient beyond the first held near zero with the weight `ridge`. Null when the system is singular.
 */
export function fitChebyshev(x: Float64Array, y: Float64Array, weight: Float64Array, order: number, ridge = 0): Float64Array | null {
  const m = order + 1;
  const normal = new Float64Array(m * m);
  const right = new Float64Array(m);
  const basis = new Float64Array(m);
  for (let b = 0; b < x.length; b++) {
    const w = weight[b]!;
    if (!(w > 0)) continue;
    chebyshevInto(basis, x[b]!, order);
    for (let j = 0; j < m; j++) {
      const wj = w * basis[j]!;
      right[j]! += wj * y[b]!;
      for (let k = 0; k <= j; k++) normal[j * m + k]! += wj * basis[k]!;
    }
  }
  for (let j = 1; j < m; j++) normal[j * m + j]! += ridge;
  if (!choleskyInPlace(normal, m)) return null;
  choleskySolve(normal, m, right);
  return right;
}
