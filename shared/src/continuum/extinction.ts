/** Interstellar extinction A(lambda) / A(V) by published laws. R_V = A(V) / E(B-V). */
export type ExtinctionLaw = 'ccm89' | 'odonnell94' | 'fitzpatrick99';
export const STANDARD_RV = 3.1;

const CCM_A = [1, 0.17699, -0.50447, -0.02427, 0.72085, 0.01979, -0.7753, 0.32999];
const CCM_B = [0, 1.41338, 2.28305, 1.07233, -5.38434, -0.62251, 5.3026, -2.09002];
const ODONNELL_A = [1, 0.104, -0.609, 0.701, 1.137, -1.718, -0.827, 1.647, -0.505];
const ODONNELL_B = [0, 1.952, 2.908, -3.989, -7.985, 11.102, 5.491, -10.805, 3.347];

const polynomial = (coefficients: readonly number[], x: number) => coefficients.reduceRight((sum, c) => sum * x + c, 0);

/**
 * A(lambda) / A(V) after Cardelli, Clayton & Mathis 1989, ApJ 345, 245, with `optical` coefficients between 1.1 and 3.3 per um.
 * Published for 100 to 3333 nm; beyond, the nearest piece of the law is continued.
 */
function cardelli(x: number, rv: number, a: readonly number[], b: readonly number[]): number {
  if (x <= 1.1) return (0.574 - 0.527 / rv) * x ** 1.61;
  if (x <= 3.3) return polynomial(a, x - 1.82) + polynomial(b, x - 1.82) / rv;
  if (x <= 8) {
    const d = Math.max(0, x - 5.9);
    const fa = (-0.04473 - 0.009779 * d) * d * d;
    const fb = (0.213 + 0.1207 * d) * d * d;
    return 1.752 - 0.316 * x - 0.104 / ((x - 4.67) ** 2 + 0.341) + fa + (-3.09 + 1.825 * x + 1.206 / ((x - 4.62) ** 2 + 0.263) + fb) / rv;
  }
  const d = x - 8;
  return polynomial([-1.073, -0.628, 0.137, -0.07], d) + polynomial([13.67, 4.257, -0.42, 0.374], d) / rv;
}

/** Ultraviolet part of Fitzpatrick 1999, PASP 111, 63: the parameters of Fitzpatrick & Massa 1990, in units of E(B-V). */
function fitzpatrickUltraviolet(x: number, rv: number): number {
  const c2 = -0.824 + 4.717 / rv;
  const c1 = 2.03 - 3.007 * c2;
  const drude = (x * x) / ((x * x - 4.596 ** 2) ** 2 + (x * 0.99) ** 2);
  const d = Math.max(0, x - 5.9);
  return c1 + c2 * x + 3.23 * drude + 0.41 * (0.5392 + 0.05644 * d) * d * d + rv;
}

/** Anchors of Fitzpatrick 1999, tables 3 and 4, per um, and the second derivatives of the natural spline through them. */
interface Spline {
  readonly rv: number;
  readonly x: number[];
  readonly y: number[];
  readonly second: number[];
}
let spline: Spline | null = null;

function fitzpatrickSpline(rv: number): Spline {
  if (spline?.rv === rv) return spline;
  const x = [0, ...[2650, 1220, 600, 547, 467, 411, 270, 260].map((nm) => 1e3 / nm)];
  const y = [
    0,
    (0.265 * rv) / 3.1,
    (0.829 * rv) / 3.1,
    -0.426 + 1.0044 * rv,
    -0.05 + 1.0016 * rv,
    0.701 + 1.0016 * rv,
    1.208 + 1.0032 * rv - 0.00033 * rv * rv, // printed as -1.208, which contradicts table 3
    fitzpatrickUltraviolet(x[7]!, rv),
    fitzpatrickUltraviolet(x[8]!, rv),
  ];
  spline = { rv, x, y, second: naturalSplineSecond(x, y) };
  return spline;
}

function naturalSplineSecond(x: number[], y: number[]): number[] {
  const n = x.length;
  const second = new Array<number>(n).fill(0);
  const upper = new Array<number>(n).fill(0);
  for (let i = 1; i < n - 1; i++) {
    const left = x[i]! - x[i - 1]!;
    const right = x[i + 1]! - x[i]!;
    const bend = 6 * ((y[i + 1]! - y[i]!) / right - (y[i]! - y[i - 1]!) / left);
    const pivot = 2 * (left + right) - left * upper[i - 1]!;
    upper[i] = right / pivot;
    second[i] = (bend - left * second[i - 1]!) / pivot;
  }
  for (let i = n - 2; i > 0; i--) second[i]! -= upper[i]! * second[i + 1]!;
  return second;
}

function fitzpatrick(x: number, rv: number): number {
  if (x >= 1e3 / 270) return fitzpatrickUltraviolet(x, rv) / rv;
  const s = fitzpatrickSpline(rv);
  let i = 0;
  while (i < s.x.length - 2 && x > s.x[i + 1]!) i++;
  const h = s.x[i + 1]! - s.x[i]!;
  const b = (x - s.x[i]!) / h;
  const a = 1 - b;
  const curve = ((a ** 3 - a) * s.second[i]! + (b ** 3 - b) * s.second[i + 1]!) * ((h * h) / 6);
  return (a * s.y[i]! + b * s.y[i + 1]! + curve) / rv;
}

/** A(lambda) / A(V) at a vacuum wavelength in nm. */
export function extinctionCurve(wavelengthNm: number, law: ExtinctionLaw = 'ccm89', rv = STANDARD_RV): number {
  const x = 1e3 / wavelengthNm;
  if (law === 'fitzpatrick99') return fitzpatrick(x, rv);
  return law === 'ccm89' ? cardelli(x, rv, CCM_A, CCM_B) : cardelli(x, rv, ODONNELL_A, ODONNELL_B);
}

/** Factor by which a visual extinction of `av` mag dims the flux at this wavelength. */
export const transmission = (wavelengthNm: number, av: number, law?: ExtinctionLaw, rv?: number): number =>
  10 ** (-0.4 * av * extinctionCurve(wavelengthNm, law, rv));
