import type { AnalysisSettings, Continuum } from '../identify/analysis.js';
import type { NoiseModel } from '../noise/index.js';
import type { Spectrum } from '../spectrum/index.js';
import { cutBlocks, type Blocks } from './blocks.js';
import { trustBesideHydrogen } from './hydrogen.js';
import { NO_EXTINCTION } from './colour-problem.js';
import { extinctionCurve } from './extinction.js';
import { flatLevel, tracedLevel } from './fallback.js';
import type { ContinuumFit } from './model.js';
import { lnPlanck, wienPeakNm } from './planck.js';
import { describeQuality, placementSigma, type Quality } from './quality.js';
import { beliefInExtinction } from './reddening.js';
import { refine, type Refined } from './refine.js';
import { ANY_SHAPE, calibratedOver } from './robust-fit.js';
import { LN_PER_MAG, makeSmoothModel } from './smooth-model.js';
import { looksNormalised, startPlanck, startValues, type PlanckStart, type Start } from './start.js';
import { asShapeOnly, verdictOn, type Verdict } from './statement.js';
import { judgeTemperature } from './temperature.js';

/** Chebyshev orders of the smooth part: features narrower than about a twentieth of the range do not pull it. */
const ORDERS = 20;
/** Fewer usable samples than this make no continuum worth a model. */
const FEWEST_SAMPLES = 12;

/**
 * Fits the continuum: a Planck curve with extinction times a smooth response where the flux is calibrated, a smooth curve alone where it is
 * not. Dips and peaks are found by boxes of all widths and left out, in rounds. Never fails: with too little to fit the level is flat or
 * traced by a running median, and the statement says so.
 */
export function fitContinuum(spectrum: Spectrum, noise: NoiseModel, settings: AnalysisSettings): ContinuumFit {
  let usable = 0;
  for (let i = 0; i < spectrum.bad.length; i++) usable += spectrum.bad[i] ? 0 : 1;
  if (usable < FEWEST_SAMPLES) return flatLevel(spectrum);
  const blocks = cutBlocks(spectrum.wavelength);
  const start = startValues(spectrum, noise, blocks);
  const known = knownFactor(spectrum, settings);
  const found = startPlanck(blocks, start.values, known);
  const asked = settings.temperatureUse === 'strengths_and_continuum' ? settings.temperatureK : null;
  const planck = asked === null ? found : { ...found, temperatureK: asked };
  const reason = reasonForLocal(spectrum, settings, start, planck);
  const fit = reason
    ? null
    : fitPlanckModel(spectrum, noise, settings.extinctionAv, blocks, start, planck.temperatureK, known, asked !== null);
  return (
    fit ?? fitLocalModel(spectrum, noise, blocks, start, planck.temperatureK, reason ?? 'no_fit') ?? tracedLevel(spectrum, noise, blocks)
  );
}

/** Why no Planck curve is tried, or null. */
function reasonForLocal({ fluxKind }: Spectrum, settings: AnalysisSettings, start: Start, planck: PlanckStart): LocalReason | null {
  if (settings.localContinuum) return 'asked';
  if (fluxKind === 'counts') return 'counts';
  // flux that only looks normalised may follow a curve that a person gives
  const given = settings.temperatureK !== null && settings.temperatureUse === 'strengths_and_continuum';
  return fluxKind === 'normalised' || (!given && looksNormalised(start, planck)) ? 'normalised' : null;
}
type LocalReason = 'asked' | 'normalised' | 'counts' | 'no_fit';

/** ln of what is known beside the Planck curve: the extinction given, and flux per frequency where it is not per wavelength. */
function knownFactor({ fluxKind }: Spectrum, { extinctionAv, extinctionLaw, extinctionRv }: AnalysisSettings): (nm: number) => number {
  return (nm) =>
    (extinctionAv ? -LN_PER_MAG * extinctionAv * extinctionCurve(nm, extinctionLaw, extinctionRv) : 0) +
    (fluxKind === 'per_frequency' ? 2 * Math.log(nm) : 0);
}

function fitPlanckModel(
  spectrum: Spectrum,
  noise: NoiseModel,
  given: number | null,
  blocks: Blocks,
  start: Start,
  startK: number,
  known: (nm: number) => number,
  isTemperatureGiven: boolean,
): ContinuumFit | null {
  const trust = trustBesideHydrogen(blocks, start, startK);
  const base = (nm: number) => lnPlanck(nm, startK) + known(nm);
  const model = makeSmoothModel(blocks, base, startK, ORDERS);
  const free = { temperature: !isTemperatureGiven, extinction: given === null, response: calibratedOver(blocks) };
  const refined = refine(spectrum, noise, blocks, model, start, free, trust);
  if (!refined) return null;
  const quality = describeQuality(spectrum, blocks, refined);
  const placement = placementSigma(refined, model, noise, quality);
  if (isTemperatureGiven) return assemble('planck', refined, blocks, quality, placement, givenTemperature(startK));
  const extinction = given === null ? beliefInExtinction(spectrum, refined.space, placement) : NO_EXTINCTION;
  const belief = judgeTemperature(blocks, model, refined, extinction, known);
  const verdict = verdictOn(belief, quality, { fromNm: blocks.edgeNm[0]!, toNm: blocks.edgeNm[blocks.count]!, givenAv: given });
  const trusted = spectrum.fluxCalibration === 'uncalibrated' ? asShapeOnly(verdict) : verdict;
  return assemble('planck', refined, blocks, quality, placement, trusted);
}

const givenTemperature = (temperatureK: number): Verdict => ({
  temperatureK,
  temperatureSigmaK: null,
  constrained: false,
  statement: `The temperature was set to ${Math.round(temperatureK)} K by a person: the continuum follows its Planck curve, and none was fitted.`,
  lowerBoundK: null,
  upperBoundK: null,
});

const LOCAL_STATEMENTS: Record<LocalReason, string> = {
  asked: 'A local continuum was asked for, so no temperature was fitted.',
  normalised: 'The flux is normalised: its shape says nothing of a temperature, and the continuum was traced locally.',
  counts:
    'The flux is in counts: without a flux calibration its shape says nothing of a temperature, and the continuum was traced locally.',
  no_fit: 'No Planck curve could be fitted, and the continuum was traced locally.',
};

function fitLocalModel(
  spectrum: Spectrum,
  noise: NoiseModel,
  blocks: Blocks,
  start: Start,
  startK: number,
  reason: LocalReason,
): ContinuumFit | null {
  const model = makeSmoothModel(blocks, () => 0, startK, ORDERS);
  const free = { temperature: false, extinction: false, response: ANY_SHAPE };
  const refined = refine(spectrum, noise, blocks, model, start, free, trustBesideHydrogen(blocks, start, startK));
  if (!refined) return null;
  const quality = describeQuality(spectrum, blocks, refined);
  return assemble('local', refined, blocks, quality, placementSigma(refined, model, noise, quality), {
    temperatureK: null,
    temperatureSigmaK: null,
    constrained: false,
    statement: LOCAL_STATEMENTS[reason],
    lowerBoundK: null,
    upperBoundK: null,
  });
}

function assemble(
  model: Continuum['model'],
  refined: Refined,
  blocks: Blocks,
  quality: Quality,
  levelSigma: number,
  verdict: Verdict,
): ContinuumFit {
  const { temperatureK } = verdict;
  return {
    summary: {
      model,
      ...verdict,
      wienPeakNm: temperatureK === null ? null : wienPeakNm(temperatureK),
      chi2PerDegree: quality.chi2PerDegree,
      clippedFraction: quality.clippedFraction,
      sampleNm: Array.from(blocks.edgeNm),
      sampleFlux: Array.from(refined.edgeLevel),
    },
    level: refined.space.level,
    levelSigma,
  };
}
