/** A feature of the current analysis of a spectrum, with where it belongs. */
export interface DecidedFeature {
  readonly analysisId: string;
  readonly spectrumId: string;
  readonly targetId: string;
  readonly lineListId: string;
  readonly index: number;
  readonly kind: 'dip' | 'peak';
  readonly wavelengthNm: number;
  readonly wavelengthSigmaNm: number;
  readonly equivalentWidthNm: number;
  readonly equivalentWidthSigmaNm: number;
  readonly fwhmNm: number;
  readonly depth: number;
  readonly snr: number;
  readonly flags: readonly string[];
  readonly unidentifiedProbability: number;
}

/** What a feature is said to be; all null but the probability when it is said to be unidentified. */
export interface Reading {
  readonly lineId: string | null;
  readonly species: string | null;
  readonly restNm: number | null;
  readonly lineSource: string | null;
  readonly family: string | null;
  readonly systemId: string | null;
  readonly velocityKmPerS: number | null;
  readonly velocitySigmaKmPerS: number | null;
  readonly probability: number;
}
