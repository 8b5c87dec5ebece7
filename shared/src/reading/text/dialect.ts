import Papa from 'papaparse';
import type { ReadingCorrections } from '../types.js';
import { parseCell } from './number.js';

/** How the cells of a line are told apart; ' ' stands for any run of blanks and tabs. */
export interface Dialect {
  readonly delimiter: NonNullable<ReadingCorrections['delimiter']>;
  readonly decimalComma: boolean;
}

const withoutQuoted = (line: string): string => (line.includes('"') ? line.replace(/"[^"]*"/g, '""') : line);

/** The cells of one line. Quotes count, except between blanks. */
export function splitLine(line: string, { delimiter }: Dialect): string[] {
  if (line.includes('"')) return (Papa.parse<string[]>(line.trim(), { delimiter }).data[0] ?? []).map((cell) => cell.trim());
  if (delimiter === ' ') return line.trim().split(/\s+/);
  return line.split(delimiter).map((cell) => cell.trim());
}

const DECIMAL_COMMA = /^[+-]?\d*,\d+(?:[eE][+-]?\d+)?$/;
const WHOLE = /^[+-]?\d+(?:[eE][+-]?\d+)?$/;

/** True when some cells are decimals with a comma and none has a point. */
function hasDecimalCommas(rows: readonly string[][]): boolean {
  const cells = rows.flat();
  return cells.some((cell) => DECIMAL_COMMA.test(cell)) && !cells.some((cell) => /\d\.\d/.test(cell) && !DECIMAL_COMMA.test(cell));
}

/** The dialect of a table as a person says it is, or from some of its lines, of which most are rows of numbers. */
export function detectDialect(lines: readonly string[], said: Pick<ReadingCorrections, 'delimiter' | 'decimalComma'>): Dialect {
  if (said.delimiter === undefined) {
    const found = detected(lines);
    return { ...found, decimalComma: said.decimalComma ?? found.decimalComma };
  }
  const rows = lines.map((line) => splitLine(line, { delimiter: said.delimiter!, decimalComma: false }));
  return { delimiter: said.delimiter, decimalComma: said.decimalComma ?? (said.delimiter !== ',' && hasDecimalCommas(rows)) };
}

function detected(lines: readonly string[]): Dialect {
  const bare = lines.map(withoutQuoted);
  const share = (character: string) => bare.filter((line) => line.includes(character)).length / Math.max(1, bare.length);
  for (const delimiter of [';', '\t', '|'] as const) {
    if (share(delimiter) < 0.8) continue;
    const dialect = { delimiter, decimalComma: false };
    const rows = lines.map((line) => splitLine(line, dialect));
    if (delimiter === '\t' && (!rows.some((row) => row.filter((cell) => cell !== '').length > 1) || rows.some(holdsTwoNumbers))) continue;
    return { delimiter, decimalComma: hasDecimalCommas(rows) };
  }
  if (share(',') < 0.5) return { delimiter: ' ', decimalComma: false };
  return blanksBetweenDecimalCommas(bare) ? { delimiter: ' ', decimalComma: true } : { delimiter: ',', decimalComma: false };
}

/** Blanks stand between numbers of one cell: then the tabs are blanks too. */
const holdsTwoNumbers = (row: readonly string[]): boolean => row.some((cell) => /^[+-]?[\d.,]+(?:[eE][+-]?\d+)? +[+-]?[\d.,]+/.test(cell));

/** '400,0000   2,269e-13': between blanks only whole numbers and decimals with a comma, at least two in a line. */
function blanksBetweenDecimalCommas(lines: readonly string[]): boolean {
  const rows = lines.map((line) => line.trim().split(/\s+/));
  const numbers = rows.filter((row) => row.length > 1 && row.every((cell) => DECIMAL_COMMA.test(cell) || WHOLE.test(cell)));
  return numbers.length > 0.6 * rows.length && hasDecimalCommas(numbers);
}

/** Whether a line is a row of data: two numbers or more, or one and nothing but missing values beside it. */
export function isDataRow(cells: readonly string[], { decimalComma }: Dialect): boolean {
  let numbers = 0;
  let texts = 0;
  for (const cell of cells) {
    const { kind } = parseCell(cell, decimalComma);
    if (kind === 'number' || kind === 'out_of_range') numbers++;
    else if (kind === 'text') texts++;
  }
  return numbers >= 2 || (numbers === 1 && texts === 0);
}
