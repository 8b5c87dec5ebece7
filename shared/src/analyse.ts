import type { Analysis, AnalysisSettings, AnalysisStep } from './identify/index.js';
import type { LineList } from './linelist/index.js';
import type { Spectrum } from './spectrum/index.js';

/** Told at the start of each step, with the fraction done; may throw to stop the run (cancelling). */
export type OnProgress = (step: AnalysisStep, done: number) => void;

/** The pipeline. */
export function analyse(spectrum: Spectrum, list: LineList, settings: AnalysisSettings, onProgress?: OnProgress): Analysis {
  throw new Error(`not built yet: ${spectrum.flux.length} ${list.name} ${settings.falseFeatures} ${typeof onProgress}`);
}
