/**
 * Faddeeva function w(z) = exp(-z^2) erfc(-iz) and the Voigt function H(a, u) = Re w(u + ia), to about 1e-14 relative.
 *
 * Near the origin: the trapezoidal or midpoint rule for w(z) = (i / pi) * integral of exp(-t^2) / (z - t), whichever keeps its nodes
 * away from z, with the residue of the pole added (Matta & Reichel 1971, Math. Comp. 25, 339; the choice of rule after Al Azah &
 * Chandler-Wilde 2021, SIAM J. Numer. Anal. 59, 2346; recalled from memory, checked against 40-digit values in the tests).
 * Every term of the real part is positive, so small `a` loses no digits, where rational approximations fail.
 * Far out: Laplace's continued fraction.
 */
const NODES = 12;
const STEP = Math.sqrt(Math.PI / NODES);
const PER_STEP = 1 / STEP;
const POLE_LIMIT = Math.PI / STEP;
const INVERSE_SQRT_PI = 1 / Math.sqrt(Math.PI);

const squares = (shift: number) => Float64Array.from({ length: NODES }, (_, k) => ((k + shift) * STEP) ** 2);
/** Midpoint nodes (k + 1/2) h and trapezoid nodes (k + 1) h, squared, with their Gaussian weights. */
const MIDPOINT = squares(0.5);
const TRAPEZOID = squares(1);
const MIDPOINT_WEIGHT = MIDPOINT.map((t2) => ((2 * STEP) / Math.PI) * Math.exp(-t2));
const TRAPEZOID_WEIGHT = TRAPEZOID.map((t2) => ((2 * STEP) / Math.PI) * Math.exp(-t2));

/** Beyond this |z|^2 the continued fraction with `terms(|z|^2)` levels is exact to rounding. */
const FAR = 64;
const terms = (r2: number) => (r2 > 1e6 ? 2 : r2 > 1e3 ? 5 : r2 > 200 ? 9 : 16);

/** Writes Re w and Im w at z = x + iy, y >= 0, to `out[0]` and `out[1]`. */
export function faddeevaInto(out: Float64Array, x: number, y: number) {
  const ax = x < 0 ? -x : x;
  const r2 = ax * ax + y * y;
  if (r2 > FAR) continuedFraction(out, ax, y, r2);
  else quadrature(out, ax, y);
  if (x < 0) out[1] = -out[1]!;
}

/** w = (i / sqrt(pi)) / (z - (1/2) / (z - 1 / (z - (3/2) / ...))), from the innermost level outwards. */
function continuedFraction(out: Float64Array, x: number, y: number, r2: number) {
  let a = x;
  let b = y;
  for (let k = terms(r2); k > 0; k--) {
    const d = (0.5 * k) / (a * a + b * b);
    a = x - a * d;
    b = y + b * d;
  }
  const d = INVERSE_SQRT_PI / (a * a + b * b);
  out[0] = b * d;
  out[1] = a * d;
}

function quadrature(out: Float64Array, x: number, y: number) {
  const phase = x * PER_STEP - Math.floor(x * PER_STEP);
  // only where a pole is taken into account may z come near a node, and then the rule whose nodes are farther is used
  const trapezoid = y < x && phase >= 0.25 && phase <= 0.75;
  const nodes = trapezoid ? TRAPEZOID : MIDPOINT;
  const weights = trapezoid ? TRAPEZOID_WEIGHT : MIDPOINT_WEIGHT;
  const x2 = x * x;
  const y2 = y * y;
  // Re and Im of i z / (z^2 - t^2) = (y (r^2 + t^2) + i x (r^2 - t^2)) / |z^2 - t^2|^2, with r = |z|
  let re = 0;
  let im = 0;
  const difference = x2 - y2;
  const cross = 4 * x2 * y2;
  const r2 = x2 + y2;
  for (let k = 0; k < NODES; k++) {
    const t2 = nodes[k]!;
    const p = difference - t2;
    const d = weights[k]! / (p * p + cross);
    re += d * (r2 + t2);
    im += d * (r2 - t2);
  }
  re *= y;
  im *= x;
  if (trapezoid) {
    const d = STEP / (Math.PI * r2); // the node at 0: i h / (pi z)
    re += y * d;
    im += x * d;
  }
  if (y < POLE_LIMIT) {
    addPole(out, x, y, difference, trapezoid ? -1 : 1);
    re += out[0]!;
    im += out[1]!;
  }
  out[0] = re;
  out[1] = im;
}

/** 2 exp(-z^2) / (1 + sign exp(-2 i pi z / h)) */
function addPole(out: Float64Array, x: number, y: number, difference: number, sign: number) {
  const growth = sign * Math.exp(2 * POLE_LIMIT * y);
  const angle = 2 * POLE_LIMIT * x;
  const cr = 1 + growth * Math.cos(angle);
  const ci = -growth * Math.sin(angle);
  const size = (2 * Math.exp(-difference)) / (cr * cr + ci * ci);
  const turn = 2 * x * y;
  const er = Math.cos(turn);
  const ei = -Math.sin(turn);
  out[0] = size * (er * cr + ei * ci);
  out[1] = size * (ei * cr - er * ci);
}

const held = new Float64Array(2);

/** Voigt function H(a, u) = (a / pi) * integral of exp(-t^2) / ((u - t)^2 + a^2), a >= 0; H(0, u) = exp(-u^2). */
export function voigtH(a: number, u: number): number {
  if (a === 0) return Math.exp(-u * u);
  faddeevaInto(held, u, a);
  return held[0]!;
}

/** exp(x^2) erfc(x) for x >= 0. */
export function scaledErfc(x: number): number {
  faddeevaInto(held, 0, x);
  return held[0]!;
}

/** Voigt profile of unit area at distance `x` from its centre, `sigma` of the Gaussian, half width at half maximum `gamma` of the Lorentzian. */
export function voigtProfile(x: number, sigma: number, gamma: number): number {
  if (sigma === 0) return gamma / (Math.PI * (x * x + gamma * gamma));
  const scale = 1 / (sigma * Math.SQRT2);
  return voigtH(gamma * scale, x * scale) * scale * INVERSE_SQRT_PI;
}

/** Full width at half maximum of the Voigt profile, to rounding; same unit as its arguments. */
export function voigtFwhm(sigma: number, gamma: number): number {
  if (sigma === 0) return 2 * gamma;
  const scale = 1 / (sigma * Math.SQRT2);
  const a = gamma * scale;
  const half = 0.5 * voigtH(a, 0);
  // start: Olivero & Longbothum 1977, JQSRT 17, 233 (2e-4); then Newton with w'(z) = -2 z w(z) + 2 i / sqrt(pi)
  const gaussian = 2 * Math.sqrt(2 * Math.LN2) * sigma;
  let u = 0.5 * scale * (0.5346 * 2 * gamma + Math.sqrt(0.2166 * 4 * gamma * gamma + gaussian * gaussian));
  for (let step = 0; step < 4; step++) {
    faddeevaInto(held, u, a);
    const slope = 2 * (a * held[1]! - u * held[0]!);
    u -= (held[0]! - half) / slope;
  }
  return (2 * u) / scale;
}
