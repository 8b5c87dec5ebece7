import { choleskyInPlace, choleskySolve } from '../numeric/linear.js';
import { settle, type Component } from './component.js';
import { dampedTable, type DampedShape } from './damped.js';
import { DAMPED, derivativesInto, SIMPLE } from './derivatives.js';
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
/** Depth, width and damping of a damped profile stand for each other over some range: the way is longer. */
const DAMPED_PATIENCE = 2.5;
const FINE = 1e-3;
/** Chi-square that a step must gain for the fit to go on, while features are still being found. */
export const ROUGH = 0.02;
const DAMPED_RANGE = 4; // FWHM; wings further out carry hardly any weight on the parameters
const TAU_LIMITS = [0.02, 3e4] as const;
const A_LIMITS = [0.02, 3] as const; // what the shapes of hydrogen lines need
const A_LIMITS_NARROW = [1e-4, 3] as const; // and those of clouds, seen through the instrument

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
  growSamples(to - from, 0);
  const { base, add } = scratch;
  base.fill(1, 0, to - from);
  add.fill(0, 0, to - from);
  for (const c of components) addComponent(c, data.wavelength, from, to, base, add);
  let chi2 = 0;
  for (let i = from; i < to; i++) chi2 += data.weight[i]! * (data.flux[i]! - base[i - from]! - add[i - from]!) ** 2;
  return chi2;
}

const none = (): Float64Array => new Float64Array(0);
/** Scratch of one fit, grown when needed and reused: a loop over blends allocates nothing big. */
const scratch = {
  // by sample
  base: none(),
  add: none(),
  product: none(),
  residual: none(),
  // by component or parameter, and sample
  left: none(),
  derivative: none(),
  // by parameter
  normal: none(),
  keptNormal: none(),
  factor: none(),
  gradient: none(),
  keptGradient: none(),
  step: none(),
  kept: none(),
};

function growSamples(samples: number, columns: number): void {
  if (scratch.base.length < samples)
    for (const key of ['base', 'add', 'product', 'residual'] as const) scratch[key] = new Float64Array(samples * 2);
  if (scratch.derivative.length < samples * columns) {
    scratch.derivative = new Float64Array(samples * columns * 2);
    scratch.left = new Float64Array(samples * columns * 2);
  }
}

function growParameters(p: number): void {
  if (scratch.gradient.length >= p) return;
  for (const key of ['normal', 'keptNormal', 'factor'] as const) scratch[key] = new Float64Array(p * p);
  for (const key of ['gradient', 'keptGradient', 'step', 'kept'] as const) scratch[key] = new Float64Array(p);
}

/** A component in the fit: where its parameters stand in the normal matrix, what limits them, and the samples it reaches now. */
interface Slot {
  readonly c: Component;
  readonly at: number;
  readonly size: number;
  readonly startCentre: number;
  readonly startFwhm: number;
  from: number;
  to: number;
  keptDamped: DampedShape | null;
}

function slotsOf(free: readonly Component[]): { slots: Slot[]; parameters: number } {
  let parameters = 0;
  const slots = free.map((c): Slot => {
    const size = c.damped ? DAMPED : SIMPLE;
    const slot = { c, at: parameters, size, startCentre: c.centre, startFwhm: c.fwhm, from: 0, to: 0, keptDamped: null };
    parameters += size;
    return slot;
  });
  return { slots, parameters };
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
  free: readonly Component[],
  others: readonly Component[],
  limits: BlendLimits,
  range = rangeOf(free),
  precision = FINE,
): BlendFit {
  const from = indexAt(data.wavelength, range[0]);
  const to = indexAt(data.wavelength, range[1]);
  const { slots, parameters } = slotsOf(free);
  for (const c of free) confine(c, limits);
  growSamples(to - from, parameters);
  growParameters(parameters);
  scratch.base.fill(1, 0, to - from);
  scratch.add.fill(0, 0, to - from);
  for (const c of others) addComponent(c, data.wavelength, from, to, scratch.base, scratch.add);

  let damping = 1e-3;
  let chi2 = accumulate(data, slots, parameters, from, to);
  let end: BlendFit['end'] = 'iteration_limit';
  const rough = precision > FINE;
  const most = (rough ? ROUGH_ITERATIONS : MAX_ITERATIONS) * (parameters > SIMPLE * slots.length ? DAMPED_PATIENCE : 1);
  for (let iteration = most; iteration > 0; iteration--) {
    if (!solve(parameters, damping)) {
      damping *= 10;
      if (damping < 1e6) continue;
      end = 'singular';
      break;
    }
    keep(slots, parameters);
    for (const s of slots) move(s, scratch.step, limits);
    const next = accumulate(data, slots, parameters, from, to);
    if (next <= chi2) {
      const gain = chi2 - next;
      chi2 = next;
      damping = Math.max(damping * 0.2, 1e-9);
      if (gain >= precision + (rough ? 3e-4 : 1e-6) * chi2) continue;
      end = 'converged';
      break;
    }
    restore(slots);
    damping *= 8;
    if (damping < 1e7) continue;
    end = 'converged';
    break;
  }
  writeErrors(slots, parameters);
  return { chi2, end };
}

/** The damped step that the normal matrix asks for, to `scratch.step`; false where the matrix is singular. */
function solve(p: number, damping: number): boolean {
  const { normal, factor, gradient, step } = scratch;
  for (let k = p * p - 1; k >= 0; k--) factor[k] = normal[k]!;
  for (let k = 0; k < p; k++) {
    factor[k * p + k]! *= 1 + damping;
    step[k] = gradient[k]!;
  }
  if (!choleskyInPlace(factor, p)) return false;
  choleskySolve(factor, p, step);
  return true;
}

/** Holds parameters, matrix and gradient, for the case that the step makes things worse. */
function keep(slots: readonly Slot[], p: number): void {
  const { kept } = scratch;
  for (const s of slots) {
    kept[s.at] = s.c.amplitude;
    kept[s.at + 1] = s.c.centre;
    kept[s.at + 2] = s.c.scale;
    s.keptDamped = s.c.damped;
  }
  [scratch.normal, scratch.keptNormal] = [scratch.keptNormal, scratch.normal];
  [scratch.gradient, scratch.keptGradient] = [scratch.keptGradient, scratch.gradient];
  if (scratch.gradient.length < p) throw new RangeError('scratch grew during a fit');
}

function restore(slots: readonly Slot[]): void {
  const { kept } = scratch;
  for (const { c, at, keptDamped } of slots) {
    c.amplitude = kept[at]!;
    c.centre = kept[at + 1]!;
    c.scale = kept[at + 2]!;
    c.damped = keptDamped;
    settle(c);
  }
  [scratch.normal, scratch.keptNormal] = [scratch.keptNormal, scratch.normal];
  [scratch.gradient, scratch.keptGradient] = [scratch.keptGradient, scratch.gradient];
}

const clamp = (x: number, limit: number): number => Math.max(-limit, Math.min(limit, x));
const within = (x: number, [low, high]: readonly [number, number]): number => Math.max(low, Math.min(high, x));

function move({ c, at, startCentre, startFwhm }: Slot, step: Float64Array, limits: BlendLimits): void {
  c.amplitude = Math.min(Math.max(c.amplitude + clamp(step[at]!, Math.max(0.5 * c.amplitude, 0.2)), 0), c.kind === 'dip' ? 1 : Infinity);
  c.centre = startCentre + clamp(c.centre + clamp(step[at + 1]! * c.scale, 0.5 * c.fwhm) - startCentre, startFwhm);
  stretch(c, Math.exp(clamp(step[at + 2]!, 0.4)));
  if (c.damped) {
    const limitsOfA = c.damped.smear?.kind === 'instrument' ? A_LIMITS_NARROW : A_LIMITS;
    c.damped = {
      ...c.damped,
      tau: within(c.damped.tau * Math.exp(clamp(step[at + 3]!, 0.7)), TAU_LIMITS),
      a: within(c.damped.a * Math.exp(clamp(step[at + 4]!, 0.7)), limitsOfA),
    };
  }
  settle(c);
  confine(c, limits);
}

/** Keeps the width of a component within its limits. */
function confine(c: Component, limits: BlendLimits): void {
  const allowed = within(c.fwhm, [limits.narrowest, limits.widest]) / c.fwhm;
  if (allowed === 1) return;
  stretch(c, allowed);
  settle(c);
}

/** Changes the scale of a component; what smears it keeps its width in wavelength. */
function stretch(c: Component, factor: number): void {
  c.scale *= factor;
  const smear = c.damped?.smear;
  if (c.damped && smear) c.damped = { ...c.damped, smear: { kind: smear.kind, width: smear.width / factor } };
}

/** Fills normal matrix and gradient at the present parameters; returns chi-square over the range. */
function accumulate(data: NormalisedSamples, slots: readonly Slot[], p: number, from: number, to: number): number {
  const { base, add, product, residual, left, derivative, normal, gradient } = scratch;
  const { wavelength, flux, weight } = data;
  const samples = to - from;
  for (let i = 0; i < samples; i++) {
    product[i] = base[i]!;
    residual[i] = add[i]!; // holds the peaks' sum until the model is complete
  }
  for (let s = 0; s < slots.length; s++) {
    const slot = slots[s]!;
    const { c } = slot;
    slot.from = Math.max(from, indexAt(wavelength, c.centre - c.reach)) - from;
    slot.to = Math.max(slot.from, Math.min(to, indexAt(wavelength, c.centre + c.reach)) - from);
    derivativesInto(derivative, c, wavelength, from, slot.from, slot.to, slot.at * samples, samples);
    const row = slot.at * samples;
    if (c.kind === 'dip') {
      const clear = s * samples;
      for (let i = slot.from; i < slot.to; i++) {
        const l = Math.max(1 - c.amplitude * derivative[row + i]!, 1e-4);
        left[clear + i] = l;
        product[i]! *= l;
      }
    } else for (let i = slot.from; i < slot.to; i++) residual[i]! += c.amplitude * derivative[row + i]!;
  }
  let chi2 = 0;
  for (let i = 0; i < samples; i++) {
    const r = flux[from + i]! - product[i]! - residual[i]!;
    const wr = weight[from + i]! * r;
    chi2 += wr * r;
    residual[i] = wr;
  }
  for (let s = 0; s < slots.length; s++) {
    const { c, at, size, from: a, to: z } = slots[s]!;
    if (c.kind === 'dip') {
      const clear = s * samples;
      for (let i = a; i < z; i++) {
        const factor = -product[i]! / left[clear + i]!;
        for (let q = 0, k = at * samples + i; q < size; q++, k += samples) derivative[k]! *= factor;
      }
    }
    for (let q = 0; q < size; q++) {
      const row = (at + q) * samples;
      let sum = 0;
      for (let i = a; i < z; i++) sum += derivative[row + i]! * residual[i]!;
      gradient[at + q] = sum;
    }
    for (let other = 0; other <= s; other++) multiply(slots[s]!, slots[other]!, weight, from, samples, p);
  }
  for (let k = 0; k < p; k++) if (normal[k * p + k] === 0) normal[k * p + k] = 1; // a parameter off the data is held
  return chi2;
}

/** The normal matrix's rows of one component by the columns of another (or its own), into the lower triangle. */
function multiply(one: Slot, other: Slot, weight: Float64Array, from: number, samples: number, p: number): void {
  const { derivative: d, normal } = scratch;
  const a = Math.max(one.from, other.from);
  const z = Math.min(one.to, other.to);
  for (let q = 0; q < one.size; q++) {
    const x = (one.at + q) * samples;
    const last = one === other ? q + 1 : other.size;
    for (let r = 0; r < last; r++) {
      const y = (other.at + r) * samples;
      let sum = 0;
      for (let i = a; i < z; i++) sum += weight[from + i]! * d[x + i]! * d[y + i]!;
      normal[(one.at + q) * p + other.at + r] = sum;
    }
  }
}

function writeErrors(slots: readonly Slot[], p: number): void {
  const good = factorAgain(p);
  const column = scratch.step;
  /** variance of a linear combination of a slot's parameters */
  const variance = (slot: Slot, q: number, weights: readonly number[]): number => {
    if (!good) return NaN;
    column.fill(0, 0, p);
    for (let k = 0; k < weights.length; k++) column[slot.at + q + k] = weights[k]!;
    choleskySolve(scratch.factor, p, column);
    let sum = 0;
    for (let k = 0; k < weights.length; k++) sum += weights[k]! * column[slot.at + q + k]!;
    return sum;
  };
  for (const slot of slots) {
    const { c } = slot;
    const strength = c.amplitude * c.area;
    const byShape = c.damped ? dampedTable(c.damped).byShape : FIXED;
    c.sigmaAmplitude = Math.sqrt(variance(slot, 0, ONE));
    c.sigmaCentre = Math.sqrt(variance(slot, 1, ONE)) * c.scale;
    c.sigmaLogFwhm = Math.sqrt(variance(slot, 2, byShape.fwhm));
    c.sigmaEquivalentWidth = Math.sqrt(variance(slot, 0, [c.area, 0, ...byShape.area.map((d) => d * strength)]));
  }
}

const ONE = [1];
const FIXED = { fwhm: ONE, area: ONE };

function factorAgain(p: number): boolean {
  for (let k = p * p - 1; k >= 0; k--) scratch.factor[k] = scratch.normal[k]!;
  for (let k = 0; k < p; k++) scratch.factor[k * p + k]! *= 1 + 1e-9;
  return choleskyInPlace(scratch.factor, p);
}
