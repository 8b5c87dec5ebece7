import type { Continuum } from '../identify/analysis.js';
import type { NoiseModel } from '../noise/index.js';
import { runningMedian } from '../numeric/running-quantile.js';
import { median } from '../numeric/select.js';
import type { Spectrum } from '../spectrum/index.js';
import type { Blocks } from './blocks.js';
import type { ContinuumFit } from './model.js';

const nothingKnown = (statement: string, sampleNm: number[], sampleFlux: number[]): Continuum => ({
  model: 'local',
  temperatureK: null,
  temperatureSigmaK: null,
  constrained: false,
  statement,
  lowerBoundK: null,
  upperBoundK: null,
  wienPeakNm: null,
  chi2PerDegree: null,
  clippedFraction: 0,
  sampleNm,
  sampleFlux,
});

/** A level of one value, the median of the good samples, for spectra too short for any model. */
export function flatLevel({ flux, bad, wavelength }: Spectrum): ContinuumFit {
  const n = flux.length;
  const middle = median(flux.map((f, i) => (bad[i] ? NaN : f)));
  const value = middle > 0 ? middle : 1;
  const ends = n === 0 ? [] : n === 1 ? [wavelength[0]!] : [wavelength[0]!, wavelength[n - 1]!];
  const statement = 'There are too few usable samples to fit a continuum; the median of the flux stands for it.';
  return {
    summary: nothingKnown(
      statement,
      ends,
      ends.map(() => value),
    ),
    level: new Float64Array(n).fill(value),
    levelSigma: 1,
  };
}

/**
 * A running median over a twelfth of the spectrum, for fluxes so often below zero that nothing smooth can be fitted to their logarithm.
 * It is kept above a tenth of the noise: equivalent widths then say little, but dips and peaks can still be found.
 */
export function tracedLevel({ flux, bad, wavelength }: Spectrum, noise: NoiseModel, blocks: Blocks): ContinuumFit {
  const good = flux.map((f, i) => (bad[i] ? NaN : f));
  const level = runningMedian(good, Math.max(25, Math.floor(flux.length / 12)));
  for (let i = 0; i < level.length; i++) level[i] = Math.max(0.1 * noise.sigma[i]!, level[i]! || 0);
  const at = Array.from(blocks.first, (i) => Math.min(flux.length - 1, i));
  const statement =
    'The flux is near or below zero over much of the range: a running median stands for the continuum, and equivalent widths are unsure.';
  return {
    summary: nothingKnown(
      statement,
      at.map((i) => wavelength[i]!),
      at.map((i) => level[i]!),
    ),
    level,
    levelSigma: 1,
  };
}
