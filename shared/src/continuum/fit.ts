import type { AnalysisSettings, Continuum } from '../identify/analysis.js';
import type { NoiseModel } from '../noise/index.js';
import type { Spectrum } from '../spectrum/index.js';
import { cutBlocks } from './blocks.js';
import { extinctionCurve } from './extinction.js';
import { wienPeakNm } from './planck.js';
import { refine } from './refine.js';
import { AV, LN_PER_MAG, LN_T, makeSmoothModel } from './smooth-model.js';
import { startTemperature, startValues } from './start.js';

/** The continuum under a spectrum: what is told and drawn, and the level per sample. */
export interface ContinuumFit {
  readonly summary: Continuum;
  /** continuum flux per sample, finite everywhere */
  readonly level: Float64Array;
  /** relative 1 sigma error of the placement */
  readonly levelSigma: Float64Array | number;
}

const ORDERS = 20;

/** Fits the continuum. First version: Planck curve times a Chebyshev series, refined by rounds of box rejection. */
export function fitContinuum(spectrum: Spectrum, noise: NoiseModel, settings: AnalysisSettings): ContinuumFit {
  const { flux, bad } = spectrum;
  const blocks = cutBlocks(spectrum.wavelength);
  const { values, pull } = startValues(spectrum, noise, blocks);
  const av = settings.extinctionAv ?? 0;
  const temperature = startTemperature(blocks, values, (nm) => -LN_PER_MAG * av * extinctionCurve(nm));
  const model = makeSmoothModel(blocks, temperature, av, ORDERS);
  const refined = refine(spectrum, noise, blocks, model, values, pull, settings.extinctionAv === null)!;
  const { space, edgeLevel } = refined;
  let clipped = 0;
  for (let i = 0; i < flux.length; i++) if (space.rejected[i] && !bad[i]) clipped++;
  const summary: Continuum = {
    model: 'planck',
    temperatureK: temperature,
    temperatureSigmaK: null,
    constrained: false,
    statement:
      'The temperature is not judged yet.' +
      pull +
      JSON.stringify(refined.response) +
      refined.fit.coefficients[LN_T] +
      ' ' +
      refined.fit.coefficients[AV],
    lowerBoundK: null,
    upperBoundK: null,
    wienPeakNm: wienPeakNm(temperature),
    chi2PerDegree: null,
    clippedFraction: clipped / Math.max(1, flux.length),
    sampleNm: Array.from(blocks.edgeNm),
    sampleFlux: Array.from(edgeLevel),
  };
  return { summary, level: space.level, levelSigma: 0.001 };
}
