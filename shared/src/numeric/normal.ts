import { scaledErfc } from './faddeeva.js';

/** Error function, to rounding. */
export function erf(x: number): number {
  const size = Math.abs(x);
  if (size > 0.8) return Math.sign(x) * (1 - Math.exp(-size * size) * scaledErfc(size));
  // series 2/sqrt(pi) exp(-x^2) * sum of 2^n x^(2n+1) / (1 3 5 ... (2n+1)): all terms of one sign
  let term = x;
  let sum = x;
  for (let n = 1; Math.abs(term) > 1e-17 * Math.abs(sum); n++) {
    term *= (2 * x * x) / (2 * n + 1);
    sum += term;
  }
  return (2 / Math.sqrt(Math.PI)) * Math.exp(-x * x) * sum;
}

/** Complement of the error function, accurate also where it is tiny. */
export function erfc(x: number): number {
  if (x < 0.5) return 1 - erf(x);
  return Math.exp(-x * x) * scaledErfc(x);
}

/** Standard normal density. */
export const normalDensity = (z: number): number => Math.exp(-0.5 * z * z) / Math.sqrt(2 * Math.PI);

/** Probability that a standard normal deviate is below `z`. */
export const normalCdf = (z: number): number => 0.5 * erfc(-z * Math.SQRT1_2);

/** The `z` below which a standard normal deviate lies with probability `p`; -Infinity at 0, Infinity at 1. */
export function normalQuantile(p: number): number {
  if (!(p > 0 && p < 1)) return p === 0 ? -Infinity : p === 1 ? Infinity : NaN;
  const tail = Math.min(p, 1 - p);
  // start: Abramowitz & Stegun 26.2.23 (4.5e-4), then Halley's method
  const t = Math.sqrt(-2 * Math.log(tail));
  let z = -(t - (2.515517 + t * (0.802853 + t * 0.010328)) / (1 + t * (1.432788 + t * (0.189269 + t * 0.001308))));
  for (let step = 0; step < 3; step++) {
    const miss = (normalCdf(z) - tail) / normalDensity(z);
    z -= miss / (1 + 0.5 * z * miss);
  }
  return p < 0.5 ? z : -z;
}

/** Mean and variance of a standard normal deviate kept only between `low` and `high`. */
export function truncatedNormal(low: number, high: number): { mean: number; variance: number } {
  const mass = normalCdf(high) - normalCdf(low);
  const a = normalDensity(low);
  const b = normalDensity(high);
  const mean = (a - b) / mass;
  return { mean, variance: 1 + (low * a - high * b) / mass - mean * mean };
}
