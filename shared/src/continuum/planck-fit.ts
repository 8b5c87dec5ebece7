import { choleskyInPlace, choleskySolve } from '../numeric/linear.js';
import { extinctionCurve, STANDARD_RV, type ExtinctionLaw } from './extinction.js';
import { lnPlanck, planckSlope } from './planck.js';
import { LN_PER_MAG } from './smooth-model.js';

export interface PlanckFitOptions {
  /** visual extinction applied to the model, mag; where it is fitted, the start */
  readonly av?: number;
  /** fit the visual extinction too: strongly degenerate with the temperature over short ranges */
  readonly fitAv?: boolean;
  readonly law?: ExtinctionLaw;
  readonly rv?: number;
}

/** Plain weighted least squares: no robustness, no response. Errors are those of the stated sigma. */
export interface PlanckFit {
  readonly end: 'converged' | 'iteration_limit' | 'singular' | 'too_few_samples';
  readonly iterations: number;
  readonly temperatureK: number;
  readonly temperatureSigmaK: number;
  /** ln of flux over B_lambda in erg s^-1 cm^-2 Angstrom^-1 sr^-1 */
  readonly lnScale: number;
  readonly lnScaleSigma: number;
  readonly av: number;
  /** 0 where the extinction was not fitted */
  readonly avSigma: number;
  /** correlation of the errors of temperature and ln scale */
  readonly correlation: number;
  readonly chi2: number;
  readonly degrees: number;
}

const MOST_ITERATIONS = 100;
/** The start: the best of temperatures in 15 % steps between these, K. */
const COOLEST = 50;
const HOTTEST = 200_000;

/** The samples that count, reduced to what the iterations need. */
interface Samples {
  readonly nm: Float64Array;
  readonly flux: Float64Array;
  readonly weight: Float64Array;
  readonly curve: Float64Array;
  readonly model: Float64Array;
}

/**
 * Least-squares fit of scale * B_lambda(T) * 10^(-0.4 A_V k) to samples with 1 sigma errors.
 * @param wavelengthNm vacuum nm
 * @param flux any unit, per wavelength
 * @param mask 1 where a sample must not be used; samples that are NaN or have no positive sigma are left out anyway
 */
export function fitPlanck(
  wavelengthNm: Float64Array,
  flux: Float64Array,
  sigma: Float64Array,
  mask: Uint8Array | null,
  options: PlanckFitOptions = {},
): PlanckFit {
  const samples = usableSamples(wavelengthNm, flux, sigma, mask, options);
  const columns = options.fitAv ? 3 : 2;
  const start = bestStart(samples, options.av ?? 0);
  const degrees = samples.nm.length - columns;
  // p = ln T, ln scale, A_V: all of order 1 to 100
  const p = Float64Array.of(start.lnT, start.lnScale, options.av ?? 0);
  if (degrees < 0) return result('too_few_samples', 0, p, null, NaN, degrees, columns);
  return iterate(samples, p, columns, degrees);
}

function usableSamples(
  wavelengthNm: Float64Array,
  flux: Float64Array,
  sigma: Float64Array,
  mask: Uint8Array | null,
  { law, rv }: PlanckFitOptions,
): Samples {
  const used: number[] = [];
  for (let i = 0; i < flux.length; i++) if (!mask?.[i] && Number.isFinite(flux[i]!) && sigma[i]! > 0 && sigma[i]! < Infinity) used.push(i);
  return {
    nm: Float64Array.from(used, (i) => wavelengthNm[i]!),
    flux: Float64Array.from(used, (i) => flux[i]!),
    weight: Float64Array.from(used, (i) => 1 / sigma[i]!),
    curve: Float64Array.from(used, (i) => -LN_PER_MAG * extinctionCurve(wavelengthNm[i]!, law, rv ?? STANDARD_RV)),
    model: new Float64Array(used.length),
  };
}

/** Fills `model` for ln T and A_V with ln scale 0 as ln of flux. */
function lnShape({ nm, curve, model }: Samples, lnT: number, av: number) {
  const temperature = Math.exp(lnT);
  for (let i = 0; i < nm.length; i++) model[i] = lnPlanck(nm[i]!, temperature) + av * curve[i]!;
}

/** Best temperature of a coarse grid, the scale being eliminated. */
function bestStart(samples: Samples, av: number): { lnT: number; lnScale: number } {
  const { flux, weight, model } = samples;
  let best = Infinity;
  let start = { lnT: Math.log(6000), lnScale: 0 };
  for (let t = COOLEST; t < HOTTEST; t *= 1.15) {
    lnShape(samples, Math.log(t), av);
    const top = model.reduce((a, b) => Math.max(a, b), -Infinity);
    let mf = 0;
    let mm = 0;
    let ff = 0;
    for (let i = 0; i < flux.length; i++) {
      const m = Math.exp(model[i]! - top) * weight[i]!;
      const f = flux[i]! * weight[i]!;
      mf += m * f;
      mm += m * m;
      ff += f * f;
    }
    const chi2 = ff - (mf * mf) / mm;
    if (mf > 0 && chi2 < best) {
      best = chi2;
      start = { lnT: Math.log(t), lnScale: Math.log(mf / mm) - top };
    }
  }
  return start;
}

/** Levenberg-Marquardt from `p`, which is changed in place. */
function iterate(samples: Samples, p: Float64Array, columns: number, degrees: number): PlanckFit {
  const normal = new Float64Array(columns * columns);
  const right = new Float64Array(columns);
  const trial = new Float64Array(3);
  let damping = 1e-3;
  let chi2 = normalEquations(samples, p, columns, normal, right);
  let iterations = 0;
  let settled = false;
  while (!settled && iterations < MOST_ITERATIONS) {
    iterations++;
    const factor = normal.slice();
    const step = right.slice();
    for (let j = 0; j < columns; j++) factor[j * columns + j] = factor[j * columns + j]! * (1 + damping);
    if (!choleskyInPlace(factor, columns)) return result('singular', iterations, p, null, chi2, degrees, columns);
    choleskySolve(factor, columns, step);
    trial.set(p);
    let gain = 0;
    for (let j = 0; j < columns; j++) {
      trial[j] = p[j]! + step[j]!;
      gain += step[j]! * right[j]!;
    }
    const trialChi2 = chiSquare(samples, trial);
    if (trialChi2 <= chi2) {
      p.set(trial);
      chi2 = normalEquations(samples, p, columns, normal, right);
      damping = Math.max(1e-9, damping / 10);
    } else damping *= 10;
    // a step that can lower chi2 by less than 1e-12 moves no parameter by more than 1e-6 of its error
    settled = gain < 1e-12 || damping > 1e12;
  }
  return result(settled ? 'converged' : 'iteration_limit', iterations, p, normal, chi2, degrees, columns);
}

function chiSquare(samples: Samples, p: Float64Array): number {
  const { flux, weight, model } = samples;
  lnShape(samples, p[0]!, p[2]!);
  let chi2 = 0;
  for (let i = 0; i < flux.length; i++) chi2 += ((flux[i]! - Math.exp(model[i]! + p[1]!)) * weight[i]!) ** 2;
  return chi2;
}

function normalEquations(samples: Samples, p: Float64Array, columns: number, normal: Float64Array, right: Float64Array): number {
  const { nm, flux, weight, curve, model } = samples;
  const temperature = Math.exp(p[0]!);
  const gradient = new Float64Array(3);
  normal.fill(0);
  right.fill(0);
  lnShape(samples, p[0]!, p[2]!);
  let chi2 = 0;
  for (let i = 0; i < flux.length; i++) {
    const m = Math.exp(model[i]! + p[1]!) * weight[i]!;
    const residual = flux[i]! * weight[i]! - m;
    chi2 += residual * residual;
    gradient[0] = m * planckSlope(nm[i]!, temperature);
    gradient[1] = m;
    gradient[2] = m * curve[i]!;
    for (let j = 0; j < columns; j++) {
      right[j] = right[j]! + gradient[j]! * residual;
      for (let k = 0; k <= j; k++) normal[j * columns + k] = normal[j * columns + k]! + gradient[j]! * gradient[k]!;
    }
  }
  return chi2;
}

function result(
  end: PlanckFit['end'],
  iterations: number,
  p: Float64Array,
  normal: Float64Array | null,
  chi2: number,
  degrees: number,
  columns: number,
): PlanckFit {
  const covariance = normal && inverse(normal, columns);
  const sigma = (j: number) => (covariance ? Math.sqrt(covariance[j * columns + j]!) : NaN);
  const temperatureK = Math.exp(p[0]!);
  return {
    end,
    iterations,
    temperatureK,
    temperatureSigmaK: temperatureK * sigma(0),
    lnScale: p[1]!,
    lnScaleSigma: sigma(1),
    av: p[2]!,
    avSigma: columns > 2 ? sigma(2) : 0,
    correlation: covariance ? covariance[1]! / (sigma(0) * sigma(1)) : NaN,
    chi2,
    degrees,
  };
}

/** Inverse of a symmetric matrix of which the lower triangle is given; null when singular. */
function inverse(normal: Float64Array, n: number): Float64Array | null {
  const factor = normal.slice();
  if (!choleskyInPlace(factor, n)) return null;
  const out = new Float64Array(n * n);
  const column = new Float64Array(n);
  for (let c = 0; c < n; c++) {
    column.fill(0);
    column[c] = 1;
    choleskySolve(factor, n, column);
    for (let r = 0; r < n; r++) out[r * n + c] = column[r]!;
  }
  return out;
}
