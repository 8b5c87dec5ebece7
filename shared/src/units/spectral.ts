import { C_M_PER_S, HC_J_NM, J_PER_EV } from './constants.js';
import type { VacuumNm, WavelengthUnit } from './types.js';

/** Units of a spectral coordinate. All but the lengths belong to vacuum by their nature. */
export type SpectralUnit =
  'm' | 'nm' | 'angstrom' | 'micron' | 'wavenumber_per_cm' | 'wavenumber_per_m' | 'hz' | 'ghz' | 'thz' | 'ev' | 'kev';

interface Rule {
  /** proportional: nm = value * factor; reciprocal: nm = factor / value (and back, the same) */
  readonly kind: 'proportional' | 'reciprocal';
  readonly factor: number;
}

const C_NM_PER_S = C_M_PER_S * 1e9;
const HC_EV_NM = HC_J_NM / J_PER_EV;

const RULES: Record<SpectralUnit, Rule> = {
  m: { kind: 'proportional', factor: 1e9 },
  nm: { kind: 'proportional', factor: 1 },
  angstrom: { kind: 'proportional', factor: 0.1 },
  micron: { kind: 'proportional', factor: 1e3 },
  wavenumber_per_cm: { kind: 'reciprocal', factor: 1e7 },
  wavenumber_per_m: { kind: 'reciprocal', factor: 1e9 },
  hz: { kind: 'reciprocal', factor: C_NM_PER_S },
  ghz: { kind: 'reciprocal', factor: C_NM_PER_S * 1e-9 },
  thz: { kind: 'reciprocal', factor: C_NM_PER_S * 1e-12 },
  ev: { kind: 'reciprocal', factor: HC_EV_NM },
  kev: { kind: 'reciprocal', factor: HC_EV_NM * 1e-3 },
};

/** True for lengths, where air and vacuum differ; false for frequency, energy and wavenumber, which are vacuum by definition. */
export const isLength = (unit: SpectralUnit): boolean => RULES[unit].kind === 'proportional';

/**
 * A spectral coordinate as a wavelength in nm, in the medium it was given in (vacuum unless a length).
 * Zero frequency, energy or wavenumber gives Infinity.
 */
export function toNm(value: number, unit: SpectralUnit): number {
  const { kind, factor } = RULES[unit];
  // division by ten is exact to the last digit where a product with 0.1 is not
  if (unit === 'angstrom') return value / 10;
  return kind === 'proportional' ? value * factor : factor / value;
}

/** The inverse of `toNm`. */
export function fromNm(nm: number, unit: SpectralUnit): number {
  const { kind, factor } = RULES[unit];
  if (unit === 'angstrom') return nm * 10;
  return kind === 'proportional' ? nm / factor : factor / nm;
}

const SHOWN: Record<WavelengthUnit, SpectralUnit> = {
  nm: 'nm',
  angstrom: 'angstrom',
  micron: 'micron',
  wavenumber: 'wavenumber_per_cm',
  terahertz: 'thz',
  electronvolt: 'ev',
};

/** Whether a person who chose this unit also has to choose between air and vacuum. */
export const hasMedium = (unit: WavelengthUnit): boolean => isLength(SHOWN[unit]);

/** A vacuum wavelength in the unit a person chose; wavenumbers in cm^-1, frequencies in THz, photon energies in eV. */
export const wavelengthIn = (vacuum: VacuumNm, unit: WavelengthUnit): number => fromNm(vacuum, SHOWN[unit]);

/** What a person typed, as vacuum nm. */
export const wavelengthFrom = (value: number, unit: WavelengthUnit): VacuumNm => toNm(value, SHOWN[unit]) as VacuumNm;
