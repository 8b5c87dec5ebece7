import { choleskyInPlace, choleskySolve } from '../numeric/linear.js';
import { look, settle, type Component } from './component.js';
import { dampedInto, dampedTable, type DampedTable } from './damped.js';
import { addComponent, indexAt, type NormalisedSamples } from './samples.js';

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
const ROUGH_ITERATIONS = 7;
const FINE = 1e-3;
/** Chi-square that a step must gain for the fit to go on, while features are still being found. */
export const ROUGH = 0.02;
const DAMPED_RANGE = 4; // FWHM; wings further out carry hardly any weight on the parameters
const SIMPLE = 3; // parameters: amplitude, centre, ln scale
const DAMPED = 5; // and ln tau, a
const TAU_LIMITS = [0.02, 3e4] as const;
const A_LIMITS = [0.005, 3] as const;

/** Wavelengths that a set of components covers, nm. */
export function rangeOf(components: readonly Component[]): readonly [number, number] {
  let low = Infinity;
  let high = -Infinity;
  for (const c of components) {
    const r = c.damped ? Math.min(c.reach, DAMPED_RANGE * c.fwhm) : c.reach;
    low = Math.min(low, c.centre - r);
    high = Math.max(high, c.centre + r);
  }
  return [low, high];
}

/** Chi-square of components as they stand over a range (nm). */
export function chi2Of(data: NormalisedSamples, components: readonly Component[], range: readonly [number, number]): number {
  const from = indexAt(data.wavelength, range[0]);
  const to = indexAt(data.wavelength, range[1]);
  grow(to - from, 0);
  const { base, add } = scratch;
  base.fill(1, 0, to - from);
  add.fill(0, 0, to - from);
  for (const c of components) addComponent(c, data.wavelength, from, to, base, add);
  let chi2 = 0;
  for (let i = from; i < to; i++) chi2 += data.weight[i]! * (data.flux[i]! - base[i - from]! - add[i - from]!) ** 2;
  return chi2;
}

/** Scratch of one fit, grown when needed and reused: a loop over blends allocates nothing big. */
const scratch = {
  base: new Float64Array(0),
  add: new Float64Array(0),
  normal: new Float64Array(0),
  factor: new Float64Array(0),
  gradient: new Float64Array(0),
  step: new Float64Array(0),
  derivative: new Float64Array(0),
};

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
    scratch.derivative = new Float64Array(parameters);
  }
}

/** A component in the fit: where its parameters stand in the normal matrix, and what limits them. */
interface Slot {
  readonly c: Component;
  readonly at: number;
  readonly size: number;
  readonly startCentre: number;
  readonly startFwhm: number;
  table: DampedTable | null;
}

/**
 * Fits the free components of a blend together, all `others` held fixed, by damped least squares (Levenberg 1944, Marquardt 1963) with
 * analytic derivatives. Writes parameters and their 1-sigma errors into the free components; errors come from the undamped normal matrix.
 * @param free components to move
 * @param others components that overlap their range
 * @param precision chi-square that a step must gain for the fit to go on
 * @param range wavelengths (nm) whose samples count; by default what the free components cover. Fits to be compared need the same range
 */
export function fitBlend(
  data: NormalisedSamples,
  free: Component[],
  others: readonly Component[],
  limits: BlendLimits,
  range = rangeOf(free),
  precision = FINE,
): BlendFit {
  const from = indexAt(data.wavelength, range[0]);
  const to = indexAt(data.wavelength, range[1]);
  let parameters = 0;
  const slots = free.map((c): Slot => {
    const size = c.damped ? DAMPED : SIMPLE;
    const slot = { c, at: parameters, size, startCentre: c.centre, startFwhm: c.fwhm, table: null };
    parameters += size;
    return slot;
  });
  grow(to - from, parameters);
  scratch.base.fill(1, 0, to - from);
  scratch.add.fill(0, 0, to - from);
  for (const c of others) addComponent(c, data.wavelength, from, to, scratch.base, scratch.add);

  let damping = 1e-3;
  let chi2 = accumulate(data, slots, parameters, from, to);
  let end: BlendFit['end'] = 'iteration_limit';
  const iterations = precision > FINE ? ROUGH_ITERATIONS : MAX_ITERATIONS;
  for (let iteration = 0; iteration < iterations; iteration++) {
    const kept = free.map((c) => ({
      amplitude: c.amplitude,
      centre: c.centre,
      scale: c.scale,
      damped: c.damped,
      fwhm: c.fwhm,
      area: c.area,
      reach: c.reach,
    }));
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
    for (const s of slots) move(s, scratch.step, limits);
    const next = accumulate(data, slots, parameters, from, to);
    if (next <= chi2) {
      const gain = chi2 - next;
      chi2 = next;
      damping = Math.max(damping * 0.2, 1e-9);
      if (gain < precision + (precision > FINE ? 3e-4 : 1e-6) * chi2) {
        end = 'converged';
        break;
      }
    } else {
      free.forEach((c, k) => Object.assign(c, kept[k]));
      damping *= 8;
      chi2 = accumulate(data, slots, parameters, from, to);
      if (damping > 1e7) {
        end = 'converged';
        break;
      }
    }
  }
  writeErrors(slots, parameters);
  return { chi2, end };
}

const clamp = (x: number, limit: number): number => Math.max(-limit, Math.min(limit, x));
const within = (x: number, [low, high]: readonly [number, number]): number => Math.max(low, Math.min(high, x));

function move({ c, at, startCentre, startFwhm }: Slot, step: Float64Array, limits: BlendLimits): void {
  c.amplitude = Math.min(Math.max(c.amplitude + clamp(step[at]!, Math.max(0.5 * c.amplitude, 0.2)), 0), c.kind === 'dip' ? 1 : Infinity);
  c.centre = startCentre + clamp(c.centre + clamp(step[at + 1]! * c.scale, 0.5 * c.fwhm) - startCentre, startFwhm);
  const factor = Math.exp(clamp(step[at + 2]!, 0.4));
  c.scale *= factor;
  if (c.damped)
    c.damped = {
      tau: within(c.damped.tau * Math.exp(clamp(step[at + 3]!, 0.7)), TAU_LIMITS),
      a: within(c.damped.a + clamp(step[at + 4]!, 0.3), A_LIMITS),
    };
  settle(c);
  const allowed = within(c.fwhm, [limits.narrowest, limits.widest]) / c.fwhm;
  if (allowed !== 1) {
    c.scale *= allowed;
    settle(c);
  }
}

const damped4 = new Float64Array(4);

/** Fills normal matrix and gradient at the present parameters; returns chi-square over the range. */
function accumulate(data: NormalisedSamples, slots: readonly Slot[], p: number, from: number, to: number): number {
  const { normal, gradient, base, add, derivative } = scratch;
  normal.fill(0, 0, p * p);
  gradient.fill(0, 0, p);
  for (const s of slots) s.table = s.c.damped ? dampedTable(s.c.damped) : null;
  const active: Slot[] = new Array(slots.length);
  const clear = new Float64Array(slots.length);
  let chi2 = 0;
  for (let i = from; i < to; i++) {
    const w = data.weight[i]!;
    if (w === 0) continue;
    const x = data.wavelength[i]!;
    let product = base[i - from]!;
    let sum = add[i - from]!;
    let count = 0;
    for (const slot of slots) {
      const { c, at } = slot;
      const dx = x - c.centre;
      if (dx >= c.reach || dx <= -c.reach) continue;
      const value = derivatives(slot, dx, derivative, at);
      if (c.kind === 'dip') {
        const left = Math.max(1 - c.amplitude * value, 1e-4);
        clear[count] = left;
        product *= left;
      } else sum += c.amplitude * value;
      active[count++] = slot;
    }
    const residual = data.flux[i]! - product - sum;
    chi2 += w * residual * residual;
    for (let a = 0; a < count; a++) {
      const { c, at, size } = active[a]!;
      const factor = c.kind === 'dip' ? -product / clear[a]! : 1;
      for (let q = 0; q < size; q++) {
        const d = (derivative[at + q]! *= factor);
        if (d === 0) continue;
        const wd = w * d;
        gradient[at + q]! += wd * residual;
        const row = (at + q) * p;
        for (let b = 0; b < a; b++) {
          const { at: bt, size: bs } = active[b]!;
          for (let r = 0; r < bs; r++) normal[row + bt + r]! += wd * derivative[bt + r]!;
        }
        for (let r = 0; r <= q; r++) normal[row + at + r]! += wd * derivative[at + r]!;
      }
    }
  }
  for (let k = 0; k < p; k++) {
    if (normal[k * p + k]! === 0) normal[k * p + k] = 1; // a parameter off the data is held
    for (let q = k + 1; q < p; q++) normal[k * p + q] = normal[q * p + k]!;
  }
  return chi2;
}

/** phi at a distance; derivatives of amplitude * phi by amplitude, centre (in scales), ln scale (and ln tau, a) go to `out` from `at`. */
function derivatives({ c, table }: Slot, dx: number, out: Float64Array, at: number): number {
  const u = Math.abs(dx) / c.scale;
  let value: number;
  let slope: number;
  if (table) {
    dampedInto(damped4, table, u);
    value = damped4[0]!;
    slope = damped4[1]!;
    out[at + 3] = c.amplitude * damped4[2]!;
    out[at + 4] = c.amplitude * damped4[3]!;
  } else {
    value = look(c.core.value, c.core, u);
    slope = look(c.core.slope, c.core, u);
  }
  out[at] = value;
  out[at + 1] = dx < 0 ? c.amplitude * slope : -c.amplitude * slope;
  out[at + 2] = -c.amplitude * slope * u;
  return value;
}

function writeErrors(slots: readonly Slot[], p: number): void {
  scratch.factor.set(scratch.normal.subarray(0, p * p));
  for (let k = 0; k < p; k++) scratch.factor[k * p + k]! *= 1 + 1e-9;
  const good = choleskyInPlace(scratch.factor, p);
  const column = scratch.step;
  /** variance of a linear combination of a slot's parameters */
  const variance = (slot: Slot, weights: readonly number[]): number => {
    if (!good) return NaN;
    column.fill(0, 0, p);
    weights.forEach((w, q) => (column[slot.at + q] = w));
    choleskySolve(scratch.factor, p, column);
    return weights.reduce((sum, w, q) => sum + w * column[slot.at + q]!, 0);
  };
  for (const slot of slots) {
    const { c } = slot;
    const shape = shapeDerivatives(c);
    c.sigmaAmplitude = Math.sqrt(variance(slot, [1]));
    c.sigmaCentre = Math.sqrt(variance(slot, [0, 1])) * c.scale;
    c.sigmaLogFwhm = Math.sqrt(variance(slot, [0, 0, 1, ...shape.fwhm]));
    c.sigmaEquivalentWidth = Math.sqrt(
      variance(slot, [c.area, 0, c.amplitude * c.area, ...shape.area.map((d) => d * c.amplitude * c.area)]),
    );
  }
}

/** Derivatives of ln FWHM and ln area by ln tau and a, by differences; none for fixed shapes. */
function shapeDerivatives(c: Component): { fwhm: number[]; area: number[] } {
  if (!c.damped) return { fwhm: [], area: [] };
  const { tau, a } = c.damped;
  const h = 0.01;
  const here = dampedTable(c.damped);
  const there = [dampedTable({ tau: tau * Math.exp(h), a }), dampedTable({ tau, a: a + h })];
  return { fwhm: there.map((t) => Math.log(t.fwhm / here.fwhm) / h), area: there.map((t) => Math.log(t.area / here.area) / h) };
}
