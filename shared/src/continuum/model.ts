import type { Continuum } from '../identify/analysis.js';

/** The continuum under a spectrum: what is told and drawn, and the level per sample. */
export interface ContinuumFit {
  readonly summary: Continuum;
  /** continuum flux per sample, in the unit of the flux; finite and positive everywhere */
  readonly level: Float64Array;
  /** relative 1 sigma error of the placement, typical of the spectrum */
  readonly levelSigma: Float64Array | number;
}
