import Papa from 'papaparse';
import type { Family, Line, LineList } from './line.js';

type Row = Record<string, string>;

const rows = (csv: string): Row[] => Papa.parse<Row>(csv, { header: true, skipEmptyLines: true }).data;
const number = (text: string | undefined): number | null => (text === undefined || text === '' ? null : Number(text));

/** '3/2' or '2' as a number; blank as null. */
function angularMomentum(text: string | undefined): number | null {
  if (!text) return null;
  const [a, b] = text.split('/');
  return Number(a) / (b === undefined ? 1 : Number(b));
}

/** The list's word for the setting of a line; emission of the night sky counts to the Earth's air. */
const FAMILY: Record<string, Family> = { stellar: 'stellar', interstellar: 'interstellar', nebular: 'nebular', sky: 'telluric' };

function fromLineRow(r: Row): Line {
  return {
    id: r['id']!,
    species: r['species']!,
    element: r['element'] ?? '',
    ionStage: r['element'] ? Number(r['ion_stage'] || 0) : 0, // the list gives molecular ions their charge
    wavelengthNm: Number(r['wavelength_vac_nm']),
    type: r['type']!,
    lowerEnergyPerCm: number(r['e_low_cm1']),
    upperEnergyPerCm: number(r['e_up_cm1']),
    lowerJ: angularMomentum(r['j_low']),
    upperJ: angularMomentum(r['j_up']),
    logGf: number(r['log_gf']),
    oscillatorStrength: number(r['f_lu']),
    einsteinA: number(r['a_ki_s1']),
    bandFwhmNm: number(r['fwhm_nm']),
    settings: r['setting']!.split(';').map((s) => FAMILY[s]!),
    multiplet: r['multiplet_key'] ?? '',
    relativeIntensity: number(r['rel_intensity']),
    relativeIntensityScale: r['rel_intensity_scale'] ?? '',
    tier: r['tier'] === '1' ? 1 : 2,
    source: r['source'] ?? '',
  };
}

/** A single absorption line of the air; the rows that give the extent of a whole band name no line and are left out. */
function fromTelluricRow(r: Row): Line {
  return {
    id: `${r['species']}-${Number(r['wavelength_air_nm']).toFixed(4)}`,
    species: r['species']!,
    element: '',
    ionStage: 0,
    wavelengthNm: Number(r['wavelength_vac_nm']),
    type: 'telluric',
    lowerEnergyPerCm: null,
    upperEnergyPerCm: null,
    lowerJ: null,
    upperJ: null,
    logGf: null,
    oscillatorStrength: null,
    einsteinA: null,
    bandFwhmNm: null,
    settings: ['telluric'],
    multiplet: r['feature'] ?? '',
    relativeIntensity: number(r['strength']),
    relativeIntensityScale: r['strength'] ? `telluric ${r['feature']}` : '',
    tier: 1,
    source: r['source'] ?? '',
  };
}

export const DEFAULT_LIST_NAME = 'Foreveil default';
export const DEFAULT_LIST_VERSION = '2026.1';

/**
 * The default list: atoms, molecules, diffuse bands and sky emission from `lines.csv`, absorption of the air from `telluric.csv`.
 * @returns lines ascending in vacuum wavelength; rows with equal wavelength keep their order in the files
 */
export function parseDefaultList(linesCsv: string, telluricCsv: string): LineList {
  const air = rows(telluricCsv).filter((r) => r['kind'] === 'line');
  const lines = [...rows(linesCsv).map(fromLineRow), ...air.map(fromTelluricRow)];
  lines.sort((a, b) => a.wavelengthNm - b.wavelengthNm);
  return { name: DEFAULT_LIST_NAME, version: DEFAULT_LIST_VERSION, lines };
}
