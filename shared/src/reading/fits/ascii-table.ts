import type { ReadContext } from '../context.js';
import { latin1 } from '../platform.js';
import { quoted, refuse } from '../refusal.js';
import { tableSize } from './binary-table.js';
import type { Hdu } from './hdu.js';
import type { ColumnValues, FitsTable } from './table.js';

interface AsciiColumn {
  /** first byte in a row, from 0 */
  readonly start: number;
  readonly width: number;
  /** digits behind an implied decimal point */
  readonly decimals: number;
  readonly numeric: boolean;
  readonly scale: number;
  readonly zero: number;
  readonly blank: string | null;
}

/** An ASCII table, FITS Standard 4.0 section 7.2. */
export function asciiTable(hdu: Hdu, { bytes, limits }: ReadContext): FitsTable {
  const { header } = hdu;
  const { rowBytes, rows, fields } = tableSize(hdu);
  if (rows > limits.points)
    refuse('too_large', `${hdu.place} has ${rows} rows, more than the limit of ${limits.points}: too large for one spectrum.`);
  const columns = Array.from({ length: fields }, (_, i) => asciiColumn(hdu, i + 1, rowBytes));
  return {
    rows,
    infos: columns.map((column, i) => ({
      name: header.text(`TTYPE${i + 1}`) ?? `column ${i + 1}`,
      unit: header.text(`TUNIT${i + 1}`) ?? '',
      ucd: header.text(`TUCD${i + 1}`) ?? '',
      utype: header.text(`TUTYP${i + 1}`) ?? '',
      numeric: column.numeric,
    })),
    read: (index) => readColumn(bytes, hdu, columns[index]!, rows, rowBytes),
  };
}

function asciiColumn(hdu: Hdu, n: number, rowBytes: number): AsciiColumn {
  const { header } = hdu;
  const text = header.text(`TFORM${n}`);
  if (text === null)
    refuse('card_missing', `TFORM${n} is missing in ${hdu.place}, although TFIELDS says that there is such a column.`, {
      card: `TFORM${n}`,
    });
  const match = /^([AIFED])(\d{1,4})(?:\.(\d{1,3}))?$/.exec(text);
  if (!match) refuse('bad_format', `TFORM${n} = '${quoted(text)}' is not a column format of an ASCII table.`, { card: `TFORM${n}` });
  const start = header.count(`TBCOL${n}`) - 1;
  const width = Number(match[2]);
  if (start < 0 || start + width > rowBytes)
    refuse('row_width', `Column ${n} of ${hdu.place} (TBCOL${n}, TFORM${n}) does not fit into a row of ${rowBytes} characters.`, {
      card: `TBCOL${n}`,
    });
  return {
    start,
    width,
    decimals: match[1] === 'I' ? 0 : Number(match[3] ?? 0),
    numeric: match[1] !== 'A',
    scale: header.number(`TSCAL${n}`) ?? 1,
    zero: header.number(`TZERO${n}`) ?? 0,
    blank: header.text(`TNULL${n}`),
  };
}

function readColumn(bytes: Uint8Array, hdu: Hdu, column: AsciiColumn, rows: number, rowBytes: number): ColumnValues {
  const values = new Float64Array(rows);
  for (let row = 0; row < rows; row++) {
    const at = hdu.dataStart + row * rowBytes + column.start;
    const field = latin1(bytes, at, at + column.width).trim();
    values[row] = field === '' || field === column.blank ? NaN : fortranNumber(field, column.decimals) * column.scale + column.zero;
  }
  return { values, lengths: null };
}

/** A number as Fortran writes it: D exponents, and a decimal point implied when none is written. NaN when it is no number. */
function fortranNumber(field: string, decimals: number): number {
  const match = /^([+-]?(?:\d+\.?\d*|\.\d+))(?:[ED]?([+-]?\d+))?$/i.exec(field);
  if (!match) return NaN;
  const written = field.includes('.');
  const value = Number(`${match[1]}e${Number(match[2] ?? 0)}`);
  return written || decimals === 0 ? value : value / 10 ** decimals;
}
