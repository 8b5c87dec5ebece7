import Papa from 'papaparse';
import type { ReadLimits } from '../limits.js';
import { latin1 } from '../platform.js';
import { quoted, refuse } from '../refusal.js';
import type { ReadWarning } from '../types.js';
import type { TextBytes } from './decode.js';
import { isComment, Lines } from './lines.js';
import { parseCell, quickNumber, scan, scanNumber } from './number.js';
import type { Preamble } from './preamble.js';

/** Values of the wanted columns, row by row, with the line each row stands in. */
export interface TextRows {
  readonly columns: Float64Array[];
  readonly lines: Uint32Array;
  /** remarks between the rows */
  readonly remarks: readonly string[];
}

/** Unreadable cells beyond this share of the rows mean that the table is not one of numbers. */
const MOST_UNREADABLE = 0.2;
const NAMED_IN_SENTENCE = 3;

/** Collects the cells of the wanted columns; growing arrays, no object per row. */
class Sink {
  private capacity = 4096;
  private columns: Float64Array[];
  private lines = new Uint32Array(this.capacity);
  private rows = 0;
  private texts = 0;
  private readonly troubles: { line: number; column: string; cell: string }[] = [];
  private troubleCount = 0;
  private shortRows = 0;
  private firstShort = 0;
  /** cells of the current row that were given so far */
  private given = 0;

  constructor(
    private readonly names: readonly string[],
    private readonly headings: ReadonlySet<string>,
    private readonly limits: ReadLimits,
  ) {
    this.columns = names.map(() => new Float64Array(this.capacity));
  }

  startRow(line: number) {
    if (this.rows === this.capacity) this.grow();
    if (this.rows >= this.limits.points)
      refuse('too_large', `The table has more than ${this.limits.points} rows, the limit: too large for one spectrum.`, { row: line });
    this.lines[this.rows] = line;
    this.texts = 0;
    this.given = 0;
    for (const column of this.columns) column[this.rows] = NaN;
  }

  number(k: number, value: number) {
    this.columns[k]![this.rows] = value;
    this.given++;
  }

  cell(k: number, text: string, decimalComma: boolean) {
    const cell = parseCell(text, decimalComma);
    this.given++;
    if (cell.kind === 'number') this.columns[k]![this.rows] = cell.value;
    if (cell.kind === 'number' || cell.kind === 'missing') return;
    if (cell.kind === 'text' && this.headings.has(text.trim())) this.texts++;
    this.troubleCount++;
    if (this.troubles.length < 100) this.troubles.push({ line: this.lines[this.rows]!, column: this.names[k]!, cell: text });
  }

  endRow() {
    const line = this.lines[this.rows]!;
    if (this.texts >= 2)
      refuse(
        'repeated_header',
        `Line ${line} holds the column headings again: the file seems to be several tables one after the other. Upload them as separate files.`,
        { row: line },
      );
    if (this.given < this.columns.length) {
      this.shortRows++;
      this.firstShort ||= line;
    }
    this.rows++;
  }

  finish(warnings: ReadWarning[]): { columns: Float64Array[]; lines: Uint32Array } {
    this.report(warnings);
    return { columns: this.columns.map((column) => column.slice(0, this.rows)), lines: this.lines.slice(0, this.rows) };
  }

  private report(warnings: ReadWarning[]) {
    const first = this.troubles[0];
    if (first) {
      const named = this.troubles
        .slice(0, NAMED_IN_SENTENCE)
        .map((one) => `line ${one.line}, column ${quoted(one.column)}: "${quoted(one.cell, 20)}"`);
      const more = this.troubleCount > named.length ? ` and ${this.troubleCount - named.length} more` : '';
      const what = `${this.troubleCount} cells are not numbers or out of range (${named.join('; ')}${more})`;
      if (this.troubleCount > MOST_UNREADABLE * this.rows * this.columns.length)
        refuse('not_numbers', `${what}: too many for a table of numbers. Check the columns and the delimiter.`, {
          row: first.line,
          column: first.column,
        });
      warnings.push({ code: 'bad_number', sentence: `${what}; they count as missing.`, row: first.line, column: first.column });
    }
    if (this.shortRows > 0)
      warnings.push({
        code: 'short_row',
        sentence: `${this.shortRows} rows have fewer cells than the columns need (first: line ${this.firstShort}); what is missing counts as missing.`,
        row: this.firstShort,
      });
  }

  private grow() {
    this.capacity *= 2;
    const longer = (old: Float64Array) => {
      const column = new Float64Array(this.capacity);
      column.set(old);
      return column;
    };
    this.columns = this.columns.map(longer);
    const lines = new Uint32Array(this.capacity);
    lines.set(this.lines);
    this.lines = lines;
  }
}

/** Reads the rows from the first line of data on; `wanted` are column indices, `names` what they are called. */
export function readRows(
  text: TextBytes,
  preamble: Preamble,
  wanted: readonly number[],
  names: readonly string[],
  limits: ReadLimits,
  warnings: ReadWarning[],
): TextRows {
  const headings = new Set(preamble.headings?.map((heading) => heading.name) ?? []);
  const sink = new Sink(names, headings, limits);
  const lines = new Lines(text.bytes, limits);
  while (lines.number < preamble.firstLine - 1) lines.advance();
  const remarks =
    text.bytes.indexOf(0x22, lines.end) < 0
      ? readPlain(text, lines, preamble, wanted, sink)
      : readQuoted(text, lines, preamble, wanted, sink);
  return { ...sink.finish(warnings), remarks };
}

const MOST_REMARKS = 1000;

/** No quotes: cells are found and turned into numbers byte by byte, each byte looked at once where all goes well. */
function readPlain(text: TextBytes, lines: Lines, { dialect }: Preamble, wanted: readonly number[], sink: Sink): string[] {
  const { bytes } = text;
  const remarks: string[] = [];
  const blanks = dialect.delimiter === ' ';
  const delimiter = dialect.delimiter.charCodeAt(0);
  const point = dialect.decimalComma ? 0x2c : 0x2e;
  const slots = slotsOf(wanted);
  while (lines.advance()) {
    const ink = lines.firstInk();
    const { end } = lines;
    if (ink === end) continue;
    if (isComment(bytes, ink)) {
      if (remarks.length < MOST_REMARKS) remarks.push(text.decode(bytes.subarray(lines.start, end)));
      continue;
    }
    sink.startRow(lines.number);
    let at = blanks ? ink : lines.start;
    for (let column = 0; column < slots.length && at <= end; column++) {
      const slot = slots[column]!;
      if (slot >= 0) {
        let from = at;
        if (!blanks) while (from < end && isBlank(bytes[from]!) && bytes[from] !== delimiter) from++;
        const value = scanNumber(bytes, from, end, point);
        const stop = scan.stop;
        if (!Number.isNaN(value) && (stop === end || bytes[stop] === delimiter || (blanks && isBlank(bytes[stop]!)))) {
          sink.number(slot, value);
          at = blanks ? afterBlanks(bytes, stop + 1, end) : stop + 1;
          continue;
        }
      }
      const stop = cellEnd(bytes, at, end, blanks, delimiter);
      if (blanks && stop === at) break;
      if (slot >= 0) giveCell(at, stop, slot);
      at = blanks ? afterBlanks(bytes, stop + 1, end) : stop + 1;
    }
    sink.endRow();
  }
  return remarks;

  /** A cell that the quick way does not read: blanks around a number, a missing value, more digits than a double, or text. */
  function giveCell(from: number, to: number, slot: number) {
    while (from < to && isBlank(bytes[from]!)) from++;
    while (to > from && isBlank(bytes[to - 1]!)) to--;
    const value = quickNumber(bytes, from, to, point);
    if (Number.isNaN(value)) sink.cell(slot, latin1(bytes, from, Math.min(to, from + 400)), dialect.decimalComma);
    else sink.number(slot, value);
  }
}

const isBlank = (byte: number): boolean => byte === 0x20 || byte === 0x09;

function afterBlanks(bytes: Uint8Array, from: number, end: number): number {
  let at = from;
  while (at < end && isBlank(bytes[at]!)) at++;
  return at;
}

function cellEnd(bytes: Uint8Array, from: number, end: number, blanks: boolean, delimiter: number): number {
  let stop = from;
  if (blanks) while (stop < end && !isBlank(bytes[stop]!)) stop++;
  else while (stop < end && bytes[stop] !== delimiter) stop++;
  return stop;
}

/** For each column of the file the place among the wanted ones, or -1; up to the last wanted. */
function slotsOf(wanted: readonly number[]): number[] {
  const slots = new Array<number>(Math.max(...wanted) + 1).fill(-1);
  wanted.forEach((column, k) => (slots[column] = k));
  return slots;
}

/** Quotes may hold delimiters and line ends: papaparse takes the lines apart, one at a time. */
function readQuoted(text: TextBytes, lines: Lines, { dialect, firstLine }: Preamble, wanted: readonly number[], sink: Sink): string[] {
  const from = lines.number === 0 ? 0 : lines.end + (text.bytes[lines.end] === 0x0d && text.bytes[lines.end + 1] === 0x0a ? 2 : 1);
  const remarks: string[] = [];
  let line = firstLine - 1;
  Papa.parse<string[]>(text.decode(text.bytes.subarray(from)), {
    delimiter: dialect.delimiter,
    step: ({ data }) => {
      line++;
      const [first = ''] = data;
      if (data.length === 1 && first.trim() === '') return;
      if (/^\s*(?:[#%!\\]|\/\/)/.test(first)) {
        if (remarks.length < MOST_REMARKS) remarks.push(data.join(dialect.delimiter));
        return;
      }
      sink.startRow(line);
      wanted.forEach((column, k) => {
        const cell = data[column];
        if (cell !== undefined) sink.cell(k, cell, dialect.decimalComma);
      });
      sink.endRow();
    },
  });
  return remarks;
}
