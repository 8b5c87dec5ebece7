import type { ReadLimits } from '../limits.js';
import { axisQuantity } from '../columns/words.js';
import { parseAxisUnit } from '../columns/axis-unit.js';
import { refuse } from '../refusal.js';
import type { ReadingCorrections } from '../types.js';
import type { TextBytes } from './decode.js';
import { detectDialect, isDataRow, splitLine, type Dialect } from './dialect.js';
import { readEcsv } from './ecsv.js';
import { isComment, Lines } from './lines.js';
import { parseHeading, splitHeadings, type Heading } from './names.js';
import { remarkText } from './remarks.js';

/** What stands in front of the rows of a text table, and how the rows are written. */
export interface Preamble {
  readonly dialect: Dialect;
  readonly remarks: readonly string[];
  /** null when the table has no heading line */
  readonly headings: readonly Heading[] | null;
  /** number of the first line of data, and some rows from there on */
  readonly firstLine: number;
  readonly sample: readonly string[][];
}

/** Lines of content that are looked at to learn the dialect, and remarks that are kept. */
const SAMPLE_LINES = 60;
const MOST_REMARKS = 5000;

interface ContentLine {
  readonly number: number;
  readonly text: string;
}

export function readPreamble(text: TextBytes, limits: ReadLimits, corrections: ReadingCorrections): Preamble {
  const { remarks, content } = firstLines(text, limits);
  if (content.length === 0) refuse('no_rows', 'The file has no data: it holds nothing but remarks or blank lines, no rows of numbers.');
  const ecsv = readEcsv(remarks);
  // headings may be written in another way than the rows, so the later lines decide
  const dialect = ecsv
    ? { delimiter: ecsv.delimiter, decimalComma: false }
    : detectDialect(
        content.slice(Math.floor(content.length / 3)).map((line) => line.text),
        corrections,
      );
  const rows = content.map((line) => splitLine(line.text, dialect));
  const widest = rows.reduce((most, row) => Math.max(most, row.length), 0);
  if (widest > limits.textColumns)
    refuse(
      'too_many_columns',
      `The table has ${widest} columns, too many: the limit is ${limits.textColumns}. Keep wavelength, flux and uncertainty.`,
    );
  const first = rows.findIndex((row) => isDataRow(row, dialect));
  if (first < 0) refuseNoData(rows);
  const above = content.slice(0, first);
  const headings = headingsOf(above, remarks, rows[first]!.length, dialect);
  return {
    dialect,
    remarks: [...remarks, ...above.map((line) => line.text)],
    headings:
      headings &&
      (ecsv
        ? headings.map((heading) => ({
            ...heading,
            unit: ecsv.units.get(heading.name) ?? heading.unit,
            notNumeric: ecsv.notNumeric.has(heading.name),
          }))
        : headings),
    firstLine: content[first]!.number,
    sample: rows.slice(first),
  };
}

function firstLines(text: TextBytes, limits: ReadLimits): { remarks: string[]; content: ContentLine[] } {
  const lines = new Lines(text.bytes, limits);
  const remarks: string[] = [];
  const content: ContentLine[] = [];
  while (content.length < SAMPLE_LINES && remarks.length < MOST_REMARKS && lines.advance()) {
    const ink = lines.firstInk();
    if (ink === lines.end) continue;
    const line = text.decode(text.bytes.subarray(lines.start, lines.end));
    if (!isComment(text.bytes, ink)) content.push({ number: lines.number, text: line });
    else if (content.length === 0) remarks.push(line);
  }
  return { remarks, content };
}

function refuseNoData(rows: readonly string[][]): never {
  if (rows.length === 1) refuse('no_rows', 'The file has no data: there are no rows of numbers below the headings.');
  refuse('no_numbers', 'No row of numbers was found in the text: a spectrum needs a numeric column of wavelengths and one of fluxes.');
}

/** Headings from the lines above the data, or from the last remark when it names as many columns. */
function headingsOf(above: readonly ContentLine[], remarks: readonly string[], cells: number, dialect: Dialect): Heading[] | null {
  const split = (line: string) => (dialect.delimiter === ' ' && !line.includes('"') ? splitHeadings(line) : splitLine(line, dialect));
  const last = above.at(-1);
  if (last) {
    const names = split(last.text);
    const before = above.at(-2);
    // a line of units below the line of names
    if (before && names.some((name) => parseAxisUnit(name.replace(/^[([]|[)\]]$/g, '')))) {
      const upper = split(before.text);
      if (upper.length === names.length)
        return upper.map((name, i) => ({ name: name.trim(), unit: names[i]!.replace(/^[([]|[)\]]$/g, '') }));
    }
    return names.map(parseHeading);
  }
  for (const remark of remarks.slice(-3).reverse()) {
    const line = remarkText(remark);
    for (const names of [split(line), splitHeadings(line), splitLine(line, { delimiter: ',', decimalComma: false })])
      if (names.length === cells && names.some((name) => axisQuantity(name))) return names.map(parseHeading);
  }
  return null;
}
