import type { AnalysisSettings } from '../identify/index.js';
import type { AnalysisSummary, Identification, Iso } from './api.js';

/** One run in the list of a spectrum's runs: with its settings, so that what differs between two can be said without their results. */
export interface AnalysisRun extends AnalysisSummary {
  settings: AnalysisSettings;
}

/** Settings kept under a name by a programme. What is not in them is at its default. */
export interface AnalysisRecipe {
  id: string;
  name: string;
  settings: Partial<AnalysisSettings>;
  version: number;
  createdBy: string;
  changedBy: string;
  changedAt: Iso;
}
export interface NewAnalysisRecipe {
  name: string;
  settings: Partial<AnalysisSettings>;
}
/** Only what is named changes. If-Match carries the version seen. */
export type AnalysisRecipeChange = Partial<NewAnalysisRecipe>;

/** A decision that belongs to no feature of the spectrum's current analysis. */
export interface UnplacedDecision {
  identification: Identification;
  /** somebody said that it is to stand all the same, for this analysis */
  kept: { by: string; at: Iso } | null;
}
/** Puts an unplaced decision on a feature of the current analysis. If-Match carries the identification's version. */
export interface PlaceDecision {
  analysisId: string;
  featureIndex: number;
}
