import type { DampedShape } from '../profiles/index.js';
import type { Frame } from '../spectrum/index.js';
import type { Family } from '../linelist/index.js';
import type { AnalysisSettings } from './settings.js';

export * from './settings.js';

/** Continuum under a spectrum, and what it tells of the temperature. Arrays sample the model for drawing. */
export interface Continuum {
  readonly model: 'planck' | 'local';
  /** colour temperature, K; null when no Planck model was fitted */
  readonly temperatureK: number | null;
  /** 1 sigma, statistical and systematic together, K */
  readonly temperatureSigmaK: number | null;
  readonly constrained: boolean;
  /** why not, and the bound that holds; complete sentences */
  readonly statement: string;
  readonly lowerBoundK: number | null;
  readonly upperBoundK: number | null;
  readonly wienPeakNm: number | null;
  readonly chi2PerDegree: number | null;
  readonly clippedFraction: number;
  /** vacuum nm and the continuum flux there, in the spectrum's flux unit; at most a few thousand samples */
  readonly sampleNm: readonly number[];
  readonly sampleFlux: readonly number[];
}

/** A velocity at which a family of lines shows. */
export interface VelocitySystem {
  readonly id: string;
  readonly family: Family;
  readonly velocityKmPerS: number;
  readonly velocitySigmaKmPerS: number;
  /** in sigma-like units */
  readonly significance: number;
  /** features whose first candidate is in this system */
  readonly members: number;
  /** typical FWHM of its lines, km/s */
  readonly fwhmKmPerS: number;
  /** z, of systems too fast for a velocity to be the usual word */
  readonly redshift?: number;
  /** a person set it; it may have no member then */
  readonly set?: boolean;
}

export type FeatureFlag = 'cosmic' | 'blend' | 'saturated' | 'edge' | 'band' | 'sky' | 'by_hand';

/** Another line of the species that should be visible in the same system. */
export interface Companion {
  readonly species: string;
  readonly restNm: number;
  readonly outcome: 'seen' | 'missing' | 'not_covered' | 'below_limit';
  /** nm, positive in absorption */
  readonly expectedNm: number;
  readonly expectedSigmaNm: number;
  readonly measuredNm: number | null;
  readonly measuredSigmaNm: number | null;
}

/** One part of the argument: a factor on the odds (natural log) and the words for it. */
export interface EvidencePart {
  readonly part: 'position' | 'strength' | 'companions' | 'width' | 'chance';
  readonly logOdds: number;
  /** numbers and units in one sentence */
  readonly sentence: string;
}

/** The observation that would decide about a reading: a companion that the data do not cover, or cover too coarsely. */
export interface Settling {
  readonly why: 'not_covered' | 'too_weak';
  readonly species: string;
  /** vacuum nm */
  readonly restNm: number;
  /** vacuum nm, where the system's velocity puts it */
  readonly observedNm: number;
  /** nm, positive in absorption and in emission alike; null when the strength model does not reach there */
  readonly expectedNm: number | null;
  readonly expectedSigmaNm: number | null;
  /** how many times the signal to noise would have to be for it to show; null when it is not covered */
  readonly signalToNoiseTimes: number | null;
  /** a complete sentence with numbers and units */
  readonly sentence: string;
}

/** A ranked reading of a feature. The five parts' log odds add to ln(p / (1 - p)). */
export interface Candidate {
  readonly lineId: string;
  readonly species: string;
  readonly restNm: number;
  readonly family: Family;
  readonly systemId: string;
  readonly velocityKmPerS: number;
  readonly velocitySigmaKmPerS: number;
  /** chance that the line makes at least 30 % of the feature's equivalent width */
  readonly probability: number;
  /** expected share of the feature's equivalent width, 0 to 1 */
  readonly share: number;
  readonly expectedNm: number | null;
  readonly expectedSigmaNm: number | null;
  readonly evidence: readonly EvidencePart[];
  readonly companions: readonly Companion[];
  /** one sentence: why it ranks where it does */
  readonly sentence: string;
  /** what would settle it, for leading candidates that are neither certain nor hopeless; absent from results of earlier programs */
  readonly settle?: Settling | null;
}

/** One species in one velocity system: whether it shows there, from all its lines together. */
export interface SpeciesPresence {
  readonly systemId: string;
  readonly family: Family;
  readonly species: string;
  /** chance that it makes at least one of the features */
  readonly probability: number;
  /** its lines that should show and do */
  readonly seen: number;
  /** its lines that should show and do not */
  readonly missing: number;
  /** its lines too weak for these data */
  readonly belowLimit: number;
  /** features whose first candidate it is */
  readonly features: number;
  /** how much stronger (or weaker) than the strength model its lines are, dex, with 1 sigma */
  readonly offsetDex: number;
  readonly offsetSigmaDex: number;
  /** a complete sentence with numbers and units */
  readonly sentence: string;
}

/** A dip or a peak with its measurements. */
export interface Feature {
  readonly index: number;
  readonly kind: 'dip' | 'peak';
  readonly wavelengthNm: number;
  readonly wavelengthSigmaNm: number;
  /** positive in absorption, negative in emission */
  readonly equivalentWidthNm: number;
  readonly equivalentWidthSigmaNm: number;
  /** by direct summation over the profile's range, beside the fitted one */
  readonly directEquivalentWidthNm: number;
  readonly directEquivalentWidthSigmaNm: number;
  readonly fwhmNm: number;
  readonly fwhmSigmaNm: number;
  /** 1 - F/Fc at the centre of the fitted profile; negative for peaks */
  readonly depth: number;
  readonly depthSigma: number;
  /** shape of the fitted profile: for drawing */
  readonly shape: 'gaussian' | 'voigt' | 'rotation' | 'band';
  /** of a 'voigt' shape, for drawing: central optical depth, damping in Doppler widths, Doppler width in nm */
  readonly damped?: DampedShape & { readonly dopplerNm: number };
  /** matched-filter significance, sigma */
  readonly significance: number;
  /** local continuum signal to noise per pixel */
  readonly snr: number;
  readonly flags: readonly FeatureFlag[];
  readonly candidates: readonly Candidate[];
  readonly unidentifiedProbability: number;
}

/** One run of the pipeline on a spectrum. Same bytes in, same settings, list and program: same bytes out. */
export interface Analysis {
  readonly programVersion: string;
  readonly lineListName: string;
  readonly lineListVersion: string;
  readonly settings: AnalysisSettings;
  readonly points: number;
  readonly fromNm: number;
  readonly toNm: number;
  readonly frame: Frame;
  readonly resolvingPower: number;
  readonly resolvingPowerHow: 'stated' | 'estimated';
  /** median continuum signal to noise per pixel */
  readonly snr: number;
  readonly noiseHow: 'stated' | 'estimated' | 'stated_rescaled';
  readonly continuum: Continuum;
  readonly systems: readonly VelocitySystem[];
  readonly features: readonly Feature[];
  /** by system, likeliest first; absent from results of earlier programs */
  readonly species?: readonly SpeciesPresence[];
  /** complete sentences a person should read before trusting the numbers */
  readonly cautions: readonly string[];
}

export const ANALYSIS_STEPS = ['continuum', 'noise', 'detection', 'measurement', 'systems', 'identification'] as const;
export type AnalysisStep = (typeof ANALYSIS_STEPS)[number];
