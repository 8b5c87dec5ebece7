import type { ColumnInfo } from '../columns/choose.js';

/** Values of one column of a table, row after row; `lengths` is null where every row holds one value. */
export interface ColumnValues {
  readonly values: Float64Array;
  readonly lengths: Uint32Array | null;
}

/** A table of a FITS file, binary or ASCII: what its columns are called, and their values on request. */
export interface FitsTable {
  readonly infos: readonly ColumnInfo[];
  readonly rows: number;
  read(column: number): ColumnValues;
}
