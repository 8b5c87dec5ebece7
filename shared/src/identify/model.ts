import type { Family, Line } from '../linelist/index.js';

/** A line expected in a system: where, how strong, how wide. */
export interface Expected {
  readonly line: Line;
  /** vacuum nm, where the system's velocity puts it */
  readonly wavelength: number;
  /** log10 of the expected |W| in nm before the species' own offset */
  readonly logW: number;
  /** scatter of this line about its species, dex */
  readonly scatter: number;
  /** 1 sigma of the position: system velocity and laboratory wavelength, km/s */
  readonly sigmaV: number;
  readonly fwhmV: number;
  /** natural-log spread of the width about that, where it is larger than of lines at large */
  readonly widthSpread?: number;
  /** set of lines that run into their neighbours: that none of them stands out says nothing */
  readonly merges?: boolean;
}

/** All expected lines of one species in one system. Their strengths share an offset that the data decide. */
export interface SpeciesModel {
  readonly species: string;
  /** ascending in wavelength */
  readonly lines: Expected[];
  /** prior of the common offset, dex */
  readonly priorMean: number;
  readonly priorSigma: number;
  /** prior chance that the species shows in such a system at all */
  readonly presence: number;
}

/** A velocity system with everything it is expected to show. */
export interface SystemModel {
  readonly id: string;
  readonly family: Family;
  readonly kind: 'dip' | 'peak';
  readonly velocity: number;
  readonly velocitySigma: number;
  readonly significance: number;
  readonly fwhmV: number;
  readonly species: SpeciesModel[];
  /** log10 of the expected |W| in nm of any lines of the family, covered or not; NaN where the strength model knows none */
  readonly strengthOf?: (lines: readonly Line[]) => Float64Array;
  /** a person set it: it is kept even when no feature is its */
  readonly set?: boolean;
}
