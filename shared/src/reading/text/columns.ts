import { chooseColumns, quantityOfUnit, type ColumnChoice, type ColumnInfo } from '../columns/choose.js';
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
    );
  const named = preamble.headings || corrections.wavelengthColumn || corrections.fluxColumn ? chooseColumns(infos, corrections) : null;
  if (named) return { infos, choice: named, byPosition: false };
  if (preamble.headings) return { infos, choice: guessed(preamble, infos, numeric, corrections, warnings), byPosition: false };
  return { infos, choice: byPosition(preamble, numeric, corrections, warnings), byPosition: true };
}

function columnInfos({ headings, sample, dialect }: Preamble): ColumnInfo[] {
  const cells = sample.reduce((most, row) => Math.max(most, row.length), 0);
  if (headings) checkFields(headings.length, sample, dialect.delimiter);
  const count = Math.max(headings?.length ?? 0, cells);
  const infos = Array.from({ length: count }, (_, i): ColumnInfo => {
    const heading = headings?.[i];
    return { name: heading?.name || `column ${i + 1}`, unit: heading?.unit ?? '', ucd: '', utype: '', numeric: isNumeric(i) };
  });
  return infos;

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

/** Headings are there, but none tells which column is the wavelength or the flux. */
function guessed(
  preamble: Preamble,
  infos: readonly ColumnInfo[],
  numeric: readonly number[],
  corrections: ReadingCorrections,
  warnings: ReadWarning[],
): ColumnChoice {
  const role = (i: number) => nameRole(infos[i]!.name)?.role;
  const byName = (name: string | undefined) => (name === undefined ? -1 : infos.findIndex((info) => info.name === name));
  const known = numeric.find((i) => axisQuantity(infos[i]!.name) !== null);
  const corrected = byName(corrections.wavelengthColumn);
  const axis = corrected >= 0 ? corrected : (known ?? numeric.find((i) => role(i) === undefined && runsOneWay(preamble, i)));
  if (axis === undefined)
    refuse(
      'no_wavelength_column',
      `No column is known to be the wavelength (the columns are ${quoted(infos.map((info) => info.name).join(', '), 120)}). Choose it.`,
    );
  const free = numeric.filter((i) => i !== axis);
  const correctedFlux = byName(corrections.fluxColumn);
  const flux =
    correctedFlux >= 0 ? correctedFlux : (free.find((i) => role(i) === 'flux') ?? free.find((i) => role(i) === undefined) ?? free[0]!);
  warnings.push({
    code: 'columns_assumed',
    sentence: `The headings do not say which column is which; ${quoted(infos[axis]!.name)} was taken as wavelength and ${quoted(infos[flux]!.name)} as flux. Correct them if that is wrong.`,
  });
  const uncertainty =
    corrections.uncertaintyColumn === null
      ? undefined
      : free.find((i) => i !== flux && ['sigma', 'variance', 'inverse_variance'].includes(role(i) ?? ''));
  const kind = uncertainty === undefined ? undefined : role(uncertainty);
  return {
    axis,
    quantity: axisQuantity(infos[axis]!.name) ?? quantityOfUnit(infos[axis]!.unit),
    flux,
    uncertainty: uncertainty ?? null,
    uncertaintyKind: corrections.uncertaintyKind ?? (kind === 'variance' || kind === 'inverse_variance' ? kind : 'sigma'),
    mask: free.find((i) => role(i) === 'mask') ?? null,
  };
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
  numeric: readonly number[],
  corrections: ReadingCorrections,
  warnings: ReadWarning[],
): ColumnChoice {
  checkWholeNumbers(preamble);
  const [axis, flux, third] = [numeric[0]!, numeric[1]!, numeric[2]];
  const isError = third !== undefined && corrections.uncertaintyColumn !== null && looksLikeError(preamble, flux, third);
  const rest =
    numeric.length > 2 ? (isError ? ', the third as the uncertainty' : '; what the others hold is not known, they were not used') : '';
  warnings.push({
    code: 'columns_assumed',
    sentence: `The table has no headings; the first column was taken as wavelength and the second as flux${rest}.`,
  });
  return {
    axis,
    quantity: 'length',
    flux,
    uncertainty: isError ? third : null,
    uncertaintyKind: corrections.uncertaintyKind ?? 'sigma',
    mask: null,
  };
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
