import { centralDepth, saturation } from '../atoms/index.js';
import { voigtH } from '../numeric/index.js';
import { C_KM_PER_S } from '../units/index.js';

/** What of a line sets how it absorbs. */
export interface Transition {
  /** vacuum nm */
  readonly wavelengthNm: number;
  readonly oscillatorStrength: number;
  /** damping constant, s^-1: about the Einstein A of a resonance line; 0 leaves the wings out */
  readonly gammaPerS: number;
}

/** Damping constant in Doppler widths, a = gamma lambda / (4 pi b). */
export const dampingOf = ({ wavelengthNm, gammaPerS }: Transition, bKmPerS: number): number =>
  (gammaPerS * wavelengthNm * 1e-12) / (4 * Math.PI * bKmPerS);

const STEP = 0.04; // in t of u = sinh t; trapezoids of so smooth a function gain a digit with every fifth of it
const FURTHEST = 11; // u = 30 000 Doppler widths
const WINGS_MATTER = 1e-4; // tau_0 a: below, the Doppler core alone is good to 1e-4

/**
 * Equivalent width, nm, of one absorbing component: lambda / c times the integral of 1 - exp(-tau_0 H(a, v / b)) over v, to 1e-4.
 * @param column cm^-2
 */
export function absorbedWidth(line: Transition, column: number, bKmPerS: number): number {
  const tau = centralDepth(column, line.oscillatorStrength, line.wavelengthNm, bKmPerS);
  return tau > 0 ? ((2 * bKmPerS * line.wavelengthNm) / C_KM_PER_S) * growth(tau, dampingOf(line, bKmPerS)) : 0;
}

/** Integral of 1 - exp(-tau H(a, u)) over u >= 0. */
function growth(tau: number, a: number): number {
  if (tau * a < WINGS_MATTER) return saturation(tau);
  let sum = 0.5 * -Math.expm1(-tau * voigtH(a, 0));
  for (let t = STEP; t <= FURTHEST; t += STEP) sum += -Math.expm1(-tau * voigtH(a, Math.sinh(t))) * Math.cosh(t);
  const beyond = (tau * a) / Math.sqrt(Math.PI) / Math.sinh(FURTHEST); // the wing falls as 1 / u^2
  return sum * STEP + beyond;
}

// ln W bends most where damping wings take over: straight lines between rows a quarter of a decade apart would be 8e-3 too wide there
const PER_DEX_TAU = 16;
const PER_DEX_A = 10;
const LOG_TAU_FROM = -2;
const LOG_A_FROM = -6;
const ROW = 10 * PER_DEX_TAU + 1;
const rows = new Map<number, Float64Array>();

/** ln of the growth integral at one damping constant, against log10 tau; made when first asked for. */
function growthRow(i: number): Float64Array {
  let row = rows.get(i);
  if (!row) {
    const a = 10 ** (LOG_A_FROM + i / PER_DEX_A);
    row = Float64Array.from({ length: ROW }, (_, k) => Math.log(growth(10 ** (LOG_TAU_FROM + k / PER_DEX_TAU), a)));
    rows.set(i, row);
  }
  return row;
}

/** The same width by interpolation in a table, to 2e-3: for fits that ask for it a hundred thousand times. */
export function tabledWidth(line: Transition, column: number, bKmPerS: number): number {
  const tau = centralDepth(column, line.oscillatorStrength, line.wavelengthNm, bKmPerS);
  if (!(tau > 0)) return 0;
  const a = dampingOf(line, bKmPerS);
  const scale = (2 * bKmPerS * line.wavelengthNm) / C_KM_PER_S;
  const x = (Math.log10(tau) - LOG_TAU_FROM) * PER_DEX_TAU;
  const y = (Math.log10(a) - LOG_A_FROM) * PER_DEX_A;
  if (tau * a < WINGS_MATTER || !(x > 0) || !(y > 0)) return scale * saturation(tau);
  const k = Math.min(ROW - 2, Math.floor(x));
  const i = Math.floor(y);
  const [low, high] = [growthRow(i), growthRow(i + 1)];
  const along = (row: Float64Array) => row[k]! + (x - k) * (row[k + 1]! - row[k]!);
  return scale * Math.exp(along(low) + (y - i) * (along(high) - along(low)));
}

/** log10 of the column of a thin line of this equivalent width (nm), cm^-2: N = m_e c^2 W / (pi e^2 f lambda^2) (Spitzer 1978; from memory). */
export const thinColumn = (line: Transition, widthNm: number): number =>
  Math.log10(1.129583487711664e20 * widthNm * 10) - Math.log10(line.oscillatorStrength) - 2 * Math.log10(line.wavelengthNm * 10);

/** Column per unit of apparent optical depth and velocity, cm^-2 (km/s)^-1: 3.768e14 / (f lambda[Angstrom]) (Savage & Sembach 1991, ApJ 379, 245). */
export const columnPerDepth = ({ oscillatorStrength, wavelengthNm }: Transition): number =>
  3.767885e14 / (oscillatorStrength * wavelengthNm * 10);

export interface ApparentColumn {
  /** cm^-2 */
  readonly column: number;
  /** 1 sigma, cm^-2; NaN without errors of the light */
  readonly columnSigma: number;
  readonly deepest: number;
}

/**
 * Apparent column: the integral of N_a(v) = 3.768e14 tau_a(v) / (f lambda) over the samples given (Savage & Sembach 1991), by trapezoids.
 * A lower limit where the line has structure narrower than the instrument's profile.
 * @param flux over continuum; @param sigma of it, or null; @param floor light below this is taken as this, since ln 0 is no depth
 */
export function apparentColumn(
  line: Transition,
  velocityKmPerS: ArrayLike<number>,
  flux: ArrayLike<number>,
  sigma: ArrayLike<number> | null,
  floor: number,
): ApparentColumn {
  const n = velocityKmPerS.length;
  const per = columnPerDepth(line);
  let sum = 0;
  let variance = 0;
  let deepest = 0;
  for (let i = 0; i < n; i++) {
    const step = 0.5 * (velocityKmPerS[Math.min(n - 1, i + 1)]! - velocityKmPerS[Math.max(0, i - 1)]!);
    const left = Math.max(flux[i]!, floor);
    const depth = -Math.log(left);
    sum += depth * step;
    deepest = Math.max(deepest, depth);
    variance += sigma ? ((step * sigma[i]!) / left) ** 2 : NaN;
  }
  return { column: per * sum, columnSigma: per * Math.sqrt(variance), deepest };
}
