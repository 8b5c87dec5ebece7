import type { Family } from '../linelist/index.js';
import type { Frame } from '../spectrum/index.js';

export type Side = 'a' | 'b';
export const VERDICTS = ['shared', 'only-a', 'only-b', 'telluric', 'cannot-tell'] as const;
export type Verdict = (typeof VERDICTS)[number];

/** What a person may set for a comparison. Everything has a default; the whole object is stored with the result. */
export interface ComparisonSettings {
  /** clouds of the two sightlines closer than this, or than three of their joint errors, are tried as one; km/s */
  readonly matchKmPerS: number;
  /** added to the velocities of a side, km/s: brings a spectrum of unknown or other frame to the scale of its partner */
  readonly offsetAKmPerS: number;
  readonly offsetBKmPerS: number;
  /** clouds that a person wants measured besides those that the analyses found, km/s on the common scale */
  readonly extraCloudsKmPerS: readonly number[];
  /** profiles are kept within +- this of the clouds for drawing, km/s */
  readonly profileRangeKmPerS: number;
}

export const DEFAULT_COMPARISON_SETTINGS: ComparisonSettings = {
  matchKmPerS: 0.6,
  offsetAKmPerS: 0,
  offsetBKmPerS: 0,
  extraCloudsKmPerS: [],
  profileRangeKmPerS: 60,
};

/** What one spectrum shows of a line at the velocity asked; null on a row where the line is not covered by it. */
export interface LineMeasure {
  /** nm, positive in absorption */
  readonly equivalentWidthNm: number;
  readonly equivalentWidthSigmaNm: number;
  /** 2 sigma: a width below this could not have been seen */
  readonly limitNm: number;
  /** km/s on the common scale; null where the line is too weak to have a velocity of its own */
  readonly velocityKmPerS: number | null;
  readonly velocitySigmaKmPerS: number | null;
  /** FWHM of the instrument profile, km/s */
  readonly elementKmPerS: number;
  /** feature of the analysis that holds the light, if one does */
  readonly featureIndex: number | null;
  /** light that the star or the air takes at the same place and that was divided out, nm; 0 when none */
  readonly foreignNm: number;
}

/** One line with its verdict. */
export interface ComparedLine {
  /** stable within a comparison: line, family and component */
  readonly key: string;
  readonly lineId: string;
  readonly species: string;
  readonly restNm: number;
  readonly family: Family;
  /** cloud (index into `clouds`) that it belongs to; null for lines of stars and air */
  readonly cloud: number | null;
  /** km/s on the common scale: the cloud's, the star's or the air's */
  readonly velocityKmPerS: number;
  readonly verdict: Verdict;
  /** chance that the verdict is right, 0 to 1; for 'cannot-tell' the chance of the likeliest other verdict */
  readonly probability: number;
  readonly a: LineMeasure | null;
  readonly b: LineMeasure | null;
  /** W in B over W in A; null unless both are seen */
  readonly ratio: number | null;
  readonly ratioSigma: number | null;
  /** velocity in B less velocity in A, km/s; null unless both have one */
  readonly differenceKmPerS: number | null;
  readonly differenceSigmaKmPerS: number | null;
  /** one sentence: why, with numbers, units and the limit used */
  readonly sentence: string;
}

/** How a column was had: apparent depth of resolved or thin lines, curve of growth, or not seen (an upper limit). */
export type ColumnMethod = 'apparent-depth' | 'curve-of-growth' | 'limit';

/** Column density of one species in one cloud towards one star. */
export interface Column {
  readonly method: ColumnMethod;
  /** log10 cm^-2; of a limit, the 2 sigma upper limit; of a saturated line, a lower limit */
  readonly logN: number;
  /** dex; null for limits */
  readonly logNSigma: number | null;
  /** log10 of the apparent column, integrated over the strongest line's profile (Savage & Sembach 1991); null when not seen */
  readonly apparentLogN: number | null;
  readonly saturated: boolean;
  /** lines used */
  readonly lines: readonly string[];
  /** one sentence when the number does not stand as it is: too saturated, unresolved, blended; else empty */
  readonly sentence: string;
}

export interface SpeciesColumns {
  readonly species: string;
  readonly a: Column | null;
  readonly b: Column | null;
  /** log N in B less log N in A, dex; null unless both stand */
  readonly difference: number | null;
  readonly differenceSigma: number | null;
}

/** A cloud component of either sightline, with what it holds towards both. */
export interface ComparedCloud {
  readonly velocityKmPerS: number;
  readonly velocitySigmaKmPerS: number;
  readonly verdict: Exclude<Verdict, 'telluric'>;
  readonly probability: number;
  /** what each analysis or its lines say, km/s; null where the cloud is not seen */
  readonly a: { readonly velocityKmPerS: number; readonly sigmaKmPerS: number; readonly bKmPerS: number } | null;
  readonly b: { readonly velocityKmPerS: number; readonly sigmaKmPerS: number; readonly bKmPerS: number } | null;
  readonly columns: readonly SpeciesColumns[];
  readonly sentence: string;
}

/** Absorption towards one star met by emission of the same gas in the other spectrum. */
export interface EmissionMatch {
  readonly cloud: number;
  /** side with the emission */
  readonly side: Side;
  readonly velocityKmPerS: number;
  readonly velocitySigmaKmPerS: number;
  readonly differenceKmPerS: number;
  readonly differenceSigmaKmPerS: number;
  /** chance that it is the same gas and not a coincidence of velocities */
  readonly probability: number;
  readonly peaks: readonly { readonly species: string; readonly restNm: number; readonly featureIndex: number }[];
  readonly sentence: string;
}

/** A reading that the other sightline makes likelier. An offer: nothing is changed by it. */
export interface ReadingOffer {
  readonly side: Side;
  readonly featureIndex: number;
  readonly wavelengthNm: number;
  readonly before: { readonly species: string; readonly restNm: number; readonly family: Family; readonly probability: number } | null;
  readonly offered: {
    readonly lineId: string;
    readonly species: string;
    readonly restNm: number;
    readonly systemId: string | null;
    readonly velocityKmPerS: number;
    readonly probabilityBefore: number;
    readonly probability: number;
  };
  readonly sentence: string;
}

/** Normalised light of one line on the common velocity scale, for drawing; null where masked or not covered. */
export interface VelocityProfile {
  readonly lineId: string;
  readonly species: string;
  readonly restNm: number;
  readonly a: ProfileSamples | null;
  readonly b: ProfileSamples | null;
}
export interface ProfileSamples {
  readonly velocityKmPerS: readonly number[];
  readonly flux: readonly (number | null)[];
  /** what clouds, star and air together are thought to leave */
  readonly model: readonly number[];
}

export interface SightlineSummary {
  readonly frame: Frame;
  readonly resolvingPower: number;
  readonly snr: number;
  readonly fromNm: number;
  readonly toNm: number;
  /** velocities of the systems that stay apart, on the common scale, km/s */
  readonly starKmPerS: number | null;
  readonly airKmPerS: number | null;
}

export interface SightlineComparison {
  readonly programVersion: string;
  readonly lineListName: string;
  readonly lineListVersion: string;
  readonly settings: ComparisonSettings;
  readonly a: SightlineSummary;
  readonly b: SightlineSummary;
  readonly lines: readonly ComparedLine[];
  readonly clouds: readonly ComparedCloud[];
  readonly emission: readonly EmissionMatch[];
  readonly offers: readonly ReadingOffer[];
  readonly profiles: readonly VelocityProfile[];
  /** complete sentences to read before trusting the numbers */
  readonly cautions: readonly string[];
}
