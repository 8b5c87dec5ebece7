import type { NormalisedSamples } from '../profiles/index.js';
import { chanceThreshold } from './threshold.js';

/** A place where the residual stands out, at the width where it stands out most. */
export interface Excess {
  readonly kind: 'dip' | 'peak';
  /** vacuum nm */
  readonly centre: number;
  /** nm, that of the matched filter */
  readonly fwhm: number;
  /** in units of the continuum, positive */
  readonly amplitude: number;
  readonly significance: number;
}

export interface FilterOptions {
  /** instrument profile: sigma in pixels at every pixel */
  readonly instrumentSigmaPx: Float64Array;
  /** widest FWHM searched, nm */
  readonly widestNm: number;
  /** fit a local constant beside the profile, so that broader structure does not count */
  readonly zeroMean: boolean;
  readonly threshold: number;
  /** autocorrelation of the noise at lags 0, 1, ... pixels */
  readonly correlation: readonly number[];
  /** samples worth a look, as sorted [from, to) pairs; all when absent. Elsewhere nothing changed since they were last searched */
  readonly only?: readonly Stretch[];
}

/** Samples [from, to). */
export type Stretch = readonly [number, number];

const LADDER = 1.45; // ratio of neighbouring widths; a feature between two rungs loses under 2 % of its significance
const FWHM_PER_SIGMA = 2 * Math.sqrt(2 * Math.LN2);
const LEAST_CONTRAST = 0.125; // part of a profile's weight that must be left beside a local constant: less where masks cut it
const SAME_BLOCK = 1.15; // a kernel this much off in width costs under 0.5 % of significance

interface Rung {
  readonly sigmaPx: number;
  readonly bin: number;
  /** significance per bin, positive where the residual is above the model */
  readonly s: Float64Array;
  readonly amplitude: Float64Array;
}

/** Runs of pixels over which the instrument profile keeps its width in pixels. */
function blocks(sigmaPx: Float64Array): { from: number; to: number; sigma: number }[] {
  const out: { from: number; to: number; sigma: number }[] = [];
  let from = 0;
  for (let i = 1; i <= sigmaPx.length; i++) {
    if (i < sigmaPx.length && sigmaPx[i]! < sigmaPx[from]! * SAME_BLOCK && sigmaPx[i]! > sigmaPx[from]! / SAME_BLOCK) continue;
    out.push({ from, to: i, sigma: sigmaPx[(from + i - 1) >> 1]! });
    from = i;
  }
  return out;
}

/**
 * Matched filters over a ladder of Gaussian widths, inverse-variance weighted, both signs at once.
 * @param data flux: residual, data minus model, in units of the continuum
 * @returns local maxima in position and width beyond the threshold, most significant first
 */
export function findExcesses(data: NormalisedSamples, options: FilterOptions): Excess[] {
  const found: Excess[] = [];
  for (const block of blocks(options.instrumentSigmaPx)) {
    const stepNm = (data.wavelength[block.to - 1]! - data.wavelength[block.from]!) / Math.max(1, block.to - block.from - 1);
    const rungs: Rung[] = [];
    for (let sigma = Math.max(block.sigma, 0.6); sigma * FWHM_PER_SIGMA * stepNm <= options.widestNm; sigma *= LADDER) {
      if (sigma * 6 > block.to - block.from) break;
      rungs.push(filter(data, block.from, block.to, sigma, options));
    }
    rungs.forEach((_, r) => collect(rungs, r, data, block.from, options, found));
  }
  return found.sort((a, b) => b.significance - a.significance || a.centre - b.centre);
}

/** One width: significance and amplitude at every bin. */
function filter(data: NormalisedSamples, from: number, to: number, sigmaPx: number, options: FilterOptions): Rung {
  const bin = Math.max(1, Math.floor(sigmaPx / 2.2));
  const n = Math.ceil((to - from) / bin);
  const sigma = sigmaPx / bin;
  const half = Math.ceil(3.6 * sigma);
  // zeros on either side stand for what is not there
  const weight = new Float64Array(n + 2 * half);
  const weighted = new Float64Array(n + 2 * half);
  for (let i = from; i < to; i++) {
    const w = data.weight[i]!;
    if (w === 0) continue;
    const b = half + (((i - from) / bin) | 0);
    weight[b]! += w;
    weighted[b]! += w * data.flux[i]!;
  }
  const g = Float64Array.from({ length: half + 1 }, (_, k) => Math.exp(-0.5 * (k / sigma) ** 2));
  const inflation = correlationInflation(g, bin, options.correlation, options.zeroMean);
  const s = new Float64Array(n);
  const amplitude = new Float64Array(n);
  for (const [first, last] of options.only ? binsOf(options.only, from, to, bin, half) : [[0, n] as const]) {
    let s1 = 0; // sums over the window, kept up from bin to bin
    let sr = 0;
    for (let j = first; j < first + 2 * half; j++) {
      s1 += weight[j]!;
      sr += weighted[j]!;
    }
    for (let i = first; i < last; i++) {
      const c = i + half;
      s1 += weight[c + half]!;
      sr += weighted[c + half]!;
      let sg = weight[c]!;
      let sgg = sg;
      let sgr = weighted[c]!;
      for (let k = 1; k <= half; k++) {
        const w = weight[c - k]! + weight[c + k]!;
        const wg = g[k]! * w;
        sg += wg;
        sgg += g[k]! * wg;
        sgr += g[k]! * (weighted[c - k]! + weighted[c + k]!);
      }
      if (sgg > 0) {
        const top = options.zeroMean ? sgr - (sg * sr) / s1 : sgr;
        const bottom = options.zeroMean ? sgg - (sg * sg) / s1 : sgg;
        if (bottom > LEAST_CONTRAST * sgg) {
          amplitude[i] = top / bottom;
          s[i] = top / Math.sqrt(bottom) / inflation;
        }
      }
      s1 -= weight[i]!;
      sr -= weighted[i]!;
    }
  }
  return { sigmaPx, bin, s, amplitude };
}

/** The bins whose filter output the samples of some stretches can have changed, merged. */
function binsOf(stretches: readonly Stretch[], from: number, to: number, bin: number, half: number): Stretch[] {
  const n = Math.ceil((to - from) / bin);
  const out: [number, number][] = [];
  for (const [a, z] of stretches) {
    if (z <= from || a >= to) continue;
    const first = Math.max(0, Math.floor((a - from) / bin) - half);
    const last = Math.min(n, Math.ceil((z - from) / bin) + half);
    const before = out[out.length - 1];
    if (before && first <= before[1]) before[1] = Math.max(before[1], last);
    else out.push([first, last]);
  }
  return out;
}

/** By how much correlated noise widens the scatter of a filter's output. */
function correlationInflation(g: Float64Array, bin: number, correlation: readonly number[], zeroMean: boolean): number {
  if (correlation.length < 2) return 1;
  const half = g.length - 1;
  const full = Float64Array.from({ length: 2 * half + 1 }, (_, k) => g[Math.abs(k - half)]!);
  if (zeroMean) {
    const mean = full.reduce((a, b) => a + b, 0) / full.length;
    for (let k = 0; k < full.length; k++) full[k]! -= mean;
  }
  const at = (lag: number): number => {
    let sum = 0;
    for (let k = 0; k + lag < full.length; k++) sum += full[k]! * full[k + lag]!;
    return sum;
  };
  const zero = at(0);
  let variance = 1;
  for (let lag = 1; lag < correlation.length; lag++) variance += (2 * correlation[lag]! * at(Math.round(lag / bin))) / zero;
  return Math.sqrt(Math.max(variance, 0.25));
}

function collect(
  rungs: readonly Rung[],
  r: number,
  data: NormalisedSamples,
  from: number,
  { threshold, only }: FilterOptions,
  out: Excess[],
): void {
  const rung = rungs[r]!;
  const { s, bin } = rung;
  for (let i = 1; i < s.length - 1; i++) {
    const v = Math.abs(s[i]!);
    if (v < threshold || v < Math.abs(s[i - 1]!) || v <= Math.abs(s[i + 1]!)) continue;
    if (only && (s[i - 1] === 0 || s[i + 1] === 0)) continue; // the end of what was looked at, no maximum
    const pixel = (i + 0.5) * bin;
    if (stronger(rungs[r - 1], pixel, s[i]!) || stronger(rungs[r + 1], pixel, s[i]!)) continue;
    const at = Math.min(data.wavelength.length - 1, from + Math.round(pixel - 0.5));
    const step = localStep(data.wavelength, at);
    out.push({
      kind: s[i]! < 0 ? 'dip' : 'peak',
      centre: data.wavelength[at]! + peakOffset(s, i) * bin * step,
      fwhm: rung.sigmaPx * FWHM_PER_SIGMA * step,
      amplitude: Math.abs(rung.amplitude[i]!),
      significance: v,
    });
  }
}

/** Whether a neighbouring width sees the same excess better within a bin of the place. */
function stronger(rung: Rung | undefined, pixel: number, value: number): boolean {
  if (!rung) return false;
  const i = Math.min(rung.s.length - 2, Math.max(1, Math.floor(pixel / rung.bin)));
  const sign = Math.sign(value);
  return Math.max(sign * rung.s[i - 1]!, sign * rung.s[i]!, sign * rung.s[i + 1]!) > Math.abs(value);
}

/** Vertex of the parabola through three samples, in bins. */
function peakOffset(s: Float64Array, i: number): number {
  const a = Math.abs(s[i - 1]!);
  const b = Math.abs(s[i]!);
  const c = Math.abs(s[i + 1]!);
  const curvature = a - 2 * b + c;
  return curvature < 0 ? Math.max(-0.5, Math.min(0.5, (0.5 * (a - c)) / curvature)) : 0;
}

function localStep(wavelength: Float64Array, i: number): number {
  const a = Math.max(0, i - 1);
  const z = Math.min(wavelength.length - 1, i + 1);
  return (wavelength[z]! - wavelength[a]!) / Math.max(1, z - a);
}

/** Threshold for an expected number of false excesses in this spectrum, all widths and both signs together. */
export function thresholdFor(falseFeatures: number, instrumentSigmaPx: Float64Array, usable: number, widestPx: number): number {
  const sigma = Math.max(0.6, instrumentSigmaPx[instrumentSigmaPx.length >> 1]!);
  const widths: number[] = [];
  for (let s = sigma; s * FWHM_PER_SIGMA <= widestPx; s *= LADDER) widths.push(s);
  return chanceThreshold(falseFeatures, usable, widths);
}
