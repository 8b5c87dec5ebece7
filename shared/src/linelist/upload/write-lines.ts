import Papa from 'papaparse';
import type { Line } from '../line.js';

/** Columns of an exported list, by names that `parseLines` knows, so that a list can go out, be edited and come back. */
const COLUMNS: readonly [string, (line: Line) => string | number | null][] = [
  ['id', (l) => l.id],
  ['species', (l) => (l.type === 'forbidden' ? `[${l.species}]` : l.species)],
  ['wavelength_vac [nm]', (l) => l.wavelengthNm],
  ['type', (l) => l.type],
  ['e_low [cm-1]', (l) => l.lowerEnergyPerCm],
  ['e_up [cm-1]', (l) => l.upperEnergyPerCm],
  ['j_low', (l) => l.lowerJ],
  ['j_up', (l) => l.upperJ],
  ['log_gf', (l) => l.logGf],
  ['f_lu', (l) => l.oscillatorStrength],
  ['a_ki [s-1]', (l) => l.einsteinA],
  ['fwhm [nm]', (l) => l.bandFwhmNm],
  ['settings', (l) => l.settings.join(';')],
  ['multiplet', (l) => l.multiplet],
  ['rel_intensity', (l) => l.relativeIntensity],
  ['rel_intensity_scale', (l) => l.relativeIntensityScale],
  ['tier', (l) => l.tier],
  ['source', (l) => l.source],
];

/** Lines as CSV, numbers with all their digits, blank where the list has none. */
export const linesCsv = (lines: readonly Line[]): string =>
  `${Papa.unparse({ fields: COLUMNS.map(([name]) => name), data: lines.map((line) => COLUMNS.map(([, of]) => of(line))) }, { newline: '\n', escapeFormulae: false })}\n`;
