import { chooseColumns, columnFacts, statedKind, uncorrectedColumns, type ColumnChoice, type ColumnInfo } from '../columns/choose.js';
import { settleAxis } from '../columns/axis.js';
import { fluxKindOf, settleFluxUnit } from '../columns/flux-kind.js';
import { mediumOfUcd, stated } from '../columns/medium.js';
import { mediumWord } from '../columns/words.js';
import type { Medium } from '../../units/index.js';
import type { ReadContext } from '../context.js';
import type { FileFacts, RawSpectrum } from '../raw.js';
import { quoted, refuse } from '../refusal.js';
import type { PlaceFact, ReadingCorrections, ReadWarning, Stated } from '../types.js';
import { dataUnit, mediumOfCards, qualityBits, readFacts, saysNormalised, type Headers } from './facts.js';
import type { Hdu } from './hdu.js';
import { ordersOf, pickRows, sliceRows, type RowPick } from './rows.js';
import type { ColumnValues, FitsTable } from './table.js';

/** A table that can be read as a spectrum, before its values are converted. */
export interface TableCandidate {
  readonly hdu: Hdu;
  readonly table: FitsTable;
  readonly choice: ColumnChoice;
  readonly axis: ColumnValues;
  readonly pick: RowPick;
  /** the table and its rows, as far as each can be chosen */
  readonly places: readonly PlaceFact[];
}

/** Looks whether a table holds a spectrum; refuses with the reason when it does not. */
export function tableCandidate(hdu: Hdu, table: FitsTable, row: number | null, corrections: ReadingCorrections): TableCandidate {
  if (!table.infos.some((info) => info.numeric))
    refuse('no_spectrum', `The table in ${hdu.place} has no numeric column, so there is no spectrum in it.`);
  const choice = chooseColumns(table.infos, corrections);
  if (!choice)
    refuse(
      'no_spectrum',
      `No spectrum was found in the table of ${hdu.place}: none of its columns (${namesOf(table.infos)}) is known to be wavelength and flux. Choose the columns.`,
      { columnFacts: columnFacts(table.infos, null) },
    );
  if (table.rows === 0) refuse('no_rows', `The table in ${hdu.place} is empty: it has no rows.`);
  const axis = table.read(choice.axis);
  if (axis.values.length < 2) refuse('too_few_points', `The table in ${hdu.place} has one row only; a spectrum needs at least two points.`);
  const pick = pickRows(axis, row, hdu.place);
  return { hdu, table, choice, axis, pick, places: placesOf(hdu, table, axis, pick) };
}

/** Rows that are spectra of their own stand for the table; rows that are orders of one spectrum can be had together or alone. */
function placesOf(hdu: Hdu, table: FitsTable, axis: ColumnValues, pick: RowPick): PlaceFact[] {
  const kind = hdu.kind === 'ascii_table' ? 'ascii_table' : 'binary_table';
  const fact = (place: string, rows: number): PlaceFact => ({
    ...{ place, name: hdu.header.text('EXTNAME') ?? '', kind, rows, isSpectrum: true, why: '' },
  });
  const whole = fact(hdu.place, axis.lengths === null ? table.rows : axis.values.length);
  if (axis.lengths === null || pick.rows.length < 2) return [whole];
  const each = pick.rows.map((row) => fact(`${hdu.place} row ${row + 1}`, axis.lengths![row]!));
  return pick.repeated ? each : [whole, ...each];
}

const namesOf = (infos: readonly ColumnInfo[]): string => quoted(infos.map((info) => info.name).join(', '), 120);

/** The columns of a candidate, in file order. */
export function rawFromTable(candidate: TableCandidate, headers: Headers, file: FileFacts, context: ReadContext): RawSpectrum {
  const { corrections, warnings } = context;
  const { hdu, table, choice, pick } = candidate;
  const read = (index: number) => sliceRows(table.read(index), pick);
  const axisInfo = table.infos[choice.axis]!;
  const fluxInfo = table.infos[choice.flux]!;
  const axisValues = sliceRows(candidate.axis, pick);
  const flux = read(choice.flux);
  if (axisValues.length !== flux.length)
    refuse(
      'lengths_differ',
      `In ${hdu.place} the column ${quoted(axisInfo.name)} has ${axisValues.length} elements, but ${quoted(fluxInfo.name)} has ${flux.length}: their lengths differ.`,
      { column: fluxInfo.name },
    );
  const beside = (index: number | null) => {
    if (index === null) return null;
    const values = read(index);
    const name = table.infos[index]!.name;
    if (values.length === flux.length) return { values, name };
    warnings.push({
      code: 'column_not_used',
      sentence: `Column ${quoted(name)} has ${values.length} elements, the flux ${flux.length}; it was not used.`,
      column: name,
    });
    return null;
  };
  const uncertainty = beside(choice.uncertainty);
  const mask = beside(choice.mask);
  if (mask) keepBits(mask.values, qualityBits(headers));
  const ownUnit = fluxInfo.unit !== '';
  const fluxUnit = settleFluxUnit(ownUnit ? fluxInfo.unit : dataUnit(headers), ownUnit ? `TUNIT${choice.flux + 1}` : 'BUNIT', corrections);
  const nelem = hdu.header.number('NELEM');
  if (nelem !== null && candidate.axis.lengths !== null && table.rows === 1 && nelem !== flux.length)
    warnings.push({
      code: 'length_differs_from_card',
      sentence: `NELEM = ${nelem} in ${hdu.place}, but the vectors have ${flux.length} elements; all of them were read.`,
    });
  if (pick.skipped > 0)
    warnings.push({
      code: 'rows_left_out',
      sentence: `${pick.skipped} rows of ${hdu.place} hold fewer than two elements and were left out.`,
    });
  const unitCard = `TUNIT${choice.axis + 1}`;
  const axis = settleAxis(axisValues, { name: axisInfo.name, quantity: choice.quantity, unit: axisInfo.unit, where: unitCard }, context);
  return {
    format: hdu.kind === 'ascii_table' ? 'fits_ascii_table' : 'fits_table',
    place: pick.single === null ? hdu.place : `${hdu.place} row ${pick.single + 1}`,
    ...file,
    columnFacts: columnFacts(table.infos, choice),
    uncorrectedColumns: uncorrectedColumns(table.infos, corrections),
    header: headers.flatMap((header) => [...header.cards]),
    axisName: axisInfo.name,
    axis,
    medium: settleMediumOf(axisInfo, choice.axis, headers, warnings),
    flux,
    fluxName: fluxInfo.name,
    fluxUnit,
    fluxKind: fluxKindOf({ ...fluxInfo, unit: fluxUnit.value }, fluxUnit.where, saysNormalised(headers)),
    uncertainty: uncertainty && {
      ...uncertainty,
      kind: statedKind(choice.uncertaintyKind, { how: 'stated', where: 'column name' }, corrections),
    },
    mask,
    orders: ordersOf(candidate.axis, pick),
    locate: (i) => ({ words: candidate.axis.lengths ? `element ${i + 1}` : `row ${i + 1}`, row: i + 1 }),
    facts: readFacts(headers, warnings),
    warnings,
  };
}

/** Leaves of each quality value the bits that matter. */
function keepBits(values: Float64Array, bits: number | null) {
  if (bits === null) return;
  for (let i = 0; i < values.length; i++) if (Number.isInteger(values[i]!)) values[i] = values[i]! & bits ? 1 : 0;
}

/** Statements of the medium, the most particular first; a second one that disagrees is reported. */
function settleMediumOf(info: ColumnInfo, index: number, headers: Headers, warnings: ReadWarning[]): Stated<Medium> | null {
  const ucd = mediumOfUcd(info.ucd, `TUCD${index + 1}`);
  const word = mediumWord(info.name) ?? mediumWord(info.unit);
  const named = word ? stated(word, 'column name') : null;
  // a bare em.wl is also written by those who do not think of air, so a name or a card weighs more
  const all = [ucd?.value === 'air' ? ucd : null, named, mediumOfCards(headers), ucd].filter((one) => one !== null);
  const first = all[0] ?? null;
  const against = all.find((one) => one.value !== first?.value);
  if (first && against)
    warnings.push({
      code: 'medium_contradiction',
      sentence: `The file contradicts itself about the medium: ${first.where} says ${first.value}, ${against.where} says ${against.value}; ${first.value} was taken. Check it: the difference is about 80 km/s.`,
    });
  return first;
}
