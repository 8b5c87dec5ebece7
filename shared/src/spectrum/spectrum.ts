/** What the flux column of a spectrum is. Planck work needs flux per wavelength; per frequency is converted on reading. */
export type FluxKind = 'per_wavelength' | 'per_frequency' | 'normalised' | 'counts' | 'unknown';

/** How far the flux scale can be trusted (FLUXCAL; Char.FluxAxis.Calibration of the IVOA Spectrum model): uncalibrated has no true shape. */
export type FluxCalibration = 'absolute' | 'relative' | 'normalised' | 'uncalibrated';

/** Velocity frame in which the wavelengths stand. */
export type Frame = 'topocentric' | 'geocentric' | 'heliocentric' | 'barycentric' | 'lsrk' | 'lsrd' | 'source' | 'unknown';

/** Neighbouring samples of one order or piece of the file: `from` to `to` (exclusive) of the arrays. */
export interface Segment {
  readonly from: number;
  readonly to: number;
  /** what the piece is called: 'row 3', 'lines 402 to 801' */
  readonly name: string;
}

/**
 * One reduced 1-D spectrum as the analysis sees it. Columns of equal length; never an array of objects.
 * Bad samples stay in place with `bad[i] = 1` and carry zero weight.
 */
export interface Spectrum {
  /** vacuum nm, ascending; within a segment strictly ascending */
  readonly wavelength: Float64Array;
  /** in the file's own flux unit (F_lambda when `fluxKind` is per_wavelength); NaN where missing */
  readonly flux: Float64Array;
  /** 1 sigma in the unit of the flux, NaN where unknown; null when the file gives none */
  readonly sigma: Float64Array | null;
  /** 1 where the sample must not be used (masked, NaN, zero inverse variance, non-positive sigma) */
  readonly bad: Uint8Array;
  readonly fluxKind: FluxKind;
  /** null or absent: not stated */
  readonly fluxCalibration?: FluxCalibration | null;
  /** lambda / FWHM of the instrument profile; null when not stated */
  readonly resolvingPower: number | null;
  readonly frame: Frame;
  /**
   * The orders it was joined from, in ascending order, without gaps or overlap; absent or one entry when it is of one piece.
   * Flux scale, noise and resolving power may step from one to the next; no sample of two orders was mixed into one.
   */
  readonly segments?: readonly Segment[];
  /**
   * Velocity, km/s, at which lines of the Earth's air stand on these wavelengths: 0 in a topocentric spectrum, else the
   * correction that brought it to its frame (all lines were moved by it). Null or absent: not known, look within the reach of the frame.
   */
  readonly observerVelocityKmPerS?: number | null;
}
