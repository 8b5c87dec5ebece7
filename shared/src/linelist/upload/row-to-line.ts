import { airToVacuum, isLength, toNm, type AirNm, type Medium, type SpectralUnit } from '../../units/index.js';
import type { Family, Line } from '../line.js';
import type { LineField } from './columns.js';
import { readSpecies, type Species } from './species.js';

/** How the columns of a file are to be taken; the same for all its rows. */
export interface Convention {
  readonly wavelengthUnit: SpectralUnit;
  readonly medium: Medium;
  /** factors to cm^-1 */
  readonly lowerEnergyFactor: number;
  readonly upperEnergyFactor: number;
  readonly citation: string;
}

export type Cells = Partial<Record<LineField, string>>;

export type RowResult = { readonly line: Line } | { readonly field: LineField; readonly sentence: string };

class Fault extends Error {
  constructor(
    readonly field: LineField,
    sentence: string,
  ) {
    super(sentence);
  }
}

const FAMILIES: Record<string, Family> = {
  stellar: 'stellar',
  photospheric: 'stellar',
  interstellar: 'interstellar',
  nebular: 'nebular',
  telluric: 'telluric',
  sky: 'telluric',
};

/** One row as a line; `id` and `wavelengthNm` (vacuum) are filled in. A fault names the column and says what to do. */
export function rowToLine(cells: Cells, convention: Convention): RowResult {
  try {
    return { line: lineOf(cells, convention) };
  } catch (error) {
    if (!(error instanceof Fault)) throw error;
    return { field: error.field, sentence: error.message };
  }
}

function lineOf(cells: Cells, convention: Convention): Line {
  const species = speciesOf(cells);
  const wavelengthNm = vacuumWavelength(cells, convention);
  const type = typeOf(cells, species);
  const lowerJ = angularMomentum(cells, 'lowerJ');
  const lowerEnergyPerCm = scaled(atLeastZero(cells, 'lowerEnergy'), convention.lowerEnergyFactor);
  const source = cells.source || convention.citation;
  if (!source) throw new Fault('source', 'No source: fill the cell, or give a citation for the whole list.');
  const strengths = strengthsOf(cells, lowerJ);
  const relativeIntensity = number(cells, 'relativeIntensity');
  return {
    id: cells.id || `${species.name.replaceAll(' ', '')}-${wavelengthNm.toFixed(4)}`,
    species: species.name,
    element: species.element,
    ionStage: species.stage,
    wavelengthNm,
    type,
    lowerEnergyPerCm,
    upperEnergyPerCm: scaled(atLeastZero(cells, 'upperEnergy'), convention.upperEnergyFactor),
    lowerJ,
    upperJ: angularMomentum(cells, 'upperJ'),
    ...strengths,
    einsteinA: atLeastZero(cells, 'einsteinA'),
    bandFwhmNm: positive(cells, 'bandFwhm'),
    settings: familiesOf(cells, type, species, lowerEnergyPerCm),
    multiplet: cells.multiplet ?? '',
    relativeIntensity,
    relativeIntensityScale: relativeIntensity === null ? '' : cells.relativeIntensityScale || 'as in the list',
    tier: cells.tier === '2' ? 2 : 1,
    source,
  };
}

function speciesOf(cells: Cells): Species {
  const charge = wholeNumber(cells, 'charge');
  const stage = wholeNumber(cells, 'ionStage') ?? (charge === null ? null : charge + 1);
  const text = cells.species || cells.element || '';
  const species = text ? readSpecies(text, cells.element, stage) : null;
  if (species) return species;
  const said = text ? `"${text}" is no species.` : 'No species.';
  throw new Fault('species', `${said} Write atoms with their stage ("Fe II"), molecules by formula ("CH+"), diffuse bands as "DIB".`);
}

function vacuumWavelength(cells: Cells, { wavelengthUnit, medium }: Convention): number {
  const value = positive(cells, 'wavelength');
  if (value === null) throw new Fault('wavelength', 'No wavelength.');
  const nm = toNm(value, wavelengthUnit);
  if (!(nm >= 1 && nm <= 1e6))
    throw new Fault('wavelength', `${value} is ${nm.toPrecision(4)} nm, outside 1 nm to 1 mm. Check the unit of the column.`);
  return medium === 'air' && isLength(wavelengthUnit) ? airToVacuum(nm as AirNm) : nm;
}

function typeOf(cells: Cells, species: Species): string {
  if (cells.type) return cells.type.toLowerCase();
  if (species.forbidden) return 'forbidden';
  if (species.element) return 'allowed';
  return species.name === 'DIB' ? 'band' : 'molecular';
}

/** gf and f tell each other where the J of the lower level is known: gf = (2J + 1) f. */
function strengthsOf(cells: Cells, lowerJ: number | null): Pick<Line, 'logGf' | 'oscillatorStrength'> {
  const logGf = number(cells, 'logGf');
  const f = atLeastZero(cells, 'oscillatorStrength');
  if (lowerJ === null) return { logGf, oscillatorStrength: f };
  const weight = 2 * lowerJ + 1;
  return {
    logGf: logGf ?? (f ? Math.log10(f * weight) : null),
    oscillatorStrength: f ?? (logGf === null ? null : 10 ** logGf / weight),
  };
}

/** Levels below this are populated in cold gas, cm^-1: fine structure of the ground term (common practice). */
const COLD_PER_CM = 500;

function familiesOf(cells: Cells, type: string, species: Species, lowerEnergyPerCm: number | null): readonly Family[] {
  if (cells.settings) {
    const words = cells.settings
      .toLowerCase()
      .split(/[;,|\s]+/)
      .filter(Boolean);
    const unknown = words.find((word) => !FAMILIES[word]);
    if (unknown)
      throw new Fault('settings', `"${unknown}" is no family. Use stellar, interstellar, nebular or telluric, several with ";".`);
    return [...new Set(words.map((word) => FAMILIES[word]!))];
  }
  if (type === 'forbidden') return ['nebular'];
  if (type === 'telluric' || type === 'sky') return ['telluric'];
  if (!species.element) return ['interstellar'];
  return lowerEnergyPerCm !== null && lowerEnergyPerCm <= COLD_PER_CM ? ['stellar', 'interstellar'] : ['stellar'];
}

function number(cells: Cells, field: LineField): number | null {
  const text = cells[field];
  if (!text || /^(nan|null|-+)$/i.test(text)) return null;
  const value = Number(/^-?\d+,\d+$/.test(text) ? text.replace(',', '.') : text);
  if (!Number.isFinite(value)) throw new Fault(field, `"${text}" is no number.`);
  return value;
}

function positive(cells: Cells, field: LineField): number | null {
  const value = number(cells, field);
  if (value !== null && !(value > 0)) throw new Fault(field, `${value} must be greater than zero.`);
  return value;
}

function atLeastZero(cells: Cells, field: LineField): number | null {
  const value = number(cells, field);
  if (value !== null && value < 0) throw new Fault(field, `${value} must not be negative.`);
  return value;
}

function wholeNumber(cells: Cells, field: LineField): number | null {
  const value = number(cells, field);
  if (value !== null && !(Number.isInteger(value) && value >= 0 && value < 100)) throw new Fault(field, `${value} must be a whole number.`);
  return value;
}

const scaled = (value: number | null, factor: number): number | null => (value === null ? null : value * factor);

/** '3/2' or '2' as a number. */
function angularMomentum(cells: Cells, field: 'lowerJ' | 'upperJ'): number | null {
  const text = cells[field];
  const halves = text ? /^(\d+)\/2$/.exec(text) : null;
  const value = halves ? Number(halves[1]) / 2 : atLeastZero(cells, field);
  if (value !== null && !Number.isInteger(2 * value)) throw new Fault(field, `J is a multiple of 1/2, not ${value}.`);
  return value;
}
