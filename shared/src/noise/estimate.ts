import { quantileInPlace, selectInPlace } from '../numeric/select.js';
import type { Spectrum } from '../spectrum/index.js';
import { noiseStructure, type NoiseStructure } from './correlation.js';
import type { NoiseModel } from './model.js';
import { DIFFERENCE_SCATTER, fourthDifferences, windowScatter } from './windows.js';

const LONGEST_WINDOW = 128;
const SHORTEST_WINDOW = 40;
/** Windows looked at for the check of a stated sigma: some 15 000 samples, enough for a few per cent. */
const CHECKED_WINDOWS = 120;
/** A stated sigma is left alone when the scatter agrees with it within this factor. */
const TOLERATED = 1.2;
/** The scatter of n samples is measured to this over root n, three sigma. */
const MEASURED_TO = 4;
/** Lines everywhere raise the scatter of direct neighbours by this much, rarely more. */
const LARGEST_BY_LINES = 1.5;
/** Where lines are everywhere, ties between neighbours weaker than this are taken for theirs. */
const WEAK_TIES = 0.35;
/** Neighbouring windows that are smoothed together, to each side (an eighth of all, if that is fewer), and the quantile of them that is taken: lines only raise a window. */
const NEIGHBOURS = 7;
const LOW_QUANTILE = 0.35;
const LOW_QUANTILE_SIGMA = 0.385;

/**
 * Noise of a spectrum: the stated sigma, checked against the scatter in the windows with the fewest lines and rescaled only when clearly
 * off; or, when none is stated, an estimate from the scatter in windows (after DER_SNR, Stoehr et al. 2008, with differences of higher
 * order, less touched by lines), smoothed along the spectrum. Correlation from sample to sample is measured in both cases.
 * With a continuum `level` the scatter is that of flux over level.
 */
export function estimateNoise(spectrum: Spectrum, level?: Float64Array): NoiseModel {
  const { flux, bad } = spectrum;
  const value = level ? flux.map((f, i) => f / level[i]!) : flux;
  const scale = (sigma: Float64Array) => (level ? sigma.map((s, i) => s / Math.abs(level[i]!)) : sigma);
  const length = Math.max(SHORTEST_WINDOW, Math.min(LONGEST_WINDOW, flux.length >> 6));
  const structureFor = (sigma: Float64Array) => noiseStructure({ value, sigma, bad }, length, strideFor(flux.length, length));
  const floor = smallestSigma(spectrum);
  if (spectrum.sigma) {
    const sigma = filled(spectrum.sigma, bad, floor);
    return checked(sigma, structureFor(scale(sigma)));
  }
  const perWindow = smoothed(windowScatter({ value, sigma: null, bad }, length, 1, fourthDifferences), length);
  const white = interpolated(perWindow, length, flux.length);
  const { correlation, factor } = estimated(structureFor(white));
  const sigma = white.map((s, i) => Math.max(floor, s * factor * (level ? Math.abs(level[i]!) : 1)) || floor);
  return { sigma, how: 'estimated', correlation, rescale: 1 };
}

const strideFor = (n: number, length: number) => Math.max(1, Math.floor(n / length / CHECKED_WINDOWS));

/** A stated sigma against what the scatter tells. */
function checked(sigma: Float64Array, structure: NoiseStructure): NoiseModel {
  const { correlation, factor } = verdict(structure, TOLERATED * (1 + MEASURED_TO / Math.sqrt(sigma.length)));
  if (factor === 1) return { sigma, how: 'stated', correlation, rescale: 1 };
  return { sigma: sigma.map((s) => s * factor), how: 'stated_rescaled', correlation, rescale: factor };
}

interface Tied {
  readonly correlation: readonly number[];
  readonly factor: number;
}
const AS_STATED: Tied = { correlation: [1], factor: 1 };

function verdict({ neighbours, sigma, correlation, lineFree, smooth }: NoiseStructure, tolerated: number): Tied {
  if (!(neighbours > 0)) return AS_STATED;
  const asStated = neighbours > 1 / tolerated && neighbours < LARGEST_BY_LINES;
  if (smooth && asStated) return AS_STATED; // white noise as stated, and nothing but lines above it
  const white = tiesOf(correlation) === 0 || (!lineFree && tiesOf(correlation) < WEAK_TIES);
  const measured = white ? Math.min(neighbours, sigma) : sigma;
  if (lineFree) return { correlation, factor: measured > tolerated || measured < 1 / tolerated ? measured : 1 };
  // lines everywhere: neighbours that scatter as stated, or a little more, agree with white noise of the stated size
  if (neighbours >= LARGEST_BY_LINES) return { correlation: [1], factor: neighbours };
  if (asStated) return AS_STATED;
  return { correlation: white ? [1] : correlation, factor: measured < 1 / tolerated ? measured : 1 };
}

const tiesOf = (correlation: readonly number[]) => correlation[1] ?? 0;

/** The same for a sigma that was itself taken from neighbours as if the noise were white. */
function estimated({ sigma, correlation, lineFree, smooth }: NoiseStructure): Tied {
  const ties = tiesOf(correlation);
  if (ties === 0 || !(sigma > 0) || (!lineFree && (smooth || ties < WEAK_TIES))) return AS_STATED;
  return { correlation, factor: Math.max(1, sigma) };
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
  const neighbours = Math.max(1, Math.min(NEIGHBOURS, scatter.length >> 3));
  const scratch = new Float64Array(2 * neighbours + 1);
  const bias = 1 - (LOW_QUANTILE_SIGMA * DIFFERENCE_SCATTER) / Math.sqrt(length);
  const all =
    quantileInPlace(
      scatter.filter((s) => s === s),
      scatter.filter((s) => s === s).length,
      LOW_QUANTILE,
    ) / bias;
  return scatter.map((_, w) => {
    let m = 0;
    for (let k = Math.max(0, w - neighbours); k < Math.min(scatter.length, w + neighbours + 1); k++) {
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
