import type { Family } from '../linelist/index.js';

/** A stretch of the spectrum, vacuum nm. */
export interface Region {
  readonly fromNm: number;
  readonly toNm: number;
}

/** A velocity at which a person says a family of lines is: it is used even where the analysis alone would not find it. */
export interface SetSystem {
  readonly family: Family;
  /** in the frame of the spectrum, positive receding */
  readonly velocityKmPerS: number;
  /** how far the analysis may move it to fit its lines */
  readonly toleranceKmPerS: number;
}

/** Velocities at which a family of lines must not be found. */
export interface ForbiddenSystem {
  readonly family: Family;
  readonly fromKmPerS: number;
  readonly toKmPerS: number;
}

/** A species to be considered in a family beside those the method considers there. */
export interface AlsoSpecies {
  readonly species: string;
  readonly family: Family;
}

/**
 * A correction of the continuum by a factor: in full over the middle half of the region, fading by a cosine to 1 at its ends, so that the
 * level stays smooth. Several corrections multiply.
 */
export interface ContinuumMove extends Region {
  readonly factor: number;
}

/** Where a feature of an analysis is, for splitting or removing the one nearest to it. */
export interface FeaturePlace {
  readonly kind: 'dip' | 'peak';
  readonly wavelengthNm: number;
}

/** A feature placed by a person; the fit then finds its centre, width and depth from there. */
export interface AddedFeature extends FeaturePlace {
  /** null: as wide as the instrument shows a sharp line */
  readonly fwhmNm: number | null;
}

/** What a person may set for a run. Everything has a default; the whole object is stored with the analysis. */
export interface AnalysisSettings {
  /** expected number of false features in the whole spectrum */
  readonly falseFeatures: number;
  /** visual extinction A_V in mag to apply to the Planck model; null: what the data say */
  readonly extinctionAv: number | null;
  readonly extinctionLaw: 'ccm89' | 'odonnell94' | 'fitzpatrick99';
  /** R_V = A_V / E(B-V) */
  readonly extinctionRv: number;
  /** use the local continuum even where a Planck fit is possible */
  readonly localContinuum: boolean;
  /** temperature, K, of the strength model and perhaps of the continuum; null: what the data say */
  readonly temperatureK: number | null;
  readonly temperatureUse: 'strengths' | 'strengths_and_continuum';
  /** systems are looked for within +- this velocity, km/s */
  readonly velocityRangeKmPerS: number;
  readonly setSystems: readonly SetSystem[];
  readonly forbiddenSystems: readonly ForbiddenSystem[];
  /** empty: all species of the list */
  readonly onlySpecies: readonly string[];
  readonly withoutSpecies: readonly string[];
  readonly alsoSpecies: readonly AlsoSpecies[];
  /** left out of every fit and of the detection */
  readonly maskedRegions: readonly Region[];
  readonly continuumMoves: readonly ContinuumMove[];
  readonly addedFeatures: readonly AddedFeature[];
  readonly splitFeatures: readonly FeaturePlace[];
  readonly removedFeatures: readonly FeaturePlace[];
}

export const DEFAULT_SETTINGS: AnalysisSettings = {
  falseFeatures: 0.5,
  extinctionAv: null,
  extinctionLaw: 'ccm89',
  extinctionRv: 3.1,
  localContinuum: false,
  temperatureK: null,
  temperatureUse: 'strengths',
  velocityRangeKmPerS: 300,
  setSystems: [],
  forbiddenSystems: [],
  onlySpecies: [],
  withoutSpecies: [],
  alsoSpecies: [],
  maskedRegions: [],
  continuumMoves: [],
  addedFeatures: [],
  splitFeatures: [],
  removedFeatures: [],
};

/** Settings as given, the rest at its default. What was left out, or is unknown to this version, does not count. */
export function completeSettings(given: Partial<AnalysisSettings>): AnalysisSettings {
  const known = Object.keys(DEFAULT_SETTINGS) as (keyof AnalysisSettings)[];
  return Object.fromEntries(known.map((key) => [key, given[key] ?? DEFAULT_SETTINGS[key]])) as unknown as AnalysisSettings;
}
