import { newComponent, ROUGH, type BlendLimits, type Component, type NormalisedSamples } from '../profiles/index.js';
import { C_KM_PER_S } from '../units/index.js';
import { Changes } from './changes.js';
import { LineModel } from './model.js';
import { findExcesses, thresholdFor, type Excess } from './scale-space.js';
import { dropBridges, dropNeedless, mergeShreds, pruneWeak, splitBlends } from './refine.js';
import { findRotation, rotating, withdrawRotation, type Rotation } from './rotation.js';
import { gatherDamped, trySpecialShapes } from './special-shapes.js';

export interface DetectionInput {
  /** flux over continuum, inverse variances */
  readonly data: NormalisedSamples;
  readonly resolvingPower: number;
  /** autocorrelation of the noise at lags 0, 1, ... pixels */
  readonly correlation: readonly number[];
  readonly falseFeatures: number;
  /** relative 1-sigma error of the continuum's placement */
  readonly continuumSigma: number;
  /** one round of plain profiles, enough to see how wide lines are */
  readonly quick?: boolean;
}

export interface Detection {
  readonly model: LineModel;
  readonly threshold: number;
}

const FWHM_PER_SIGMA = 2 * Math.sqrt(2 * Math.LN2);
const ROUNDS = 5;
/** Relative misfit of profiles allowed for: a few per cent of the light that the model takes or adds beside strong neighbours. */
const PROFILE_FLOOR = 0.02;
const WIDEST_ELEMENTS = 6; // at low resolution hydrogen lines are a few resolution elements wide, whatever that is in nm
const PEAK_PLACEMENT = 0.0025;
const DIP_PLACEMENT = 0.0005;
const WIDEST_NM = 2.4; // broad diffuse bands; wider structure belongs to the continuum

/** Finds dips and peaks: rounds of matched filters on what the model does not explain, each followed by a joint refit. */
export function detect(input: DetectionInput): Detection {
  const { data, resolvingPower } = input;
  const n = data.wavelength.length;
  const sigmaPx = instrumentSigmaPx(data.wavelength, resolvingPower);
  const range = data.wavelength[n - 1]! - data.wavelength[0]!;
  const widestNm = Math.min(Math.max(WIDEST_NM, (WIDEST_ELEMENTS * data.wavelength[n >> 1]!) / resolvingPower), range / 8);
  const limits = (at: number): BlendLimits => ({
    narrowest: (0.5 * at) / resolvingPower,
    widest: Math.max(widestNm * 1.3, (2 * at) / resolvingPower),
  });
  const model = new LineModel(data, limits);
  let usable = 0;
  for (let i = 0; i < n; i++) if (data.weight[i]! > 0) usable++;
  const threshold = thresholdFor(input.falseFeatures, sigmaPx, usable, (widestNm / range) * n);

  const search = { instrumentSigmaPx: sigmaPx, widestNm, threshold, correlation: input.correlation };
  const changes = new Changes(model);
  let seen: boolean | null = null;
  let deferred: Excess[] = [];
  const first = findExcesses(residualOf(model, input.continuumSigma), { ...search, zeroMean: true });
  const rotation = input.quick ? null : scoutRotation(model, first, threshold, resolvingPower);
  for (let round = 0; round < (input.quick ? 1 : ROUNDS); round++) {
    const zeroMean = round < ROUNDS - 2;
    const only = seen === zeroMean && !rotation ? changes.since(deferred) : undefined;
    seen = zeroMean;
    changes.hold();
    const excesses = round === 0 ? first : findExcesses(residualOf(model, input.continuumSigma), { ...search, zeroMean, only });
    deferred = [];
    const fresh = chosen(excesses, model, threshold, rotation !== null, deferred).map((e) => componentOf(e, resolvingPower, rotation));
    if (fresh.length === 0 && !zeroMean) break;
    model.add(fresh);
    model.refit(1, round === 0 ? undefined : nearTo(model, fresh), ROUGH);
    if (rotation) withdrawRotation(model.components, rotation);
    model.refit(1, round === 0 ? undefined : nearTo(model, fresh), ROUGH);
    pruneWeak(model, threshold * 0.8);
    if (round === 0 && !input.quick) {
      trySpecialShapes(model, resolvingPower, rotation);
      model.refresh();
      gatherDamped(model, threshold, tolerantOf(model), resolvingPower, rotation);
      dropNeedless(model, threshold, tolerantOf(model), rotation);
      model.refit(1, undefined, ROUGH);
    }
    model.refresh();
  }
  if (input.quick) return { model, threshold };
  trySpecialShapes(model, resolvingPower, rotation);
  model.refresh();
  gatherDamped(model, threshold, tolerantOf(model), resolvingPower, rotation);
  dropNeedless(model, threshold, tolerantOf(model), rotation);
  dropBridges(model, threshold, tolerantOf(model));
  mergeShreds(model, threshold, tolerantOf(model));
  splitBlends(model, threshold, resolvingPower);
  if (rotation) withdrawRotation(model.components, rotation);
  model.refit(1, undefined, ROUGH);
  pruneWeak(model, threshold);
  model.refit(1);
  pruneWeak(model, threshold * 0.9);
  model.refresh();
  return { model, threshold };
}

/** Of the star's width: narrower dips are those of clouds and of the air, wider ones are the star's, or a corner of one. */
const LEAST_SHARE = 0.3;

/** How the star turns, from a first fit that leaves corners of broad profiles alone; the model is empty before and after. */
function scoutRotation(model: LineModel, excesses: readonly Excess[], threshold: number, resolvingPower: number): Rotation | null {
  model.add(chosen(excesses, model, threshold, true, []).map((e) => componentOf(e, resolvingPower, null)));
  model.refit(2, undefined, ROUGH);
  pruneWeak(model, threshold * 0.8);
  const rotation = findRotation(model, resolvingPower);
  model.remove(new Set(model.components));
  return rotation;
}

/** A component to begin with: of the star's profile where the width is like that of its lines. */
function componentOf(e: Excess, resolvingPower: number, rotation: Rotation | null): Component {
  const amplitude = e.kind === 'dip' ? Math.min(e.amplitude, 0.95) : e.amplitude;
  if (rotation && e.kind === 'dip') {
    const fwhm = rotation.relativeWidth * e.centre;
    if (e.fwhm > LEAST_SHARE * fwhm && e.fwhm < 1.7 * fwhm)
      return newComponent(e.kind, e.centre, fwhm, amplitude, rotating(rotation, rotation.relativeWidth));
  }
  return newComponent(e.kind, e.centre, Math.max(e.fwhm, e.centre / resolvingPower), amplitude);
}

const STEPS_EACH_SIDE = 8;
const LEAP = 4; // a step so many times the last one leads over a gap

/**
 * Sigma of the instrument profile in pixels, at every pixel. The step between samples is a mean over some neighbours, since rounded or
 * joined wavelengths make steps uneven, but never across a gap.
 */
export function instrumentSigmaPx(wavelength: Float64Array, resolvingPower: number): Float64Array {
  const n = wavelength.length;
  const out = new Float64Array(n);
  let from = 0;
  let last = NaN; // step before this one, in the run of samples without a gap
  for (let i = 1; i <= n; i++) {
    const step = i < n ? wavelength[i]! - wavelength[i - 1]! : 0;
    if (step > 0 && !(step > LEAP * last) && !(last > LEAP * step)) {
      last = step;
      continue;
    }
    for (let k = from; k < i; k++) {
      const a = i - from > 1 ? Math.max(from, k - STEPS_EACH_SIDE) : Math.max(0, k - 1);
      const z = i - from > 1 ? Math.min(i - 1, k + STEPS_EACH_SIDE) : Math.min(n - 1, k + 1);
      out[k] = wavelength[k]! / resolvingPower / FWHM_PER_SIGMA / ((wavelength[z]! - wavelength[a]!) / (z - a));
    }
    from = i;
    last = NaN;
  }
  return out;
}

/** The data with weights that allow for imperfect profiles beside strong lines. */
function tolerantOf(model: LineModel): NormalisedSamples {
  const { wavelength, flux, weight } = model.data;
  const allowed = new Float64Array(weight.length);
  for (let i = 0; i < weight.length; i++) {
    const floor = PROFILE_FLOOR * (1 - model.value[i]!);
    if (weight[i] !== 0) allowed[i] = 1 / (1 / weight[i]! + floor * floor);
  }
  return { wavelength, flux, weight: allowed };
}

/** Data minus model; weights carry what the model cannot be trusted with. */
function residualOf(model: LineModel, continuumSigma: number): NormalisedSamples {
  const { wavelength, flux, weight } = model.data;
  const out = { wavelength, flux: new Float64Array(flux.length), weight: new Float64Array(flux.length) };
  for (let i = 0; i < flux.length; i++) {
    const w = weight[i]!;
    if (w === 0) continue;
    const m = model.value[i]!;
    const floor = PROFILE_FLOOR * (1 - m);
    out.flux[i] = flux[i]! - m;
    out.weight[i] = 1 / (1 / w + floor * floor + continuumSigma * continuumSigma);
  }
  return out;
}

/**
 * Excesses to turn into components: not twice at one place and width, and on the right side of the continuum.
 * @param shaded leave corners of broad profiles, and narrow lines on them, for later
 * @param deferred gets those that have to wait until a stronger one beside them is fitted
 */
function chosen(excesses: readonly Excess[], model: LineModel, threshold: number, shaded: boolean, deferred: Excess[]): Excess[] {
  const out: Excess[] = [];
  for (const e of excesses) {
    const clash = (centre: number, fwhm: number): boolean => {
      const [narrow, wide] = fwhm < e.fwhm ? [fwhm, e.fwhm] : [e.fwhm, fwhm];
      return wide < 3 * narrow ? Math.abs(centre - e.centre) < 0.6 * wide : Math.abs(centre - e.centre) < 0.5 * narrow;
    };
    if (out.some((o) => clash(o.centre, o.fwhm) || (shaded && shades(o, e)))) {
      deferred.push(e);
      continue;
    }
    if (
      centredWithin(model.components, e.centre, 1.1 * e.fwhm).some(
        (c) =>
          c.kind === e.kind &&
          clash(c.centre, c.fwhm) &&
          c.fwhm < 3 * e.fwhm &&
          c.fwhm > e.fwhm / 3 &&
          Math.abs(c.centre - e.centre) < 0.35 * c.fwhm,
      )
    )
      continue;
    if (beyondContinuum(e, model.data) < threshold) continue;
    if (e.amplitude / Math.hypot(e.amplitude / e.significance, placementFloor(e)) < threshold) continue;
    out.push(e);
  }
  return out;
}

/**
 * Whether an excess may be the corner or the core of a stronger, broader one, whose profile is not known yet: what is a line of its own
 * stands out again once the broad one is fitted.
 */
const shades = (broad: Excess, e: Excess): boolean =>
  broad.kind === e.kind && broad.fwhm > 1.5 * e.fwhm && Math.abs(broad.centre - e.centre) < 0.75 * broad.fwhm;

/** Error of the continuum's placement under a broad excess, which no number of pixels averages out. Gaps between broad lines mimic peaks. */
function placementFloor(e: Excess): number {
  const widthV = (e.fwhm / e.centre) * C_KM_PER_S;
  return (e.kind === 'peak' ? PEAK_PLACEMENT : DIP_PLACEMENT) * Math.min(1, Math.max(0, (widthV - 100) / 200));
}

/** Significance with which the data themselves, not the residual, lie on the excess's side of the continuum. */
function beyondContinuum(e: Excess, data: NormalisedSamples): number {
  const { wavelength, flux, weight } = data;
  let sum = 0;
  let total = 0;
  for (let i = lower(wavelength, e.centre - 0.5 * e.fwhm); i < wavelength.length && wavelength[i]! <= e.centre + 0.5 * e.fwhm; i++) {
    sum += weight[i]! * (flux[i]! - 1);
    total += weight[i]!;
  }
  return total > 0 ? ((e.kind === 'dip' ? -1 : 1) * sum) / Math.sqrt(total) : 0;
}

function lower(x: Float64Array, value: number): number {
  let low = 0;
  let high = x.length;
  while (low < high) {
    const mid = (low + high) >> 1;
    if (x[mid]! < value) low = mid + 1;
    else high = mid;
  }
  return low;
}

/** Fresh components and all that they may push around. */
function nearTo(model: LineModel, fresh: readonly Component[]): Set<Component> {
  const out = new Set<Component>(fresh);
  for (const f of fresh) {
    for (const c of model.overlapping([f])) if (Math.abs(c.centre - f.centre) < 1.2 * (c.fwhm + f.fwhm)) out.add(c);
  }
  return out;
}

/** Of components sorted by centre those whose centre lies within a distance (nm). */
function centredWithin(sorted: readonly Component[], centre: number, distance: number): Component[] {
  let low = 0;
  let high = sorted.length;
  while (low < high) {
    const mid = (low + high) >> 1;
    if (sorted[mid]!.centre < centre - distance) low = mid + 1;
    else high = mid;
  }
  let end = low;
  while (end < sorted.length && sorted[end]!.centre <= centre + distance) end++;
  return sorted.slice(low, end);
}
