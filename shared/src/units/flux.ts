import { C_M_PER_S, HC_J_NM } from './constants.js';

/** Units of flux density the program converts between. 'cgs' is erg s-1 cm-2 Angstrom-1 or Hz-1. */
export type FluxDensityUnit =
  'cgs_per_angstrom' | 'w_m2_per_nm' | 'w_m2_per_micron' | 'photon_per_angstrom' | 'cgs_per_hz' | 'w_m2_per_hz' | 'jy' | 'mjy';

/** W m-2 nm-1 in one unit of a flux density per wavelength. */
const PER_WAVELENGTH: Partial<Record<FluxDensityUnit, number>> = { w_m2_per_nm: 1, w_m2_per_micron: 1e-3, cgs_per_angstrom: 1e-2 };
/** W m-2 Hz-1 in one unit of a flux density per frequency. */
const PER_FREQUENCY: Partial<Record<FluxDensityUnit, number>> = { w_m2_per_hz: 1, cgs_per_hz: 1e-3, jy: 1e-26, mjy: 1e-29 };

/** d(nu) / d(lambda) at a vacuum wavelength, Hz per nm: F_lambda = F_nu times this. */
export const hzPerNm = (vacuumNm: number): number => (C_M_PER_S * 1e9) / (vacuumNm * vacuumNm);

/** F_nu in Jy to F_lambda in erg s-1 cm-2 Angstrom-1. */
export const janskyToCgs = (jansky: number, vacuumNm: number): number => jansky * 1e-26 * hzPerNm(vacuumNm) * 1e2;

/** A flux density in W m-2 nm-1; photon units count photons s-1 cm-2 Angstrom-1. */
function toSi(value: number, unit: FluxDensityUnit, vacuumNm: number): number {
  const perWavelength = PER_WAVELENGTH[unit];
  if (perWavelength !== undefined) return value * perWavelength;
  const perFrequency = PER_FREQUENCY[unit];
  if (perFrequency !== undefined) return value * perFrequency * hzPerNm(vacuumNm);
  return value * (HC_J_NM / vacuumNm) * 1e5; // photon cm-2 Angstrom-1 = 1e4 * 10 photons m-2 nm-1
}

function fromSi(si: number, unit: FluxDensityUnit, vacuumNm: number): number {
  const perWavelength = PER_WAVELENGTH[unit];
  if (perWavelength !== undefined) return si / perWavelength;
  const perFrequency = PER_FREQUENCY[unit];
  if (perFrequency !== undefined) return si / (perFrequency * hzPerNm(vacuumNm));
  return si / ((HC_J_NM / vacuumNm) * 1e5);
}

/** A flux density at a vacuum wavelength, from one unit to another. */
export function convertFluxDensity(value: number, from: FluxDensityUnit, to: FluxDensityUnit, vacuumNm: number): number {
  return from === to ? value : fromSi(toSi(value, from, vacuumNm), to, vacuumNm);
}
