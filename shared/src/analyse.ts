import { fitContinuum, moveContinuum, type ContinuumFit } from './continuum/index.js';
import { detect, editByHand, thin, type Detection, type EditedByHand, type HandEdits } from './detection/index.js';
import { coverageOf, type FeatureView } from './identify/views.js';
import { cautionsOf } from './identify/cautions.js';
import { describe } from './identify/describe.js';
import { identify } from './identify/identify.js';
import { measure, type Measured } from './identify/measure.js';
import type { Analysis, AnalysisSettings, AnalysisStep, Region } from './identify/analysis.js';
import { steeredList, strangers } from './identify/steer.js';
import type { LineList } from './linelist/index.js';
import { selectInPlace } from './numeric/select.js';
import { estimateNoise, type NoiseModel } from './noise/index.js';
import type { NormalisedSamples } from './profiles/index.js';
import type { Spectrum } from './spectrum/index.js';
import { C_KM_PER_S } from './units/index.js';
import { PROGRAM_VERSION } from './version.js';
import { resolvingPowerOf } from './detection/resolution.js';

/** Told at the start of each step, with the fraction done; may throw to stop the run (cancelling). */
export type OnProgress = (step: AnalysisStep, done: number) => void;

/** The pipeline: from a spectrum to features with ranked readings. Deterministic; reads no clock and no chance. */
export function analyse(read: Spectrum, wholeList: LineList, settings: AnalysisSettings, onProgress: OnProgress = () => {}): Analysis {
  onProgress('continuum', 0);
  const spectrum = withoutRegions(read, settings.maskedRegions);
  const list = steeredList(wholeList, settings);
  const noise = estimateNoise(spectrum);
  const continuum = moveContinuum(fitContinuum(spectrum, noise, settings), spectrum.wavelength, settings.continuumMoves);
  onProgress('noise', 0.15);
  const sampled = normalise(spectrum, continuum, noise);
  const resolution = resolvingPowerOf(spectrum, sampled);
  const { data, correlation } = thin(sampled, resolution.value, noise.correlation);
  onProgress('detection', 0.2);
  const placement = placementError(continuum);
  const detection = detect({
    data,
    resolvingPower: resolution.value,
    correlation,
    falseFeatures: settings.falseFeatures,
    continuumSigma: placement,
  });
  const edited = editByHand(detection.model, handEdits(settings), resolution.value);
  onProgress('measurement', 0.6);
  const measured = measureAll(detection, edited, data, resolution.value, placement);
  const views = measured.map(viewOf);
  onProgress('systems', 0.7);
  const coverage = coverageOf(data.wavelength, data.weight, resolution.value, detection.threshold);
  const identified = identify({
    features: views,
    coverage,
    list,
    frame: spectrum.frame,
    observerVelocityKmPerS: spectrum.observerVelocityKmPerS ?? null,
    temperature: hintOf(continuum, settings),
    velocityRangeKmPerS: settings.velocityRangeKmPerS,
    wishes: { set: settings.setSystems, forbidden: settings.forbiddenSystems },
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
    snr: medianSnr(sampled),
    noiseHow: noise.how,
    continuum: continuum.summary,
    systems: told.systems,
    features: told.features,
    species: told.species,
  };
  return { ...result, cautions: [...cautionsOf(result), ...edited.notes, ...unknownSpecies(strangers(wholeList, settings))] };
}

/** The spectrum with masked regions marked bad, as if the file had said so; the very same when nothing is masked. */
function withoutRegions(spectrum: Spectrum, regions: readonly Region[]): Spectrum {
  if (regions.length === 0) return spectrum;
  const masked = (nm: number) => regions.some(({ fromNm, toNm }) => nm >= fromNm && nm <= toNm);
  return { ...spectrum, bad: spectrum.bad.map((bad, i) => (bad || masked(spectrum.wavelength[i]!) ? 1 : 0)) };
}

const handEdits = ({ removedFeatures, splitFeatures, addedFeatures }: AnalysisSettings): HandEdits => ({
  removed: removedFeatures,
  split: splitFeatures,
  added: addedFeatures,
});

const unknownSpecies = (names: readonly string[]): string[] =>
  names.length ? [`The line list has no line of ${names.join(', ')}: that part of the settings had no effect.`] : [];

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

function measureAll(
  detection: Detection,
  { placed }: EditedByHand,
  data: NormalisedSamples,
  resolvingPower: number,
  placement: number,
): Measured[] {
  const { model } = detection;
  return [...model.components]
    .sort((a, b) => a.centre - b.centre)
    .map((c) => {
      const measured = measure(c, data, model.overlapping([c]), resolvingPower, placement);
      return placed.has(c) ? { ...measured, flags: [...measured.flags, 'by_hand'] } : measured;
    });
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

/** What a person gives goes before what the continuum says, as exact. */
function hintOf(continuum: ContinuumFit, { temperatureK: given }: AnalysisSettings): { temperatureK: number; sigmaK: number } | null {
  if (given !== null) return { temperatureK: given, sigmaK: 0 };
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

function medianSnr({ weight }: NormalisedSamples): number {
  const good = weight.filter((w) => w > 0);
  return good.length ? Math.sqrt(selectInPlace(good, good.length >> 1)) : 0;
}
