import { choleskyInPlace, choleskySolve } from '../numeric/linear.js';
import { look, reachOf, type Component } from './component.js';
import { LORENTZ } from './shapes.js';

/** Flux over continuum with inverse variances (0 where a sample must not count); columns of equal length. */
export interface NormalisedSamples {
  /** vacuum nm, ascending */
  readonly wavelength: Float64Array;
  readonly flux: Float64Array;
  readonly weight: Float64Array;
}

/** Index of the first sample at or beyond a wavelength. */
export function indexAt(wavelength: Float64Array, value: number): number {
  let low = 0;
  let high = wavelength.length;
  while (low < high) {
    const mid = (low + high) >> 1;
    if (wavelength[mid]! < value) low = mid + 1;
    else high = mid;
  }
  return low;
}

/** Multiplies dips into `dips` and adds peaks to `peaks` over samples [from, to). */
export function addComponent(c: Component, wavelength: Float64Array, from: number, to: number, dips: Float64Array, peaks: Float64Array, offset = from): void {
  const reach = reachOf(c);
  const a = Math.max(from, indexAt(wavelength, c.centre - reach));
  const z = Math.min(to, indexAt(wavelength, c.centre + reach));
  const inverse = 1 / c.fwhm;
  for (let i = a; i < z; i++) {
    const u = Math.abs(wavelength[i]! - c.centre) * inverse;
    let p = look(c.core.value, c.core, u);
    if (c.eta !== 0) p += c.eta * (look(LORENTZ.value, LORENTZ, u) - p);
    if (c.kind === 'dip') dips[i - offset]! *= 1 - c.amplitude * p;
    else peaks[i - offset]! += c.amplitude * p;
  }
}

export interface BlendLimits {
  /** narrowest and widest FWHM allowed, nm */
  readonly narrowest: number;
  readonly widest: number;
}

export interface BlendFit {
  readonly chi2: number;
  readonly end: 'converged' | 'iteration_limit' | 'singular';
}

const MAX_ITERATIONS = 14;
const WINGED_REACH = 4; // FWHM; wings further out carry hardly any weight on the parameters
const PER = 4; // amplitude, centre, ln FWHM, eta

/** Wavelengths that a set of components covers, nm. */
export function rangeOf(components: readonly Component[]): readonly [number, number] {
  let low = Infinity;
  let high = -Infinity;
  for (const c of components) {
    const r = c.fwhm * (c.winged ? WINGED_REACH : c.core.reach);
    low = Math.min(low, c.centre - r);
    high = Math.max(high, c.centre + r);
  }
  return [low, high];
}

/** Scratch of one fit, grown when needed and reused: a loop over blends allocates nothing big. */
const scratch = { base: new Float64Array(0), add: new Float64Array(0), normal: new Float64Array(0), factor: new Float64Array(0), gradient: new Float64Array(0), step: new Float64Array(0) };

function grow(samples: number, parameters: number): void {
  if (scratch.base.length < samples) {
    scratch.base = new Float64Array(samples * 2);
    scratch.add = new Float64Array(samples * 2);
  }
  if (scratch.gradient.length < parameters) {
    scratch.normal = new Float64Array(parameters * parameters);
    scratch.factor = new Float64Array(parameters * parameters);
    scratch.gradient = new Float64Array(parameters);
    scratch.step = new Float64Array(parameters);
  }
}

/**
 * Fits the free components of a blend together, all `others` held fixed, by damped least squares with analytic derivatives.
 * Writes parameters and their 1-sigma errors into the free components. Errors come from the undamped normal matrix of this fit.
 * @param free components to move
 * @param others components that overlap their range
 * @param range wavelengths (nm) whose samples count; by default what the free components cover. Fits to be compared need the same range
 */
export function fitBlend(data: NormalisedSamples, free: Component[], others: readonly Component[], limits: BlendLimits, range = rangeOf(free)): BlendFit {
  const [low, high] = range;
  const from = indexAt(data.wavelength, low);
  const to = indexAt(data.wavelength, high);
  const n = to - from;
  const parameters = free.length * PER;
  grow(n, parameters);
  scratch.base.fill(1, 0, n);
  scratch.add.fill(0, 0, n);
  for (const c of others) addComponent(c, data.wavelength, from, to, scratch.base, scratch.add);

  const start = free.map((c) => ({ centre: c.centre, fwhm: c.fwhm }));
  let damping = 1e-3;
  let chi2 = accumulate(data, free, from, to);
  let end: BlendFit['end'] = 'iteration_limit';
  for (let iteration = 0; iteration < MAX_ITERATIONS; iteration++) {
    const kept = free.map((c) => [c.amplitude, c.centre, c.fwhm, c.eta] as const);
    scratch.factor.set(scratch.normal.subarray(0, parameters * parameters));
    for (let k = 0; k < parameters; k++) scratch.factor[k * parameters + k]! *= 1 + damping;
    scratch.step.set(scratch.gradient.subarray(0, parameters));
    if (!choleskyInPlace(scratch.factor, parameters)) {
      damping *= 10;
      if (damping > 1e6) {
        end = 'singular';
        break;
      }
      continue;
    }
    choleskySolve(scratch.factor, parameters, scratch.step);
    free.forEach((c, k) => move(c, start[k]!, scratch.step, k * PER, limits));
    const next = accumulate(data, free, from, to);
    if (next <= chi2) {
      const gain = chi2 - next;
      chi2 = next;
      damping = Math.max(damping * 0.2, 1e-9);
      if (gain < 1e-3) {
        end = 'converged';
        break;
      }
    } else {
      free.forEach((c, k) => ([c.amplitude, c.centre, c.fwhm, c.eta] = kept[k]!));
      damping *= 8;
      chi2 = accumulate(data, free, from, to);
      if (damping > 1e7) {
        end = 'converged';
        break;
      }
    }
  }
  writeErrors(free, parameters);
  return { chi2, end };
}

function move(c: Component, start: { centre: number; fwhm: number }, step: Float64Array, at: number, limits: BlendLimits): void {
  c.amplitude = Math.min(Math.max(c.amplitude + clamp(step[at]!, Math.max(0.5 * c.amplitude, 0.2)), 0), c.kind === 'dip' ? 1 : Infinity);
  c.centre = start.centre + clamp(c.centre + clamp(step[at + 1]!, 0.5) * c.fwhm - start.centre, start.fwhm);
  c.fwhm = Math.min(Math.max(c.fwhm * Math.exp(clamp(step[at + 2]!, 0.4)), limits.narrowest), limits.widest);
  if (c.winged) c.eta = Math.min(Math.max(c.eta + clamp(step[at + 3]!, 0.3), 0), 1);
}

const clamp = (x: number, limit: number): number => Math.max(-limit, Math.min(limit, x));

/** Fills normal matrix and gradient at the present parameters; returns chi-square over the range. */
function accumulate(data: NormalisedSamples, free: readonly Component[], from: number, to: number): number {
  const p = free.length * PER;
  const { normal, gradient, base, add } = scratch;
  normal.fill(0, 0, p * p);
  gradient.fill(0, 0, p);
  const derivative = new Float64Array(p);
  const active = new Int32Array(free.length);
  const reach = Float64Array.from(free, (c) => c.fwhm * (c.winged ? LORENTZ.reach : c.core.reach));
  const one = new Float64Array(free.length);
  let chi2 = 0;
  for (let i = from; i < to; i++) {
    const w = data.weight[i]!;
    if (w === 0) continue;
    const x = data.wavelength[i]!;
    let product = base[i - from]!;
    let sum = add[i - from]!;
    let count = 0;
    for (let k = 0; k < free.length; k++) {
      const c = free[k]!;
      const dx = x - c.centre;
      if (Math.abs(dx) >= reach[k]!) continue;
      const u = Math.abs(dx) / c.fwhm;
      let value = look(c.core.value, c.core, u);
      let slope = look(c.core.slope, c.core, u);
      const at = k * PER;
      derivative[at + 3] = 0;
      if (c.winged) {
        const wing = look(LORENTZ.value, LORENTZ, u);
        derivative[at + 3] = c.amplitude * (wing - value);
        value += c.eta * (wing - value);
        slope += c.eta * (look(LORENTZ.slope, LORENTZ, u) - slope);
      }
      derivative[at] = value;
      derivative[at + 1] = -c.amplitude * slope * Math.sign(dx);
      derivative[at + 2] = -c.amplitude * slope * u;
      if (c.kind === 'dip') {
        one[k] = Math.max(1 - c.amplitude * value, 1e-4);
        product *= one[k]!;
      } else sum += c.amplitude * value;
      active[count++] = k;
    }
    const residual = data.flux[i]! - product - sum;
    chi2 += w * residual * residual;
    for (let a = 0; a < count; a++) {
      const k = active[a]!;
      const at = k * PER;
      const factor = free[k]!.kind === 'dip' ? -product / one[k]! : 1;
      for (let q = 0; q < PER; q++) derivative[at + q]! *= factor;
      for (let q = 0; q < PER; q++) {
        const d = derivative[at + q]!;
        if (d === 0) continue;
        gradient[at + q]! += w * d * residual;
        const row = (at + q) * p;
        for (let b = 0; b <= a; b++) {
          const bt = active[b]! * PER;
          const last = b === a ? q + 1 : PER;
          for (let r = 0; r < last; r++) normal[row + bt + r]! += w * d * derivative[bt + r]!;
        }
      }
    }
  }
  for (let k = 0; k < p; k++) {
    if (normal[k * p + k]! === 0) normal[k * p + k] = 1; // eta of a wingless profile, or a profile off the data: held
    for (let q = k + 1; q < p; q++) normal[k * p + q] = normal[q * p + k]!;
  }
  return chi2;
}

function writeErrors(free: Component[], p: number): void {
  scratch.factor.set(scratch.normal.subarray(0, p * p));
  for (let k = 0; k < p; k++) scratch.factor[k * p + k]! *= 1 + 1e-9;
  const good = choleskyInPlace(scratch.factor, p);
  const column = scratch.step;
  const variance = (at: number): number => {
    if (!good) return NaN;
    column.fill(0, 0, p);
    column[at] = 1;
    choleskySolve(scratch.factor, p, column);
    return column[at]!;
  };
  free.forEach((c, k) => {
    const at = k * PER;
    c.sigmaCentre = Math.sqrt(variance(at + 1)) * c.fwhm;
    c.sigmaLogFwhm = Math.sqrt(variance(at + 2));
    c.sigmaAmplitude = Math.sqrt(variance(at));
    c.covAmplitudeLogFwhm = column[at + 2]!;
  });
}
