import { refuse } from '../refusal.js';
import type { ColumnValues } from './table.js';

/** Which rows of a table with vector cells make the spectrum. */
export interface RowPick {
  /** the only row, from 0; null when all rows belong together or every row holds one value */
  readonly single: number | null;
  /** rows that can be read, from 0 */
  readonly rows: readonly number[];
  /** the rows are spectra of their own and not orders of one */
  readonly repeated: boolean;
  /** rows used, from 0; null: all */
  readonly used: readonly number[] | null;
  /** rows without at least two elements, left out */
  readonly skipped: number;
}

/** Rows whose ranges agree by more than this are different spectra of one range; less, they are orders of one spectrum. */
const SAME_RANGE = 0.8;

/** Decide by the ranges of the rows whether they are orders of one spectrum or spectra of their own. */
export function pickRows(axis: ColumnValues, wanted: number | null, place: string): RowPick {
  if (axis.lengths === null) return { single: null, rows: [], repeated: false, used: null, skipped: 0 };
  const rows: number[] = [];
  axis.lengths.forEach((length, row) => {
    if (length > 1) rows.push(row);
  });
  if (rows.length === 0) refuse('too_few_points', `No row of ${place} holds two points or more; a spectrum needs at least two.`);
  const skipped = axis.lengths.length - rows.length;
  if (wanted !== null && !rows.includes(wanted))
    refuse('place_not_found', `Row ${wanted + 1} of ${place} does not hold a spectrum.`, { row: wanted + 1 });
  if (rows.length === 1) return { single: skipped > 0 ? rows[0]! : null, rows, repeated: false, used: rows, skipped };
  const ranges = rangesOf(axis, rows);
  const repeated = ranges.slice(1).some((range) => sharedPart(ranges[0]!, range) > SAME_RANGE);
  if (wanted === null && !repeated) return { single: null, rows, repeated, used: rows, skipped };
  const single = wanted ?? rows[0]!;
  return { single, rows, repeated, used: [single], skipped };
}

type Range = readonly [number, number];

function rangesOf(axis: ColumnValues, rows: readonly number[]): Range[] {
  const starts = startsOf(axis.lengths!);
  return rows.map((row) => {
    let low = Infinity;
    let high = -Infinity;
    for (let i = starts[row]!; i < starts[row + 1]!; i++) {
      const value = axis.values[i]!;
      // zero pads the ends of vectors
      if (!Number.isFinite(value) || value === 0) continue;
      if (value < low) low = value;
      if (value > high) high = value;
    }
    return [low, high];
  });
}

function startsOf(lengths: Uint32Array): Uint32Array {
  const starts = new Uint32Array(lengths.length + 1);
  for (let row = 0; row < lengths.length; row++) starts[row + 1] = starts[row]! + lengths[row]!;
  return starts;
}

/** Length of the common part over the length of the shorter range. */
function sharedPart(a: Range, b: Range): number {
  const common = Math.min(a[1], b[1]) - Math.max(a[0], b[0]);
  return common / Math.min(a[1] - a[0], b[1] - b[0]);
}

/** The values of the picked rows, joined in row order. */
export function sliceRows(column: ColumnValues, pick: RowPick): Float64Array {
  if (column.lengths === null || pick.used === null || pick.used.length === column.lengths.length) return column.values;
  const starts = startsOf(column.lengths);
  const parts = pick.used.map((row) => column.values.subarray(starts[row]!, starts[row + 1]!));
  const out = new Float64Array(parts.reduce((sum, part) => sum + part.length, 0));
  let at = 0;
  for (const part of parts) {
    out.set(part, at);
    at += part.length;
  }
  return out;
}

/** Where each of several rows begins in the joined columns; null when one row or none of its own makes the spectrum. */
export function ordersOf(axis: ColumnValues, pick: RowPick): { from: number; name: string }[] | null {
  if (axis.lengths === null || pick.used === null || pick.used.length < 2) return null;
  let from = 0;
  return pick.used.map((row) => {
    const order = { from, name: `row ${row + 1}` };
    from += axis.lengths![row]!;
    return order;
  });
}
