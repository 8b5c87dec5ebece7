/**
 * Standard normal numbers for draw j and dimension k, the same in every run: a results file must not depend on chance.
 * Additive recurrence with irrational steps (Kronecker sequence), passed through the inverse normal distribution.
 */
export function normalDraws(j: number, k: number): number {
  return TABLE[(j * STRIDES[k % STRIDES.length]! + 389 * k) % SIZE]!;
}

const SIZE = 1009; // prime, so that every stride runs through all values
const STRIDES = [1, 271, 613, 97, 439, 797, 157, 523, 911, 59, 347, 701, 31, 863, 229, 569];

const TABLE: Float64Array = shuffled(Float64Array.from({ length: SIZE }, (_, i) => inverseNormal((i + 0.5) / SIZE)));

/** Puts neighbours far apart so that short runs of draws cover the distribution evenly. */
function shuffled(sorted: Float64Array): Float64Array {
  return Float64Array.from(sorted, (_, i) => sorted[(i * 622) % SIZE]!); // 622 / 1009 is near the golden ratio
}

/** Inverse of the normal distribution by bisection on its series; made once at load. */
function inverseNormal(p: number): number {
  let low = -8;
  let high = 8;
  for (let i = 0; i < 60; i++) {
    const mid = 0.5 * (low + high);
    if (cdf(mid) < p) low = mid;
    else high = mid;
  }
  return 0.5 * (low + high);
}

function cdf(x: number): number {
  // Marsaglia 2004, J. Stat. Softw. 11(4): series exact to rounding for |x| < 7
  let sum = x;
  let term = x;
  for (let i = 3; Math.abs(term) > 1e-17 && i < 300; i += 2) {
    term *= (x * x) / i;
    sum += term;
  }
  return 0.5 + (sum * Math.exp(-0.5 * x * x)) / Math.sqrt(2 * Math.PI);
}
