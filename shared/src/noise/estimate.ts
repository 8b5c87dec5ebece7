import { quantileInPlace, selectInPlace } from '../numeric/select.js';
import type { Spectrum } from '../spectrum/index.js';
import { noiseStructure } from './correlation.js';
import type { NoiseModel } from './model.js';
import { DIFFERENCE_SCATTER, windowScatter, type Samples } from './windows.js';

const LONGEST_WINDOW = 128;
/** Windows looked at for the check of a stated sigma: some 15 000 samples, enough for a few per cent. */
const CHECKED_WINDOWS = 120;
/** A stated sigma is left alone when the scatter agrees with it within this factor. */
const TOLERATED = 1.2;
/** Neighbouring windows that are smoothed together, to each side, and the quantile of them that is taken: lines only raise a window. */
const NEIGHBOURS = 7;
const LOW_QUANTILE = 0.35;
const LOW_QUANTILE_SIGMA = 0.385;

/**
 * Noise of a spectrum: the stated sigma, checked against the scatter in the windows with the fewest lines and rescaled only when clearly
 * off; or, when none is stated, an estimate from the scatter in windows (DER_SNR, Stoehr et al. 2008), smoothed along the spectrum.
 * Correlation from sample to sample is measured in both cases. With a continuum `level` the scatter is that of flux over level.
 */
export function estimateNoise(spectrum: Spectrum, level?: Float64Array): NoiseModel {
  const n = spectrum.flux.length;
  const length = Math.max(24, Math.min(LONGEST_WINDOW, n >> 6));
  if (spectrum.sigma) return checked(spectrum, filled(spectrum.sigma, spectrum.bad, smallestSigma(spectrum)), length);
  const floor = smallestSigma(spectrum);
  const value = level ? spectrum.flux.map((f, i) => f / level[i]!) : spectrum.flux;
  const scatter = windowScatter({ value, sigma: null, bad: spectrum.bad }, length, 1, 2);
  const smooth = smoothed(scatter, length);
  const sigma = interpolated(smooth, length, n);
  const structure = noiseStructure({ value, sigma, bad: spectrum.bad }, length, strideFor(n, length));
  const { correlation } = structure;
  const factor = correlation.length > 1 && structure.near > 0 ? structure.sigma / structure.near : 1;
  for (let i = 0; i < n; i++) sigma[i] = Math.max(floor, sigma[i]! * factor * (level ? Math.abs(level[i]!) : 1)) || floor;
  return { sigma, how: 'estimated', correlation, rescale: 1 };
}

const strideFor = (n: number, length: number) => Math.max(1, Math.floor(n / length / CHECKED_WINDOWS));

function checked(spectrum: Spectrum, sigma: Float64Array, length: number): NoiseModel {
  const samples: Samples = { value: spectrum.flux, sigma, bad: spectrum.bad };
  const { correlation, sigma: ratio } = noiseStructure(samples, length, strideFor(sigma.length, length));
  const clearlyOff = ratio > TOLERATED || (ratio > 0 && ratio < 1 / TOLERATED);
  if (!clearlyOff) return { sigma, how: 'stated', correlation, rescale: 1 };
  return { sigma: sigma.map((s) => s * ratio), how: 'stated_rescaled', correlation, rescale: ratio };
}

/** What stands for the noise of a spectrum that shows none: far below any real one, yet not 0. */
function smallestSigma({ flux, bad }: Spectrum): number {
  const sizes = new Float64Array(Math.min(flux.length, 1000));
  const stride = Math.max(1, Math.floor(flux.length / sizes.length));
  let m = 0;
  for (let i = 0; i < flux.length && m < sizes.length; i += stride) if (!bad[i] && flux[i] === flux[i]) sizes[m++] = Math.abs(flux[i]!);
  const typical = m ? selectInPlace(sizes, m >> 1, 0, m) : 1;
  return typical > 0 ? 1e-7 * typical : Number.MIN_VALUE * 1e16;
}

/** A copy in which samples without a usable sigma take that of the nearest good one before (or, at the start, after) them. */
function filled(sigma: Float64Array, bad: Uint8Array, floor: number): Float64Array {
  const out = new Float64Array(sigma.length);
  let last = NaN;
  let first = -1;
  for (let i = 0; i < out.length; i++) {
    const s = sigma[i]!;
    if (!bad[i] && s > 0 && s < Infinity) {
      last = s;
      if (first < 0) first = i;
    }
    out[i] = last;
  }
  out.fill(first < 0 ? floor : out[first]!, 0, first < 0 ? out.length : first);
  return out;
}

/** Low quantile over neighbouring windows, freed of the bias that picking a low one brings; windows without a value take their neighbours'. */
function smoothed(scatter: Float64Array, length: number): Float64Array {
  const scratch = new Float64Array(2 * NEIGHBOURS + 1);
  const bias = 1 - (LOW_QUANTILE_SIGMA * DIFFERENCE_SCATTER) / Math.sqrt(length);
  const all =
    quantileInPlace(
      scatter.filter((s) => s === s),
      scatter.filter((s) => s === s).length,
      LOW_QUANTILE,
    ) / bias;
  return scatter.map((_, w) => {
    let m = 0;
    for (let k = Math.max(0, w - NEIGHBOURS); k < Math.min(scatter.length, w + NEIGHBOURS + 1); k++) {
      if (scatter[k] === scatter[k]) scratch[m++] = scatter[k]!;
    }
    return m > 0 ? quantileInPlace(scratch, m, LOW_QUANTILE) / bias : all;
  });
}

/** Straight lines between window middles. */
function interpolated(perWindow: Float64Array, length: number, n: number): Float64Array {
  const out = new Float64Array(n);
  const last = perWindow.length - 1;
  for (let i = 0; i < n; i++) {
    const at = Math.max(0, Math.min(last, (i + 0.5) / length - 0.5));
    const w = Math.min(last, Math.floor(at));
    const next = perWindow[Math.min(last, w + 1)]!;
    out[i] = perWindow[w]! + (at - w) * (next - perWindow[w]!);
  }
  return out;
}
