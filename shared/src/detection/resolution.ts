import type { NormalisedSamples } from '../profiles/index.js';
import type { Spectrum } from '../spectrum/index.js';
import { detect } from './detect.js';

export interface Resolution {
  /** lambda / FWHM */
  readonly value: number;
  readonly how: 'stated' | 'estimated';
}

const SAMPLES_PER_ELEMENT = 2.4; // common sampling of spectrographs, used when no feature tells
const ENOUGH = 5;

/** Stated resolving power, else that of the narrowest significant features, else what the sampling suggests. */
export function resolvingPowerOf(spectrum: Spectrum, data: NormalisedSamples): Resolution {
  if (spectrum.resolvingPower !== null && spectrum.resolvingPower > 0) return { value: spectrum.resolvingPower, how: 'stated' };
  const bySampling = samplingPower(data.wavelength) / SAMPLES_PER_ELEMENT;
  const trial = detect({
    data: part(data),
    resolvingPower: bySampling,
    correlation: [1],
    falseFeatures: 0.5,
    continuumSigma: 1e-3,
    quick: true,
  });
  const widths = trial.model.components
    .filter((c) => c.amplitude / c.sigmaAmplitude > 12 && c.sigmaLogFwhm < 0.15)
    .map((c) => c.fwhm / c.centre)
    .sort((a, b) => a - b);
  if (widths.length < ENOUGH) return { value: bySampling, how: 'estimated' };
  return { value: Math.min(1 / widths[Math.floor(widths.length * 0.15)]!, samplingPower(data.wavelength) / 1.5), how: 'estimated' };
}

const SAMPLES = 8_000; // enough lines to tell the instrument's width from

/** The middle of long spectra: the widths of lines are much the same elsewhere. */
function part(data: NormalisedSamples): NormalisedSamples {
  const n = data.wavelength.length;
  if (n <= SAMPLES) return data;
  const from = (n - SAMPLES) >> 1;
  const cut = (x: Float64Array): Float64Array => x.subarray(from, from + SAMPLES);
  return { wavelength: cut(data.wavelength), flux: cut(data.flux), weight: cut(data.weight) };
}

/** Median of lambda over the step between samples. */
function samplingPower(wavelength: Float64Array): number {
  const n = wavelength.length;
  const ratios: number[] = [];
  for (let i = 1; i < n; i += Math.max(1, n >> 9)) {
    const step = wavelength[i]! - wavelength[i - 1]!;
    if (step > 0) ratios.push(wavelength[i]! / step);
  }
  return ratios.sort((a, b) => a - b)[ratios.length >> 1] ?? 1000;
}
