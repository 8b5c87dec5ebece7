/** Where a line is met: a star's photosphere, gas in front of it, a nebula, or the Earth's air (absorption and sky emission). */
export type Family = 'stellar' | 'interstellar' | 'nebular' | 'telluric';

/** One listed line, with its source. Numbers are null where the list has none. */
export interface Line {
  readonly id: string;
  /** 'Na I', '[O III]' is written 'O III' with `type` forbidden; 'CH+', 'H2O', 'DIB' */
  readonly species: string;
  readonly element: string;
  /** 1 = neutral; 0 for molecules and bands */
  readonly ionStage: number;
  /** vacuum nm */
  readonly wavelengthNm: number;
  readonly type: string;
  readonly lowerEnergyPerCm: number | null;
  readonly upperEnergyPerCm: number | null;
  readonly lowerJ: number | null;
  readonly upperJ: number | null;
  readonly logGf: number | null;
  readonly oscillatorStrength: number | null;
  /** s^-1 */
  readonly einsteinA: number | null;
  /** intrinsic FWHM of a band, nm */
  readonly bandFwhmNm: number | null;
  /** where the list says it is usually met; may name several */
  readonly settings: readonly Family[];
  readonly multiplet: string;
  readonly relativeIntensity: number | null;
  readonly relativeIntensityScale: string;
  readonly tier: 1 | 2;
  readonly source: string;
  /** a person asked for the species where it is not usual, so no table of the usual ones keeps it out */
  readonly asked?: boolean;
}

/** A named, versioned, citable set of lines, ascending in wavelength. */
export interface LineList {
  readonly name: string;
  readonly version: string;
  readonly lines: readonly Line[];
}
