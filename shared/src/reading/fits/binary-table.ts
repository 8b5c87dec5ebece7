import type { ReadContext } from '../context.js';
import type { ReadLimits } from '../limits.js';
import { quoted, refuse } from '../refusal.js';
import type { Hdu } from './hdu.js';
import { decode, type ElementLayout, type Scaling } from './decode.js';
import { elementBytes, parseBinaryFormat, type BinaryFormat } from './tform.js';
import type { ColumnValues, FitsTable } from './table.js';

interface BinaryColumn extends BinaryFormat {
  readonly offset: number;
  readonly scaling: Scaling;
}

const NUMERIC = new Set('L X B I J K E D'.split(' '));

/** A binary table, FITS Standard 4.0 section 7.3. The structure is checked as a whole before any value is read. */
export function binaryTable(hdu: Hdu, { bytes, limits }: ReadContext): FitsTable {
  const { header } = hdu;
  const { rowBytes, rows, fields } = tableSize(hdu);
  const columns: BinaryColumn[] = [];
  let offset = 0;
  for (let n = 1; n <= fields; n++) {
    const text = header.text(`TFORM${n}`);
    if (text === null) refuse('card_missing', `TFORM${n} is missing in ${hdu.place}, although TFIELDS = ${fields}.`, { card: `TFORM${n}` });
    const format = parseBinaryFormat(text, `TFORM${n}`);
    columns.push({ ...format, offset, scaling: scalingOf(hdu, n) });
    offset += format.width;
  }
  if (offset !== rowBytes)
    refuse('row_width', `The columns of ${hdu.place} (TFORM cards) take ${offset} bytes a row, but NAXIS1 says ${rowBytes}.`, {
      card: 'NAXIS1',
    });
  return {
    rows,
    infos: columns.map((column, i) => ({
      name: header.text(`TTYPE${i + 1}`) ?? `column ${i + 1}`,
      unit: header.text(`TUNIT${i + 1}`) ?? '',
      ucd: header.text(`TUCD${i + 1}`) ?? '',
      utype: header.text(`TUTYP${i + 1}`) ?? '',
      numeric: NUMERIC.has(column.heapCode ?? column.code) && column.repeat > 0,
    })),
    read: (index) => {
      const column = columns[index]!;
      return column.heapCode ? readHeap(bytes, hdu, column, rows, rowBytes, limits) : readFixed(bytes, hdu, column, rows, rowBytes, limits);
    },
  };
}

/** The cards that both kinds of table must have; BITPIX and NAXIS are fixed, or the size of the data would be another. */
export function tableSize({ header, place }: Hdu): { rowBytes: number; rows: number; fields: number } {
  for (const [card, value] of [
    ['BITPIX', 8],
    ['NAXIS', 2],
  ] as const)
    if (header.get(card) !== value) refuse('card_invalid', `${card} of the table in ${place} is invalid: it must be ${value}.`, { card });
  const fields = header.count('TFIELDS');
  if (fields > 999)
    refuse('card_invalid', `TFIELDS = ${fields} in ${place}: too many columns, the FITS Standard allows 999.`, { card: 'TFIELDS' });
  return { rowBytes: header.count('NAXIS1'), rows: header.count('NAXIS2'), fields };
}

function scalingOf(hdu: Hdu, n: number): Scaling {
  const { header } = hdu;
  return { scale: header.number(`TSCAL${n}`) ?? 1, zero: header.number(`TZERO${n}`) ?? 0, blank: header.number(`TNULL${n}`) };
}

function checkPoints(points: number, limits: ReadLimits) {
  if (points > limits.points)
    refuse(
      'too_large',
      `The table holds ${points} values in a column, more than the limit of ${limits.points}: too large for one spectrum.`,
    );
}

function readFixed(bytes: Uint8Array, hdu: Hdu, column: BinaryColumn, rows: number, rowBytes: number, limits: ReadLimits): ColumnValues {
  // the bits of one field are one number here: a mask is set where any bit is
  const perRow = column.code === 'X' ? 1 : column.repeat;
  checkPoints(rows * perRow, limits);
  const layout: ElementLayout = {
    code: column.code,
    bits: column.repeat,
    start: hdu.dataStart + column.offset,
    groups: rows,
    groupStride: rowBytes,
    perGroup: perRow,
  };
  const values = new Float64Array(rows * perRow);
  decode(bytes, layout, column.scaling, values, 0);
  return { values, lengths: perRow === 1 ? null : new Uint32Array(rows).fill(perRow) };
}

/** Variable-length arrays: each row holds a count and an offset into the heap, section 7.3.5. */
function readHeap(bytes: Uint8Array, hdu: Hdu, column: BinaryColumn, rows: number, rowBytes: number, limits: ReadLimits): ColumnValues {
  const tableBytes = rows * rowBytes;
  const gap = hdu.header.count('THEAP', tableBytes);
  if (gap < tableBytes || gap > hdu.dataBytes)
    refuse(
      'heap_outside',
      `THEAP = ${gap} in ${hdu.place} points outside the table's data (${hdu.dataBytes} bytes), so the variable-length columns have no heap.`,
      { card: 'THEAP' },
    );
  const heapBytes = hdu.dataBytes - gap;
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const size = elementBytes(column.heapCode!);
  const lengths = new Uint32Array(rows);
  const offsets = new Float64Array(rows);
  let total = 0;
  for (let row = 0; row < rows; row++) {
    const at = hdu.dataStart + row * rowBytes + column.offset;
    const [count, offset] =
      column.code === 'P' ? [view.getInt32(at), view.getInt32(at + 4)] : [Number(view.getBigInt64(at)), Number(view.getBigInt64(at + 8))];
    if (count < 0 || (count > 0 && (offset < 0 || offset + count * size > heapBytes)))
      refuse(
        'heap_outside',
        `The descriptor of a variable-length array in row ${row + 1} of ${hdu.place} (${quoted(String(count))} elements at byte ${offset}) points outside the heap of ${heapBytes} bytes.`,
        {
          row: row + 1,
        },
      );
    lengths[row] = count;
    offsets[row] = offset;
    total += count;
  }
  checkPoints(total, limits);
  const values = new Float64Array(total);
  let filled = 0;
  for (let row = 0; row < rows; row++) {
    const start = hdu.dataStart + gap + offsets[row]!;
    const layout: ElementLayout = { code: column.heapCode!, bits: 8, start, groups: lengths[row]!, groupStride: size, perGroup: 1 };
    decode(bytes, layout, column.scaling, values, filled);
    filled += lengths[row]!;
  }
  return { values, lengths };
}
