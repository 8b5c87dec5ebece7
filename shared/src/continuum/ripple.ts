import type { BlockValues } from './blocks.js';

/**
 * A curve through block values that is as smooth as they allow: second differences between neighbours are normal deviates of one size
 * (Whittaker 1923, Proc. Edinburgh Math. Soc. 41, 63), and the size is the one that makes the values most probable.
 */

/** Second differences tried, in ln flux: from a curve that is nearly straight to one that turns within a few blocks. */
const SIZES = [1e-5, 3e-5, 1e-4, 3e-4, 1e-3, 3e-3];

/** Where nothing is known the curve comes back to 0: every block is 0 within 3 %. */
const REST = 1 / 0.03 ** 2;

/** The smooth curve at every block, also where the weight (inverse variance) is 0; 0 everywhere with fewer than four blocks. */
export function smoothRipple({ value, weight }: BlockValues): Float64Array {
  const n = value.length;
  let best: Float64Array = new Float64Array(n);
  if (n < 4) return best;
  let most = -Infinity;
  for (const size of SIZES) {
    const { curve, lnEvidence } = smoothWith(value, weight, 1 / (size * size));
    if (!(lnEvidence > most)) continue;
    most = lnEvidence;
    best = curve;
  }
  return best;
}

/** Solves (W + p D'D) s = W y by the Cholesky factors of the five-diagonal matrix, D taking second differences. */
function smoothWith(value: Float64Array, weight: Float64Array, penalty: number): { curve: Float64Array; lnEvidence: number } {
  const n = value.length;
  const diagonal = new Float64Array(n);
  const first = new Float64Array(n); // L below the diagonal, one and two places
  const second = new Float64Array(n);
  const curve = new Float64Array(n);
  let lnDeterminant = 0;
  let squares = 0;
  for (let i = 0; i < n; i++) {
    // rows of D'D: 1 -2 1 at each end, 1 -4 6 -4 1 inside
    const own = (i > 1 ? 1 : 0) + (i > 0 && i < n - 1 ? 4 : 0) + (i < n - 2 ? 1 : 0);
    const toFirst = i > 0 ? -2 * ((i > 1 ? 1 : 0) + (i < n - 1 ? 1 : 0)) : 0;
    const toSecond = i > 1 ? 1 : 0;
    second[i] = i > 1 ? (penalty * toSecond) / diagonal[i - 2]! : 0;
    first[i] = i > 0 ? (penalty * toFirst - (i > 1 ? second[i]! * first[i - 1]! : 0)) / diagonal[i - 1]! : 0;
    const pivot = weight[i]! + REST + penalty * own - first[i]! ** 2 - second[i]! ** 2;
    diagonal[i] = Math.sqrt(Math.max(pivot, 1e-12 * penalty));
    lnDeterminant += 2 * Math.log(diagonal[i]!);
    const y = weight[i]! > 0 ? value[i]! : 0;
    squares += weight[i]! * y * y;
    curve[i] = (weight[i]! * y - (i > 0 ? first[i]! * curve[i - 1]! : 0) - (i > 1 ? second[i]! * curve[i - 2]! : 0)) / diagonal[i]!;
  }
  let gain = 0;
  for (let i = n - 1; i >= 0; i--) {
    const after = (i < n - 1 ? first[i + 1]! * curve[i + 1]! : 0) + (i < n - 2 ? second[i + 2]! * curve[i + 2]! : 0);
    curve[i] = (curve[i]! - after) / diagonal[i]!;
  }
  for (let i = 0; i < n; i++) if (weight[i]! > 0) gain += weight[i]! * value[i]! * curve[i]!;
  return { curve, lnEvidence: 0.5 * (gain - squares + (n - 2) * Math.log(penalty) - lnDeterminant) };
}
