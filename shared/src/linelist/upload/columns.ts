import { HC_J_NM, J_PER_EV, type SpectralUnit } from '../../units/index.js';
import type { TextColumn } from './types.js';

/** What a column of a line list can be. */
export type LineField =
  | 'id'
  | 'species'
  | 'element'
  | 'ionStage'
  | 'charge'
  | 'wavelength'
  | 'type'
  | 'lowerEnergy'
  | 'upperEnergy'
  | 'lowerJ'
  | 'upperJ'
  | 'logGf'
  | 'oscillatorStrength'
  | 'einsteinA'
  | 'bandFwhm'
  | 'settings'
  | 'multiplet'
  | 'relativeIntensity'
  | 'relativeIntensityScale'
  | 'tier'
  | 'source';

/** Names in use, all small letters with other signs as '_'. A name may carry its unit, which is taken off first. */
const NAMES: Record<LineField, readonly string[]> = {
  id: ['id', 'line_id'],
  species: ['species', 'ion', 'spectrum', 'species_name', 'molecule'],
  element: ['element', 'el'],
  ionStage: ['ion_stage', 'stage', 'ionisation_stage', 'ionization_stage'],
  charge: ['ion_charge', 'charge'],
  wavelength: [
    ...['wavelength', 'wavelength_vac', 'wavelength_air', 'vacuum_wavelength', 'air_wavelength', 'wave', 'wl', 'lambda', 'lambda_vac'],
    ...['lambda_air', 'lamlab', 'wavenumber'],
  ],
  type: ['type', 'line_type'],
  lowerEnergy: ['e_low', 'e_lower', 'lower_energy', 'lower_level_energy', 'ei', 'expot', 'excitation_potential'],
  upperEnergy: ['e_up', 'e_upper', 'upper_energy', 'upper_level_energy', 'ek'],
  lowerJ: ['j_low', 'j_lower', 'lower_j', 'ji'],
  upperJ: ['j_up', 'j_upper', 'upper_j', 'jk'],
  logGf: ['log_gf', 'loggf', 'lg_gf'],
  oscillatorStrength: ['f_lu', 'f_ik', 'f', 'oscillator_strength', 'f_value'],
  einsteinA: ['a_ki', 'aki', 'einstein_a', 'einsteina', 'a_ul'],
  bandFwhm: ['fwhm', 'band_fwhm'],
  settings: ['setting', 'settings', 'family', 'families'],
  multiplet: ['multiplet', 'multiplet_key'],
  relativeIntensity: ['rel_intensity', 'relative_intensity', 'intensity'],
  relativeIntensityScale: ['rel_intensity_scale'],
  tier: ['tier'],
  source: ['source', 'reference', 'ref', 'bibcode', 'doi', 'reference_doi'],
};

/** Data model names of the IVOA Simple Spectral Lines Data Model 1.0, without prefix, in small letters. The final level is the lower. */
const UTYPES: Record<string, LineField> = {
  'line.wavelength.value': 'wavelength',
  'line.species.name': 'species',
  'line.einsteina.value': 'einsteinA',
  'line.oscillatorstrength.value': 'oscillatorStrength',
  'line.finallevel.energy.value': 'lowerEnergy',
  'line.initiallevel.energy.value': 'upperEnergy',
};

const UNITS: Record<string, SpectralUnit> = {
  m: 'm',
  nm: 'nm',
  angstrom: 'angstrom',
  angstroms: 'angstrom',
  ang: 'angstrom',
  aa: 'angstrom',
  a: 'angstrom',
  å: 'angstrom',
  um: 'micron',
  µm: 'micron',
  μm: 'micron',
  micron: 'micron',
  microns: 'micron',
  '1/cm': 'wavenumber_per_cm',
  'cm-1': 'wavenumber_per_cm',
  'cm**-1': 'wavenumber_per_cm',
  cm1: 'wavenumber_per_cm',
};

const PER_CM_PER_J = 1e7 / HC_J_NM;

/** Factors to cm^-1. */
const ENERGY_PER_CM: Record<string, number> = {
  '1/cm': 1,
  'cm-1': 1,
  'cm**-1': 1,
  cm1: 1,
  ev: PER_CM_PER_J * J_PER_EV,
  j: PER_CM_PER_J,
};

export interface RecognisedColumn {
  readonly index: number;
  readonly field: LineField;
  readonly name: string;
  readonly unit: string;
  /** said by the name: 'wavelength_air' */
  readonly medium: 'air' | 'vacuum' | null;
}

const plain = (name: string): string =>
  name
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '_')
    .replace(/^_|_$/g, '');

/** 'wave [nm]', 'wave (nm)' and 'wave_nm' to name and unit. */
function splitUnit(name: string): { name: string; unit: string } {
  const bracket = /^(.*?)\s*[[(]([^\])]+)[\])]\s*$/.exec(name);
  if (bracket) return { name: bracket[1]!, unit: bracket[2]!.trim() };
  const tail = /^(.+)_(nm|angstrom|ang|um|micron|cm1|ev|m)$/i.exec(name);
  return tail ? { name: tail[1]!, unit: tail[2]! } : { name, unit: '' };
}

/** What each column is, by data model name first and by its own name after; columns that are nothing known are left out. */
export function recogniseColumns(columns: readonly TextColumn[]): RecognisedColumn[] {
  const taken = new Set<LineField>();
  return columns.flatMap((column, index) => {
    const { name, unit } = splitUnit(column.name);
    const field = UTYPES[column.utype.toLowerCase().replace(/^[a-z]+:/, '')] ?? fieldNamed(plain(name));
    if (!field || taken.has(field)) return [];
    taken.add(field);
    const words = plain(column.name).split('_');
    const air = words.includes('air') || column.ucd.includes('obs.atmos');
    const medium = air ? 'air' : words.some((word) => word === 'vac' || word === 'vacuum') ? 'vacuum' : null;
    return [{ index, field, name: column.name, unit: column.unit || unit, medium }];
  });
}

const fieldNamed = (name: string): LineField | undefined =>
  (Object.keys(NAMES) as LineField[]).find((field) => NAMES[field].includes(name));

/** @returns null for a unit that is none of length or wavenumber */
export const spectralUnitNamed = (unit: string): SpectralUnit | null => UNITS[unit.trim().toLowerCase()] ?? null;

/** Factor from the unit of an energy to cm^-1; null for another unit. */
export const energyFactor = (unit: string): number | null => ENERGY_PER_CM[unit.trim().toLowerCase()] ?? null;
