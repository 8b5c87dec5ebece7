import { chooseColumns, columnFacts, type ColumnChoice, type ColumnInfo } from '../columns/choose.js';
import { axisQuantity, nameRole } from '../columns/words.js';
import { quoted, refuse } from '../refusal.js';
import type { ReadingCorrections, ReadWarning } from '../types.js';
import { parseCell } from './number.js';
import type { Preamble } from './preamble.js';

/** Columns of a text table and which of them make the spectrum. */
export interface TextColumns {
  readonly infos: readonly ColumnInfo[];
  readonly choice: ColumnChoice;
  /** true when the table has no headings and the order of the columns decided */
  readonly byPosition: boolean;
}

export function chooseTextColumns(preamble: Preamble, corrections: ReadingCorrections, warnings: ReadWarning[]): TextColumns {
  const infos = columnInfos(preamble);
  const numeric = infos.flatMap((info, i) => (info.numeric ? [i] : []));
  if (numeric.length < 2)
    refuse(
      'one_column',
      `The table has ${numeric.length === 1 ? 'one numeric column' : 'no numeric column'}; a spectrum needs two, wavelength and flux.`,
      { columnFacts: columnFacts(infos, null) },
    );
  if (!preamble.headings) return { infos, choice: byPosition(preamble, infos, numeric, corrections, warnings), byPosition: true };
  const choice = chooseColumns(infos, corrections) ?? guessed(preamble, infos, numeric, corrections, warnings);
  return { infos, choice, byPosition: false };
}

function columnInfos({ headings, sample, dialect }: Preamble): ColumnInfo[] {
  const cells = sample.reduce((most, row) => Math.max(most, row.length), 0);
  if (headings) checkFields(headings.length, sample, dialect.delimiter);
  const count = Math.max(headings?.length ?? 0, cells);
  return Array.from({ length: count }, (_, i): ColumnInfo => {
    const heading = headings?.[i];
    return {
      name: heading?.name || `column ${i + 1}`,
      unit: heading?.unit ?? '',
      ucd: '',
      utype: '',
      numeric: !heading?.notNumeric && isNumeric(i),
    };
  });

  function isNumeric(column: number): boolean {
    let numbers = 0;
    let texts = 0;
    for (const row of sample) {
      const kind = parseCell(row[column] ?? '', dialect.decimalComma).kind;
      if (kind === 'number' || kind === 'out_of_range') numbers++;
      else if (kind === 'text') texts++;
    }
    // a column that is missing throughout the sample may still be one of numbers
    return numbers > texts || (numbers === 0 && texts === 0 && (headings?.[column]?.name ?? '') !== '');
  }
}

/** More filled cells than headings: decimal commas split at the comma, or a heading is missing. */
function checkFields(headings: number, sample: readonly string[][], delimiter: string) {
  const filled = (row: string[]) => row.findLastIndex((cell) => cell !== '') + 1;
  if (delimiter === ' ' || sample.filter((row) => filled(row) > headings).length <= sample.length / 2) return;
  refuse(
    'fields_do_not_match',
    `The rows have ${filled(sample[0]!)} fields, but there are ${headings} column headings. If the numbers have decimal commas, use a semicolon as the delimiter; otherwise name every column.`,
  );
}

/** Headings are there, but they do not tell which column is the wavelength or the flux. */
function guessed(
  preamble: Preamble,
  infos: readonly ColumnInfo[],
  numeric: readonly number[],
  corrections: ReadingCorrections,
  warnings: ReadWarning[],
): ColumnChoice {
  const nameOf = (i: number | undefined) => (i === undefined ? undefined : infos[i]!.name);
  const role = (i: number) => nameRole(infos[i]!.name)?.role;
  const free = numeric.filter((i) => infos[i]!.name !== corrections.fluxColumn);
  const wavelengthColumn =
    corrections.wavelengthColumn ??
    nameOf(free.find((i) => axisQuantity(infos[i]!.name) !== null) ?? free.find((i) => role(i) === undefined && runsOneWay(preamble, i)));
  if (wavelengthColumn === undefined)
    refuse(
      'no_wavelength_column',
      `No column is known to be the wavelength (the columns are ${quoted(infos.map((info) => info.name).join(', '), 120)}). Choose it.`,
      { columnFacts: columnFacts(infos, null) },
    );
  const others = numeric.filter((i) => infos[i]!.name !== wavelengthColumn);
  const fluxColumn =
    corrections.fluxColumn ?? nameOf(others.find((i) => role(i) === 'flux') ?? others.find((i) => role(i) === undefined) ?? others[0]);
  warnings.push({
    code: 'columns_assumed',
    sentence: `The headings do not say which column is which; ${quoted(wavelengthColumn)} was taken as wavelength and ${quoted(fluxColumn ?? '')} as flux. Correct them if that is wrong.`,
  });
  return chosen(infos, { ...corrections, wavelengthColumn, fluxColumn });
}

function chosen(infos: readonly ColumnInfo[], corrections: ReadingCorrections): ColumnChoice {
  return (
    chooseColumns(infos, corrections) ??
    refuse('no_flux_column', 'No column is known to be the flux. Choose it.', { columnFacts: columnFacts(infos, null) })
  );
}

const valuesOf = ({ sample, dialect }: Preamble, column: number): number[] =>
  sample.flatMap((row) => {
    const cell = parseCell(row[column] ?? '', dialect.decimalComma);
    return cell.kind === 'number' ? [cell.value] : [];
  });

function runsOneWay(preamble: Preamble, column: number): boolean {
  const values = valuesOf(preamble, column);
  const steps = values.slice(1).map((value, i) => value - values[i]!);
  return steps.length > 0 && (steps.every((step) => step > 0) || steps.every((step) => step < 0));
}

/** No headings: wavelength and flux come first, as everywhere in the trade, and a third column may be the error. */
function byPosition(
  preamble: Preamble,
  infos: readonly ColumnInfo[],
  numeric: readonly number[],
  corrections: ReadingCorrections,
  warnings: ReadWarning[],
): ColumnChoice {
  checkWholeNumbers(preamble);
  const said = [corrections.wavelengthColumn, corrections.fluxColumn];
  const free = numeric.filter((i) => !said.includes(infos[i]!.name));
  const next = () => infos[free.shift() ?? -1]?.name;
  const wavelengthColumn = corrections.wavelengthColumn ?? next();
  const fluxColumn = corrections.fluxColumn ?? next();
  const flux = infos.findIndex((info) => info.name === fluxColumn);
  const third = free[0];
  const isError = third !== undefined && corrections.uncertaintyColumn === undefined && looksLikeError(preamble, flux, third);
  const uncertaintyColumn = corrections.uncertaintyColumn ?? (isError ? infos[third]!.name : null);
  const rest = isError ? `, ${infos[third]!.name} as the uncertainty` : free.length > 0 ? '; the others were not used' : '';
  warnings.push({
    code: 'columns_assumed',
    sentence: `The table has no headings; ${quoted(wavelengthColumn ?? '')} was taken as wavelength and ${quoted(fluxColumn ?? '')} as flux${rest}. Correct them if that is wrong.`,
  });
  return chosen(infos, { ...corrections, wavelengthColumn, fluxColumn, uncertaintyColumn });
}

/** An error is positive nearly everywhere and smaller than the flux it belongs to. */
function looksLikeError(preamble: Preamble, flux: number, third: number): boolean {
  const errors = valuesOf(preamble, third);
  const fluxes = valuesOf(preamble, flux);
  if (errors.filter((error) => error > 0).length < 0.9 * errors.length) return false;
  return middle(errors) < 0.5 * Math.max(...fluxes.map(Math.abs));
}

const middle = (values: readonly number[]): number => [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)] ?? NaN;

/** '500,0,1,000' without headings: whole numbers in pairs are decimals split at their comma. */
function checkWholeNumbers({ sample, dialect }: Preamble) {
  if (dialect.delimiter !== ',') return;
  const suspicious = sample.every((row) => row.length >= 4 && row.length % 2 === 0 && row.every((cell) => /^[+-]?\d+$/.test(cell)));
  const repeats = sample.length > 1 && sample.slice(1).some((row, i) => row[0] === sample[i]![0]);
  if (suspicious && repeats)
    refuse(
      'decimal_comma',
      `The rows hold ${sample[0]!.length} fields of whole numbers: decimal commas and commas as delimiter cannot be told apart. Use a semicolon as the delimiter.`,
    );
}
