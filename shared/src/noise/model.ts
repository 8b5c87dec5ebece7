/** What is known of the noise of one spectrum. */
export interface NoiseModel {
  /** 1 sigma per pixel in the unit of the flux; finite and positive everywhere, bad samples take their neighbours' value */
  readonly sigma: Float64Array;
  readonly how: 'stated' | 'estimated' | 'stated_rescaled';
  /** autocorrelation of the noise from pixel to pixel at lags 0, 1, 2, ...: [1] for white noise */
  readonly correlation: readonly number[];
  /** factor by which a stated sigma was multiplied; 1 when it was left alone or when none was stated */
  readonly rescale: number;
}
