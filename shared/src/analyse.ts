import { fitContinuum, type ContinuumFit } from './continuum/index.js';
import { detect, type Detection } from './detection/index.js';
import { coverageOf, type FeatureView } from './identify/views.js';
import { cautionsOf } from './identify/cautions.js';
import { describe } from './identify/describe.js';
import { identify } from './identify/identify.js';
import { measure, type Measured } from './identify/measure.js';
import type { Analysis, AnalysisSettings, AnalysisStep } from './identify/analysis.js';
import type { LineList } from './linelist/index.js';
import { estimateNoise, type NoiseModel } from './noise/index.js';
import type { NormalisedSamples } from './profiles/index.js';
import type { Spectrum } from './spectrum/index.js';
import { C_KM_PER_S } from './units/index.js';
import { PROGRAM_VERSION } from './version.js';
import { resolvingPowerOf } from './detection/resolution.js';

/** Told at the start of each step, with the fraction done; may throw to stop the run (cancelling). */
export type OnProgress = (step: AnalysisStep, done: number) => void;

/** The pipeline: from a spectrum to features with ranked readings. Deterministic; reads no clock and no chance. */
export function analyse(spectrum: Spectrum, list: LineList, settings: AnalysisSettings, onProgress: OnProgress = () => {}): Analysis {
  onProgress('continuum', 0);
  const noise = estimateNoise(spectrum);
  const continuum = fitContinuum(spectrum, noise, settings);
  onProgress('noise', 0.15);
  const data = normalise(spectrum, continuum, noise);
  const resolution = resolvingPowerOf(spectrum, data);
  onProgress('detection', 0.2);
  const placement = placementError(continuum);
  const detection = detect({
    data,
    resolvingPower: resolution.value,
    correlation: noise.correlation,
    falseFeatures: settings.falseFeatures,
    continuumSigma: placement,
  });
  onProgress('measurement', 0.6);
  const measured = measureAll(detection, data, resolution.value, placement);
  const views = measured.map(viewOf);
  onProgress('systems', 0.7);
  const coverage = coverageOf(data.wavelength, data.weight, resolution.value, detection.threshold);
  const identified = identify({
    features: views,
    coverage,
    list,
    frame: spectrum.frame,
    temperature: hintOf(continuum),
    velocityRangeKmPerS: settings.velocityRangeKmPerS,
    logContinuum: logContinuumOf(spectrum, continuum),
  });
  onProgress('identification', 0.9);
  const told = describe(identified, measured, views, coverage, list);
  const result = {
    programVersion: PROGRAM_VERSION,
    lineListName: list.name,
    lineListVersion: list.version,
    settings,
    points: spectrum.wavelength.length,
    fromNm: spectrum.wavelength[0]!,
    toNm: spectrum.wavelength[spectrum.wavelength.length - 1]!,
    frame: spectrum.frame,
    resolvingPower: resolution.value,
    resolvingPowerHow: resolution.how,
    snr: medianSnr(data),
    noiseHow: noise.how,
    continuum: continuum.summary,
    systems: told.systems,
    features: told.features,
    species: told.species,
  };
  return { ...result, cautions: cautionsOf(result) };
}

/** Scatter below this share of the continuum tells of smoothing or resampling, not of a signal to noise above 400 a sample. */
const SMOOTHEST = 1 / 400;

/** Flux over continuum; samples that must not count get weight 0. */
function normalise(spectrum: Spectrum, continuum: ContinuumFit, noise: NoiseModel): NormalisedSamples {
  const n = spectrum.flux.length;
  const flux = new Float64Array(n).fill(1);
  const weight = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const level = continuum.level[i]!;
    const sigma = noise.how === 'estimated' ? Math.max(noise.sigma[i]!, SMOOTHEST * level) : noise.sigma[i]!;
    if (spectrum.bad[i] || !(sigma > 0) || !(level > 0) || !Number.isFinite(spectrum.flux[i]!)) continue;
    flux[i] = spectrum.flux[i]! / level;
    weight[i] = (level / sigma) ** 2;
  }
  return { wavelength: spectrum.wavelength, flux, weight };
}

function placementError(continuum: ContinuumFit): number {
  const { levelSigma } = continuum;
  if (typeof levelSigma === 'number') return levelSigma;
  return levelSigma.length ? Float64Array.from(levelSigma).sort()[levelSigma.length >> 1]! : 0;
}

function measureAll(detection: Detection, data: NormalisedSamples, resolvingPower: number, placement: number): Measured[] {
  const { model } = detection;
  return [...model.components]
    .sort((a, b) => a.centre - b.centre)
    .map((c) => measure(c, data, model.overlapping([c]), resolvingPower, placement));
}

function viewOf(m: Measured, index: number): FeatureView {
  const c = m.component;
  const w = Math.abs(m.equivalentWidthNm);
  return {
    index,
    kind: c.kind,
    wavelength: c.centre,
    sigmaV: (c.sigmaCentre / c.centre) * C_KM_PER_S,
    logW: Math.log10(w),
    sigmaLogW: Math.min(1, m.equivalentWidthSigmaNm / w / Math.LN10),
    fwhmNm: c.fwhm,
    fwhmV: (c.fwhm / c.centre) * C_KM_PER_S,
    significance: m.significance,
    flags: m.flags,
  };
}

function hintOf(continuum: ContinuumFit): { temperatureK: number; sigmaK: number } | null {
  const { constrained, temperatureK, temperatureSigmaK } = continuum.summary;
  return constrained && temperatureK !== null ? { temperatureK, sigmaK: temperatureSigmaK ?? 0.1 * temperatureK } : null;
}

/** log10 of the continuum at a wavelength, interpolated on samples. */
function logContinuumOf(spectrum: Spectrum, continuum: ContinuumFit): (wavelength: number) => number {
  const { wavelength } = spectrum;
  const n = wavelength.length;
  return (at) => {
    let low = 0;
    let high = n - 1;
    while (low < high) {
      const mid = (low + high) >> 1;
      if (wavelength[mid]! < at) low = mid + 1;
      else high = mid;
    }
    return Math.log10(Math.max(continuum.level[low]!, 1e-300));
  };
}

function medianSnr(data: NormalisedSamples): number {
  const good = data.weight.filter((w) => w > 0).sort();
  return good.length ? Math.sqrt(good[good.length >> 1]!) : 0;
}
