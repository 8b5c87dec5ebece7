import { isLength } from '../../units/index.js';
import type { Line } from '../line.js';
import { energyFactor, recogniseColumns, spectralUnitNamed, type LineField, type RecognisedColumn } from './columns.js';
import { rowToLine, type Cells, type Convention } from './row-to-line.js';
import { readTextTable } from './text-table.js';
import { MOST_LINES, type ListStatements, type ParsedLines, type RowProblem, type TextTable } from './types.js';
import { looksLikeVotable, readVotable } from './votable.js';

const MOST_PROBLEMS = 100;

/**
 * Lines of an uploaded list: text with a row of column names, or a VOTable as line-access services give (IVOA SSLDM 1.0, SLAP 1 and 2).
 * Never throws for what a file holds: whatever is wrong is a problem with its row.
 */
export function parseLines(text: string, statements: ListStatements = {}): ParsedLines {
  let table: TextTable;
  try {
    table = looksLikeVotable(text) ? readVotable(text) : readTextTable(text);
  } catch (error) {
    return refused((error as Error).message);
  }
  const columns = recogniseColumns(table.columns);
  const convention = conventionOf(columns, statements);
  if ('sentence' in convention) return refused(convention.sentence, convention.column);
  if (table.rows.length === 0) return refused('The file names columns but holds no row.');
  if (table.rows.length > MOST_LINES) return refused(`The file holds ${table.rows.length} rows; a list may have ${MOST_LINES}.`);
  return linesOf(table, columns, convention);
}

const refused = (sentence: string, column = ''): ParsedLines => ({
  lines: [],
  problems: [{ row: 1, column, sentence }],
  problemCount: 1,
  notes: [],
});

interface NoConvention {
  readonly column: string;
  readonly sentence: string;
}

function conventionOf(columns: readonly RecognisedColumn[], { medium, citation = '' }: ListStatements): Convention | NoConvention {
  const column = (field: LineField) => columns.find((c) => c.field === field);
  const wavelength = column('wavelength');
  if (!wavelength) return { column: '', sentence: 'No column of wavelengths. Name one "wavelength_vac [nm]" or "wavelength_air [nm]".' };
  if (!column('species') && !column('element')) return { column: '', sentence: 'No column of species. Name one "species".' };
  const wavelengthUnit = spectralUnitNamed(wavelength.unit);
  if (!wavelengthUnit) {
    const said = wavelength.unit ? `"${wavelength.unit}" is no unit of wavelength that is known here.` : 'The wavelengths have no unit.';
    return { column: wavelength.name, sentence: `${said} Write it in the name of the column, as in "wavelength_vac [nm]".` };
  }
  const stated = isLength(wavelengthUnit) ? (wavelength.medium ?? medium) : 'vacuum';
  if (!stated) return { column: wavelength.name, sentence: 'Nothing says whether the wavelengths are in air or in vacuum. Choose which.' };
  const energies = (['lowerEnergy', 'upperEnergy'] as const).map((field) => energyFactorOf(column(field)));
  const faulty = energies.find((factor) => typeof factor !== 'number');
  if (faulty) return faulty as NoConvention;
  const [lowerEnergyFactor, upperEnergyFactor] = energies as [number, number];
  return { wavelengthUnit, medium: stated, lowerEnergyFactor, upperEnergyFactor, citation: citation.trim() };
}

function energyFactorOf(column: RecognisedColumn | undefined): number | NoConvention {
  if (!column) return 1;
  const factor = energyFactor(column.unit);
  if (factor !== null) return factor;
  const said = column.unit ? `"${column.unit}" is no unit of energy that is known here.` : 'The energies have no unit.';
  return { column: column.name, sentence: `${said} Write cm-1 or eV in the name of the column, as in "${column.name} [eV]".` };
}

function linesOf(table: TextTable, columns: readonly RecognisedColumn[], convention: Convention): ParsedLines {
  const lines: Line[] = [];
  const rowOf: number[] = [];
  const problems: RowProblem[] = [];
  const nameOf = (field: LineField) => columns.find((c) => c.field === field)?.name ?? '';
  for (const { at, cells } of table.rows) {
    const result = rowToLine(named(cells, columns), convention);
    if ('line' in result) {
      lines.push(result.line);
      rowOf.push(at);
    } else problems.push({ row: at, column: nameOf(result.field), sentence: result.sentence });
  }
  problems.push(...doubledIds(lines, rowOf, nameOf('id')));
  lines.sort((a, b) => a.wavelengthNm - b.wavelengthNm);
  return { lines, problems: problems.slice(0, MOST_PROBLEMS), problemCount: problems.length, notes: notesOf(table, columns, convention) };
}

const named = (cells: readonly string[], columns: readonly RecognisedColumn[]): Cells =>
  Object.fromEntries(columns.map(({ field, index }) => [field, (cells[index] ?? '').trim()]));

/** Ids of the file must differ; ids made here get a number where two lines would share one. Changes `lines`. */
function doubledIds(lines: Line[], rowOf: readonly number[], idColumn: string): RowProblem[] {
  const seen = new Map<string, number>();
  const doubled: RowProblem[] = [];
  lines.forEach((line, i) => {
    const count = (seen.get(line.id) ?? 0) + 1;
    seen.set(line.id, count);
    if (count === 1) return;
    if (idColumn)
      doubled.push({ row: rowOf[i]!, column: idColumn, sentence: `The id "${line.id}" stands on more than one row. Ids must differ.` });
    else lines[i] = { ...line, id: `${line.id}-${count}` };
  });
  return doubled;
}

function notesOf(table: TextTable, columns: readonly RecognisedColumn[], { wavelengthUnit, medium }: Convention): string[] {
  const has = (field: LineField) => columns.some((c) => c.field === field);
  const known = new Set(columns.map(({ index }) => index));
  const unused = table.columns.flatMap(({ name }, index) => (known.has(index) || name === '' ? [] : [`"${name}"`]));
  const notes = [
    `Wavelengths were taken as ${isLength(wavelengthUnit) ? `${medium} wavelengths` : 'vacuum wavenumbers'} from "${columns.find((c) => c.field === 'wavelength')!.name}".`,
  ];
  if (!has('settings')) notes.push('No column says where lines are met: that was taken from their type and lower energy.');
  if (!has('logGf') && !has('oscillatorStrength') && !has('relativeIntensity')) {
    notes.push('No column tells strengths, so that lines of this list are ranked by position alone.');
  }
  if (unused.length) notes.push(`Not used: ${unused.join(', ')}.`);
  return notes;
}
